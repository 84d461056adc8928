// Flat panels as they are cut: outline, net line, marks, names. One scale for all; warp runs along x.
import type { SeenPanel } from "../../core/plan/dragSeam.ts";
import type { FactsPanel, Vec2 } from "../../core/records/facts.ts";
import { pointing } from "../parts/pointing.ts";
import { pressed } from "../parts/pressed.ts";
import { bookStore } from "../store/bookStore.ts";
import { useBook } from "../store/useBook.ts";
import { namePlace } from "./namePlace.ts";
import { stackPanels } from "./stackPanels.ts";

/** Width of the stage over its height, about: between a desk's and a tablet's. */
const SHAPE = 1.25;

const path = (points: readonly Vec2[], closed: boolean) =>
  points.map(([x, y], i) => `${i === 0 ? "M" : "L"}${x.toFixed(1)} ${(-y).toFixed(1)}`).join("") + (closed ? "Z" : "");

/** Middle of a run of points. */
function middle(points: readonly Vec2[]): Vec2 {
  return points[Math.floor(points.length / 2)] ?? [0, 0];
}

function sideLine(panel: SeenPanel, side: SeenPanel["sides"][number]): Vec2[] {
  const { net } = panel;
  const out: Vec2[] = [];
  for (let k = side.netFrom; ; k = (k + 1) % net.length) {
    out.push(net[k]);
    if (k === side.netTo) break;
  }
  return out;
}

/** One panel in its own axes, mm, y up. `detail`: with marks. */
export function PanelDrawing({ panel, detail }: { panel: SeenPanel; detail: boolean }) {
  const pointed = useBook((b) => b.pointed);
  return (
    <>
      <path className="cut" d={path(panel.cut, true)} />
      {panel.sides.map((side) => (
        <path
          key={`${side.id} ${side.netFrom}`}
          className={`side ${side.kind}${side.id === pointed ? " lit" : ""}`}
          d={path(sideLine(panel, side), false)}
          onPointerEnter={() => bookStore.setState({ pointed: side.id })}
          onPointerLeave={() => bookStore.setState({ pointed: panel.id })}
        />
      ))}
      {detail &&
        panel.marks.map((m, i) =>
          m.points === undefined ? null : (
            // biome-ignore lint/suspicious/noArrayIndexKey: marks have no names
            <path key={i} className={m.kind === "slit" ? "slit" : "pen"} d={path(m.points, false)} />
          ),
        )}
      {/* once more on top: without an allowance the net line would lie over it */}
      <path className="cutline" d={path(panel.cut, true)} />
    </>
  );
}

/** Names of the sides, beside the panel: words in a button would have to be said with its own name. */
function SideNames({ panel, size }: { panel: SeenPanel; size: number }) {
  return panel.sides.map((side) => {
    const [x, y] = middle(sideLine(panel, side));
    return (
      <text key={`${side.id} ${side.netFrom}`} x={x} y={-y} fontSize={size * 0.8} className="side-name">
        {side.id}
      </text>
    );
  });
}

/** The name of a panel, its middle at a place of the panel's own axes. */
export function PanelName({ id, at: [x, y], height }: { id: string; at: Vec2; height: number }) {
  return (
    <text x={x} y={-y} fontSize={height} className="panel-name">
      {id}
    </text>
  );
}

/** Where the cut cloth lies in its own axes, mm. */
export function boxOf(panel: SeenPanel): { x: number; y: number; w: number; h: number } {
  const xs = panel.cut.map((p) => p[0]);
  const ys = panel.cut.map((p) => p[1]);
  const [x, y] = [Math.min(...xs), Math.min(...ys)];
  return { x, y, w: Math.max(...xs) - x, h: Math.max(...ys) - y };
}

/** All panels at one scale, or the chosen one alone. */
export function PanelSheet({ panels, alone }: { panels: readonly FactsPanel[]; alone: string | null }) {
  const pointed = useBook((b) => b.pointed);
  const shown = alone === null ? panels : panels.filter((p) => p.id === alone);
  const boxes = shown.map(boxOf);
  const gap = alone === null ? 350 : 100;
  const { at, width, height } = stackPanels(boxes, gap, SHAPE);
  const size = Math.max(width, height) / 45;
  // no name is higher than half the cloth it stands on
  const letter = Math.min(1.5 * size, ...shown.map((p) => 0.5 * namePlace(p.cut).room));
  const nameAt = (p: FactsPanel) => {
    const runs = alone === null ? [] : p.marks.flatMap((m) => (m.points === undefined ? [] : [m.points]));
    return namePlace(p.cut, { runs, name: p.id, height: letter }).at;
  };
  return (
    <svg
      className="sheet"
      viewBox={`0 0 ${width.toFixed(0)} ${height.toFixed(0)}`}
      role="group"
      aria-label="Flat panels"
    >
      {shown.map((p, i) => (
        <g
          key={p.id}
          className={p.id === pointed && alone === null ? "panel lit" : "panel"}
          transform={`translate(${at[i].x - boxes[i].x} ${at[i].y + boxes[i].h + boxes[i].y})`}
        >
          <g
            role="button"
            tabIndex={0}
            aria-label={`Panel ${p.id}, ${(p.size.length / 1000).toFixed(2)} by ${(p.size.width / 1000).toFixed(2)} metres`}
            aria-pressed={alone === p.id}
            onClick={() => bookStore.setState({ chosen: alone === p.id ? null : p.id })}
            onKeyDown={pressed(() => bookStore.setState({ chosen: alone === p.id ? null : p.id }))}
            {...pointing(p.id)}
          >
            <PanelDrawing panel={p} detail={alone !== null} />
            <PanelName id={p.id} at={nameAt(p)} height={letter} />
          </g>
          {alone !== null && <SideNames panel={p} size={size} />}
        </g>
      ))}
    </svg>
  );
}
