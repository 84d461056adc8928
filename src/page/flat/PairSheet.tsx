// The two panels of one seam flat beside the surface: as planned, or as they are redrawn while the seam's end is slid.
import { useMemo, useRef } from "react";
import type { SeenPanel } from "../../core/plan/dragSeam.ts";
import { figure } from "../parts/figure.ts";
import { isSameWork } from "../store/hand.ts";
import { useBook } from "../store/useBook.ts";
import { useRoom } from "../store/useRoom.ts";
import { namePlace } from "./namePlace.ts";
import { boxOf, PanelDrawing, PanelName } from "./PanelSheet.tsx";

const GAP = 250;
const NONE: SeenPanel[] = [];

/** The seam that is looked at, and its panels as they are known now: the same ones until others are drawn. */
function usePair(): { weld: string | null; panels: readonly SeenPanel[] } {
  const held = useBook((b) => (b.hand !== null && b.hand.panels.length > 0 ? b.hand.weld : null));
  const drawn = useBook((b) => b.hand?.panels ?? NONE);
  const chosen = useBook((b) => b.chosen);
  // once the plan of a tied roof stands, it says the same and more
  const tied = useBook((b) => (isSameWork(b.tied?.of, b.project) && !isSameWork(b.planned, b.project) ? b.tied : null));
  const facts = useBook((b) => b.facts);
  return useMemo(() => {
    if (held !== null && tied === null) return { weld: held, panels: drawn };
    const seams = tied?.seams ?? facts?.seams ?? [];
    const seam = seams.find((s) => s.id === chosen);
    if (seam === undefined) return { weld: null, panels: NONE };
    const ids = new Set(seams.filter((s) => s.weld === seam.weld).flatMap((s) => s.sides.map((side) => side.panel)));
    return { weld: seam.weld, panels: (tied?.panels ?? facts?.panels ?? NONE).filter((p) => ids.has(p.id)) };
  }, [held, drawn, chosen, tied, facts]);
}

/** What goes on, in one sentence. */
function useWords(weld: string | null): { words: string; grave: boolean } {
  const hand = useBook((b) => b.hand);
  const tied = useBook((b) => (isSameWork(b.tied?.of, b.project) ? b.tied : null));
  const status = useBook((b) => b.status);
  const grips = useBook((b) => (isSameWork(b.grips?.of, b.project) ? b.grips : null));
  if (hand !== null && hand.laid === null) {
    const { edge, at } = hand.to[hand.end];
    if (hand.fault !== null) return { words: hand.fault, grave: true };
    return {
      words: `${hand.weld} ends ${figure(100 * at, 2)} % along ${edge}; all other seams are held.`,
      grave: false,
    };
  }
  const can = grips?.welds.some((g) => g.weld === weld) === true;
  if (tied !== null && (status === "running" || weld === null || can))
    return {
      words: `The whole roof is tied again, ${tied.panels.length} panels${status === "running" ? "; rolls and rig follow" : ""}.`,
      grave: false,
    };
  if (hand !== null) return { words: "The whole roof is being tied again…", grave: false };
  if (grips === null || grips.welds.length === 0)
    return { words: "Choose a seam to see its two panels.", grave: false };
  if (weld === null || can)
    return {
      words: "Slide a seam's end along its edge, with the pointer or the arrow keys; its two panels follow here.",
      grave: false,
    };
  return { words: `${weld} cannot be slid by itself: it follows a cable or ends on another seam.`, grave: false };
}

/** The drawing; its scale stays while one seam is looked at, so that what changes is the panels. */
function Drawing({ panels }: { panels: readonly SeenPanel[] }) {
  const boxes = panels.map(boxOf);
  const room = useRef({ w: 0, h: 0 });
  const w = Math.max(...boxes.map((b) => b.w)) + 2 * GAP;
  const tall = boxes.map((b) => b.h + GAP);
  const h = tall.reduce((sum, t) => sum + t, GAP);
  if (w > room.current.w || h > room.current.h)
    room.current = { w: Math.max(w, room.current.w) * 1.03, h: Math.max(h, room.current.h) * 1.03 };
  const { w: wide, h: high } = room.current;
  const size = Math.max(wide, high) / 30;
  let y = GAP;
  return (
    <svg
      className="sheet pair"
      viewBox={`0 0 ${wide.toFixed(0)} ${high.toFixed(0)}`}
      role="img"
      aria-label="Its panels flat"
    >
      {panels.map((p, i) => {
        const top = y;
        y += tall[i];
        const b = boxes[i];
        return (
          <g key={p.id} className="panel" transform={`translate(${GAP - b.x} ${top + b.h + b.y})`}>
            <PanelDrawing panel={p} detail={false} />
            <PanelName id={p.id} at={namePlace(p.cut).at} height={1.5 * size} />
          </g>
        );
      })}
    </svg>
  );
}

function Words({ weld }: { weld: string | null }) {
  const { words, grave } = useWords(weld);
  return (
    <p className={grave ? "fault" : "hint"} role="status">
      {words}
    </p>
  );
}

/** The sheet beside the surface. */
export function PairSheet() {
  const { weld, panels } = usePair();
  const room = useRoom();
  return (
    <aside className="beside" aria-label="Panels of the seam">
      <Words weld={weld} />
      {panels.length > 0 && <Drawing key={weld} panels={panels} />}
      {panels.length > 0 && (
        <table className="figures">
          <caption>Cut, mm; stress as patterned, kN/m</caption>
          <tbody>
            {panels.map((p) => {
              const wide = room !== null && p.size.width > 1000 * room.cut;
              return (
                <tr key={p.id} className={wide ? "fails" : undefined}>
                  <th scope="row">
                    {p.id}
                    {wide && <span className="against">the cloth takes {figure(1000 * room.cut, 0)}</span>}
                  </th>
                  <td>
                    {figure(p.size.length, 0)} × {figure(p.size.width, 0)}
                    <br />
                    {figure(p.stress.warp.mean, 2)} ± {figure(p.stress.warp.rmsError, 2)} ·{" "}
                    {figure(p.stress.weft.mean, 2)} ± {figure(p.stress.weft.rmsError, 2)}
                  </td>
                </tr>
              );
            })}
          </tbody>
        </table>
      )}
    </aside>
  );
}
