// A roll with what lies on it, in rows like a text. Panels are moved with the pointer or the arrow keys and then stay pinned.
import { useId, useRef, useState } from "react";
import type { Facts, Vec2 } from "../../core/records/facts.ts";
import type { NestedRoll, Placement } from "../../core/records/roll.ts";
import { setPin } from "../actions/rolls/setPin.ts";
import { pointing } from "../parts/pointing.ts";
import { pressed } from "../parts/pressed.ts";
import { act, bookStore } from "../store/bookStore.ts";
import { useBook } from "../store/useBook.ts";
import { namePlace } from "./namePlace.ts";
import { pieceLabel } from "./pieceLabel.ts";
import { pinPlace } from "./pinPlace.ts";
import { type RollRow, rollRows } from "./rollRows.ts";
import { useScale } from "./useScale.ts";

interface Drag {
  panel: string;
  from: { x: number; y: number };
  by: { x: number; y: number };
}

const GAP = 0.3;

/** Cut outline of what is placed, on the roll, y downwards. */
function outline(cut: readonly Vec2[], p: Placement, by: { x: number; y: number }): string {
  const turn = p.rotation === 180 ? -1 : 1;
  return `${cut.map(([x, y], i) => `${i === 0 ? "M" : "L"}${(turn * x + p.x + by.x).toFixed(1)} ${(turn * y + p.y + by.y).toFixed(1)}`).join("")}Z`;
}

/** Where the name of what is placed stands, on the roll, and how much cloth there is for it, mm. */
function nameOn(cut: readonly Vec2[], p: Placement): { at: Vec2; room: number } {
  const turn = p.rotation === 180 ? -1 : 1;
  const { at, room } = namePlace(cut);
  return { at: [turn * at[0] + p.x, turn * at[1] + p.y], room };
}

/** Middle of a label that no end of its row cuts off, on the roll, mm. */
function withinRow(x: number, { words, height }: { words: string; height: number }, row: RollRow): number {
  const half = 0.35 * words.length * height;
  return Math.max(row.from + half, Math.min(row.to - half, x));
}

/** Pins a placed panel where it lies, moved by dx, dy mm. */
function pin(roll: NestedRoll, p: Placement, cut: readonly Vec2[], by: { dx: number; dy: number }): void {
  act(setPin, { panel: p.panel, place: pinPlace(roll, p, cut, by) }, `${p.panel} pinned`);
}

const STEPS: Record<string, [number, number]> = {
  ArrowLeft: [-1, 0],
  ArrowRight: [1, 0],
  ArrowUp: [0, 1],
  ArrowDown: [0, -1],
};

