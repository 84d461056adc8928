// Match marks along seams. They stand at the same points of the surface on both panels of a seam, since they are chosen from the
// seam's own vertices and lengths on the form; unequal steps, one to three ticks and a running number keep a panel from being
// joined shifted or the wrong way round (common practice; the step rule is own). mm, panel axes.
import type { CutPanel, PanelMark, PanelSide } from "../../records/flatPanel.ts";
import { ringHolds } from "../../surface/ring.ts";
import type { PanelPlace } from "../outline/panelPlace.ts";
import { atArc, buildSideLine, listPoints, type Point } from "../outline/sideLine.ts";
import { clipLine } from "./clipLine.ts";

/** Mean distance of match marks on the form, m. */
const STEP_M = 1;
/** Distance between the ticks of one mark, mm. */
const TICK_GAP = 6;
/** Longest tick, and the tick where there is no allowance to draw it in, mm. */
const TICK_LONGEST = 25;
const TICK_INWARD = 10;
/** Height of a mark's number and its distance from the net line, mm. */
const NUMBER = 10;
const NUMBER_DEPTH = 18;

/**
 * Which vertices of a seam carry a match mark, from its lengths on the form.
 * @shape arc: m from the seam's first vertex, rising -> indices into the seam's vertices, rising, ends left out
 */
export function chooseMatchPoints(arc: number[]): number[] {
  const total = arc[arc.length - 1];
  const chosen: number[] = [];
  const golden = (Math.sqrt(5) - 1) / 2;
  const step = Math.min(STEP_M, total / 2.2);
  let target = 0.7 * step;
  for (let k = 1; target < total - 0.2 * step; k++) {
    let best = 0;
    for (let i = 1; i + 1 < arc.length; i++)
      if (best === 0 || Math.abs(arc[i] - target) < Math.abs(arc[best] - target)) best = i;
    if (best > 0 && (chosen.length === 0 || best > chosen[chosen.length - 1])) chosen.push(best);
    target += step * (0.75 + 0.5 * ((k * golden) % 1));
  }
  return chosen;
}

/** Arc lengths of a run on the form, m. */
function measureErected(panel: CutPanel, run: readonly number[]): number[] {
  const { erected: e } = panel;
  const arc = [0];
  for (let i = 1; i < run.length; i++) {
    const [a, b] = [3 * run[i - 1], 3 * run[i]];
    arc.push(arc[i - 1] + Math.hypot(e[b] - e[a], e[b + 1] - e[a + 1], e[b + 2] - e[a + 2]));
  }
  return arc;
}

/** Angle a text reads in along a side with this outward normal, degrees within (-90, 90]. */
export function readingAngle(out: Point): number {
  const degrees = (Math.atan2(out[0], -out[1]) * 180) / Math.PI;
  if (degrees > 90) return degrees - 180;
  return degrees <= -90 ? degrees + 180 : degrees;
}

/** Ticks and number of the match marks on one seam side: ticks into the allowance, or inward where there is none. */
export function matchMarks(panel: CutPanel, side: PanelSide, allowance: number, place: PanelPlace): PanelMark[] {
  const seam = place.seams.find((s) => s.id === side.id);
  if (!seam || side.vertices.length < 3) return [];
  const of = (k: number) => panel.surfaceVertex[side.vertices[k]];
  const reversed = of(0) !== seam.vertices[0] || of(1) !== seam.vertices[1];
  const run = reversed ? [...side.vertices].reverse() : side.vertices;
  const line = buildSideLine(listPoints(panel, run), reversed ? -1 : 1);
  const length = allowance > 0 ? Math.min(allowance, TICK_LONGEST) : -TICK_INWARD;
  const marks: PanelMark[] = [];
  chooseMatchPoints(measureErected(panel, run)).forEach((index, k) => {
    for (let tick = 0; tick <= k % 3; tick++) {
      const { point, out } = atArc(line, line.arc[index] + tick * TICK_GAP);
      const shift = (s: number): Point => [point[0] + s * out[0], point[1] + s * out[1]];
      if (!ringHolds(panel.cut, ...shift(-0.5))) continue;
      const [drawn] = clipLine([shift(length < 0 ? -0.01 : 0), shift(length)], panel.cut);
      if (!drawn) continue;
      const mark: PanelMark = { kind: "match", points: drawn };
      if (tick === 0) {
        const text = `${seam.id}.${k + 1}`;
        Object.assign(mark, { at: shift(-NUMBER_DEPTH), text, height: NUMBER, angle: readingAngle(out) });
      }
      marks.push(mark);
    }
  });
  return marks;
}