function PlacedPiece(props: {
  roll: NestedRoll;
  placement: Placement;
  cut: readonly Vec2[];
  row: RollRow;
  clip: string;
  scale: number;
  drag: Drag | null;
  onGrab: (e: React.PointerEvent, p: Placement) => void;
  first: boolean;
}) {
  const { roll, placement: p, cut, row, clip, scale, drag, onGrab, first } = props;
  const pointed = useBook((b) => b.pointed);
  const chosen = useBook((b) => b.chosen);
  const pinned = useBook((b) => b.project?.job.nest?.pins?.some((q) => q.panel === p.panel) ?? false);
  const by = drag?.panel === p.panel ? drag.by : { x: 0, y: 0 };
  const {
    at: [x, y],
    room,
  } = nameOn(cut, p);
  const lit = p.panel === pointed || p.panel === chosen;
  const here = x >= row.from && x < row.to;
  const xs = cut.map((q) => q[0]);
  const length = Math.max(...xs) - Math.min(...xs);
  const label = here ? pieceLabel(`${p.panel}${pinned ? " ⚲" : ""}`, p.order, { length, across: room, scale }) : null;
  const choose = pressed(() => bookStore.setState({ chosen: p.panel }));
  return (
    <g clipPath={`url(#${clip})`}>
      <g
        className={`placed${lit ? " lit" : ""}${pinned ? " pinned" : ""}`}
        role="button"
        tabIndex={first ? 0 : -1}
        aria-label={`${p.panel} on ${roll.id} at ${(p.x / 1000).toFixed(2)} m${p.order === undefined ? "" : `, cut as no. ${p.order}`}${pinned ? ", pinned" : ""}. Arrow keys move it by 10 mm and pin it, with Shift by 100; Delete lets it go.`}
        onPointerDown={(e) => onGrab(e, p)}
        {...pointing(p.panel)}
        onKeyDown={(e) => {
          const step = STEPS[e.key];
          if (e.key === "Delete") act(setPin, { panel: p.panel, place: null }, `${p.panel} let go`);
          if (step === undefined) return choose(e);
          e.preventDefault();
          const by = e.shiftKey ? 100 : 10;
          pin(roll, p, cut, { dx: by * step[0], dy: by * step[1] });
        }}
      >
        <title>{p.panel}</title>
        <path d={outline(cut, p, by)} />
        {label !== null && (
          <text
            x={withinRow(x, label, row) + by.x}
            y={-(y + by.y)}
            transform="scale(1 -1)"
            fontSize={label.height}
            className="panel-name"
          >
            {label.words}
          </text>
        )}
      </g>
    </g>
  );
}

/** Cloth of one row: selvedges, bed, flaws, where the used length ends. */
function RowCloth({ roll, row, clip, scale }: { roll: NestedRoll; row: RollRow; clip: string; scale: number }) {
  const edge = (roll.width - roll.usableWidth) / 2;
  const length = Math.max(Math.min(row.to, roll.length) - row.from, 0);
  return (
    <>
      <clipPath id={clip}>
        <rect x={row.from} y={-edge - 0.1 * roll.width} width={row.to - row.from} height={1.2 * roll.width} />
      </clipPath>
      <rect className="selvedge" x={row.from} y={-edge} width={length} height={roll.width} />
      <rect className="bed" x={row.from} y={0} width={length} height={roll.usableWidth} />
      {roll.flaws.map((f) => (
        <rect
          key={`${f.x} ${f.y}`}
          className="flaw"
          clipPath={`url(#${clip})`}
          x={f.x}
          y={f.y}
          width={f.length}
          height={f.width}
        />
      ))}
      <line
        className="used"
        x1={roll.used}
        x2={roll.used}
        y1={-edge}
        y2={roll.width - edge}
        clipPath={`url(#${clip})`}
      />
      <text
        x={row.from}
        y={-(1.03 * roll.width - edge)}
        transform="scale(1 -1)"
        fontSize={Math.min(0.1 * roll.width, 13 / scale)}
        className="metre"
      >
        {(row.from / 1000).toFixed(1)} m
      </text>
    </>
  );
}

/** One roll. */
export function RollSheet({ facts, roll, shape }: { facts: Facts; roll: NestedRoll; shape: number }) {
  const svg = useRef<SVGSVGElement>(null);
  const [drag, setDrag] = useState<Drag | null>(null);
  // what is in hand now: on a busy machine the drawing lags behind it
  const held = useRef<Drag | null>(null);
  const hold = (next: Drag | null) => {
    held.current = next;
    setDrag(next);
  };
  const id = useId();
  const rows = rollRows(roll.used, roll.width, shape);
  const span = rows[0].to - rows[0].from;
  const pitch = roll.width * (1 + GAP);
  const cuts = new Map([...(facts.panels ?? []), ...(facts.pieces ?? [])].map((p) => [p.id, p.cut]));
  const edge = (roll.width - roll.usableWidth) / 2;
  const [wide, high] = [1.04 * span, rows.length * pitch];
  const scale = useScale(svg, wide, high);
  const place = (e: { clientX: number; clientY: number }) => {
    const matrix = svg.current?.getScreenCTM()?.inverse();
    const p = new DOMPoint(e.clientX, e.clientY).matrixTransform(matrix);
    return { x: p.x, y: -p.y };
  };
  const grab = (e: React.PointerEvent, p: Placement) => {
    if (e.button !== 0) return;
    svg.current?.setPointerCapture(e.pointerId);
    hold({ panel: p.panel, from: place(e), by: { x: 0, y: 0 } });
  };
  const wayOf = (e: React.PointerEvent, { from }: Drag) => ({ x: place(e).x - from.x, y: place(e).y - from.y });
  const drop = (e: React.PointerEvent) => {
    const taken = held.current;
    const p = roll.placements.find((q) => q.panel === taken?.panel);
    hold(null);
    if (taken === null || p === undefined) return;
    const by = wayOf(e, taken);
    // Rows crossed on the way count as lengths of roll.
    const jump = Math.round(by.y / pitch);
    const [dx, dy] = [by.x - jump * span, by.y - jump * pitch];
    if (Math.hypot(dx, dy) > 5 || jump !== 0) pin(roll, p, cuts.get(p.panel) ?? [], { dx, dy });
    else bookStore.setState({ chosen: p.panel });
  };
  return (
    <svg
      ref={svg}
      className="sheet roll"
      viewBox={`${-0.02 * span} ${-0.14 * roll.width} ${wide} ${high}`}
      role="group"
      aria-label={`Roll ${roll.id}, ${(roll.used / 1000).toFixed(2)} metres used`}
      onPointerMove={(e) => held.current && hold({ ...held.current, by: wayOf(e, held.current) })}
      onPointerUp={drop}
      onPointerCancel={() => hold(null)}
    >
      {rows.map((row, i) => (
        <g key={row.from} transform={`translate(${-row.from} ${i * pitch + roll.width - edge}) scale(1 -1)`}>
          <RowCloth roll={roll} row={row} clip={`${id}r${i}`} scale={scale} />
          {roll.placements.map((p) => {
            const cut = cuts.get(p.panel) ?? [];
            const [middle] = nameOn(cut, p).at;
            return (
              <PlacedPiece
                key={p.panel}
                {...{ roll, placement: p, cut, row, scale, drag }}
                clip={`${id}r${i}`}
                onGrab={grab}
                first={middle >= row.from && middle < row.to}
              />
            );
          })}
        </g>
      ))}
    </svg>
  );
}

/** What the drawing of a roll shows by which look. */
export function RollKey({ roll }: { roll: NestedRoll }) {
  const pinned = useBook((b) => b.project?.job.nest?.pins?.some((p) => p.roll === roll.id) ?? false);
  const lit = useBook((b) => {
    const find = (id: string | null) => roll.placements.find((p) => p.panel === id);
    return find(b.pointed) ?? find(b.chosen);
  });
  const items: [string, string][] = [
    ["placed", "panel"],
    ["bed", "offcut"],
    ["used", "cut off the roll here"],
  ];
  if (pinned) items.splice(1, 0, ["placed pinned", "pinned"]);
  if (roll.flaws.length > 0) items.push(["flaw", "flaw, kept clear"]);
  return (
    <ul className="rollkey" aria-label="What the roll shows">
      {items.map(([look, words]) => (
        <li key={look}>
          <svg className="swatch" viewBox="0 0 28 14" aria-hidden="true">
            {look === "used" ? (
              <line className={look} x1={14} x2={14} y1={0} y2={14} />
            ) : (
              <g className={look === "placed pinned" ? "cloth held" : look === "placed" ? "cloth" : look}>
                <path d="M1 1H27V13H1Z" />
              </g>
            )}
          </svg>
          {words}
        </li>
      ))}
      <li>
        {lit === undefined
          ? "Numbers: order of cutting, names in the list."
          : `Lit up: ${lit.panel}, cut as no. ${lit.order}.`}
      </li>
      <li>Drag a panel to pin it where it lies.</li>
    </ul>
  );
}
