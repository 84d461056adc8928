// The net outline of a flat panel: its boundary points, faired. Both sides of a seam keep the same points, so that they stay
// as long as each other. Does not: offset, mark. Source: Douglas and Peucker 1973; kept by all lines of a seam at once: own.
import { PlanError } from "../../problem.ts";
import type { FlatPanel, PanelSide, Ring } from "../../records/flatPanel.ts";
import { isSimpleRing, ringArea } from "../../surface/ring.ts";
import type { PanelPlace } from "./panelPlace.ts";
import { listPoints, type Point } from "./sideLine.ts";

/** No boundary point lies further than this from the faired line, mm … */
const FAIR_MM = 0.2;
/** … nor than this share of the panel's mean width, so that small panels keep their area. */
const FAIR_SHARE = 2e-4;
/** A faired side may be this much shorter than its points make it, mm: sides of a seam, others. */
const LOSS_SEAM_MM = 0.1;
const LOSS_MM = 0.5;
/** Points of the net closer than this are one, mm. */
const SAME_MM = 1e-6;

function measureLength(line: readonly Point[], at: readonly number[]): number {
  let sum = 0;
  for (let k = 1; k < at.length; k++) {
    const [p, q] = [line[at[k - 1]], line[at[k]]];
    sum += Math.hypot(q[0] - p[0], q[1] - p[1]);
  }
  return sum;
}

/** Square of the distance of p from the segment a–b. */
function offSquared(p: Point, a: Point, b: Point): number {
  const [ux, uy, wx, wy] = [b[0] - a[0], b[1] - a[1], p[0] - a[0], p[1] - a[1]];
  const length2 = ux * ux + uy * uy;
  const s = length2 > 0 ? Math.min(1, Math.max(0, (ux * wx + uy * wy) / length2)) : 0;
  return (wx - s * ux) ** 2 + (wy - s * uy) ** 2;
}

/** Places kept so that on every line no point left out is further than `within` from the new line. */
function thinLines(lines: readonly Point[][], within: number): number[] {
  const n = lines[0].length;
  const keep = new Uint8Array(n);
  keep[0] = 1;
  keep[n - 1] = 1;
  const stack = [[0, n - 1]];
  while (stack.length > 0) {
    const [a, b] = stack.pop() as number[];
    let worst = within * within;
    let split = -1;
    for (const line of lines)
      for (let i = a + 1; i < b; i++) {
        const off = offSquared(line[i], line[a], line[b]);
        if (off > worst) [worst, split] = [off, i];
      }
    if (split < 0) continue;
    keep[split] = 1;
    stack.push([a, split], [split, b]);
  }
  return Array.from(keep.keys()).filter((i) => keep[i] === 1);
}

/**
 * Places kept by lines that run through the same points of the surface, both ends among them: within the tolerance, and no line
 * shorter than its points make it by more than `loss`.
 */
export function fairLines(lines: readonly Point[][], within: number, loss: number): number[] {
  const all = Array.from(lines[0].keys());
  const whole = lines.map((line) => measureLength(line, all));
  for (let tolerance = within; tolerance > within / 100; tolerance /= 2) {
    const kept = thinLines(lines, tolerance);
    if (lines.every((line, k) => whole[k] - measureLength(line, kept) <= loss)) return kept;
  }
  return all;
}

/** How far a faired line may run from a panel's boundary points, mm. */
function fairWithin(panel: FlatPanel): number {
  const ring = Float64Array.from(panel.sides.flatMap((s) => listPoints(panel, s.vertices.slice(0, -1)).flat()));
  const round = panel.sides.reduce((sum, s) => sum + s.lengthFlat, 0);
  return Math.min(FAIR_MM, (FAIR_SHARE * 2 * Math.max(0, ringArea(ring))) / round || 0);
}

/**
 * Which vertices of the cut surface each seam's net line runs through on both of its sides. Panels that are not given leave
 * their seams to the side that is.
 */
export function keepSeamPoints(panels: readonly FlatPanel[]): Map<string, ReadonlySet<number>> {
  const found = new Map<string, { vertices: number[]; lines: Point[][]; within: number }>();
  for (const panel of panels) {
    const within = fairWithin(panel);
    for (const side of panel.sides) {
      if (side.kind !== "seam") continue;
      const own = side.vertices.map((v) => panel.surfaceVertex[v]);
      const line = listPoints(panel, side.vertices);
      const seam = found.get(side.id);
      if (seam === undefined) {
        found.set(side.id, { vertices: own, lines: [line], within });
        continue;
      }
      const turned = own[0] !== seam.vertices[0] || own[1] !== seam.vertices[1];
      seam.lines.push(turned ? line.reverse() : line);
      seam.within = Math.min(seam.within, within);
    }
  }
  const keep = new Map<string, ReadonlySet<number>>();
  for (const [id, { vertices, lines, within }] of found) {
    const same = lines.filter((line) => line.length === vertices.length);
    keep.set(id, new Set(fairLines(same, within, LOSS_SEAM_MM).map((i) => vertices[i])));
  }
  return keep;
}

/** Local vertices of a side that its net line runs through. */
function keptVertices(panel: FlatPanel, side: PanelSide, place: PanelPlace, within: number): number[] {
  const { vertices } = side;
  const keep = side.kind === "seam" ? place.keep?.get(side.id) : undefined;
  const last = vertices.length - 1;
  if (keep !== undefined) return vertices.filter((v, i) => i === 0 || i === last || keep.has(panel.surfaceVertex[v]));
  return fairLines([listPoints(panel, vertices)], within, side.kind === "seam" ? LOSS_SEAM_MM : LOSS_MM).map(
    (i) => vertices[i],
  );
}

/** The net ring and where each side lies in it. */
export interface NetOutline {
  net: Ring;
  runs: { netFrom: number; netTo: number }[];
}

function joinSides(panel: FlatPanel, lines: number[][]): NetOutline {
  const points: number[] = [];
  const runs = lines.map((line) => {
    const netFrom = points.length / 2;
    for (const [x, y] of listPoints(panel, line.slice(0, -1))) {
      const m = points.length;
      if (m === 0 || Math.hypot(x - points[m - 2], y - points[m - 1]) > SAME_MM) points.push(x, y);
    }
    return { netFrom, netTo: 0 };
  });
  const m = points.length;
  if (m > 2 && Math.hypot(points[0] - points[m - 2], points[1] - points[m - 1]) <= SAME_MM) points.length = m - 2;
  const n = Math.max(1, points.length / 2);
  for (const run of runs) run.netFrom %= n;
  for (const [k, run] of runs.entries()) run.netTo = runs[(k + 1) % runs.length].netFrom;
  return { net: Float64Array.from(points), runs };
}

/**
 * The net ring, faired, and where each side lies in it. A panel too narrow to be faired keeps all its points.
 * @units mm
 * @throws PlanError outline-sides: a side does not end where the next one begins
 */
export function buildNetOutline(panel: FlatPanel, place: PanelPlace): NetOutline {
  panel.sides.forEach((side, k) => {
    const next = panel.sides[(k + 1) % panel.sides.length];
    if (side.vertices.length >= 2 && side.vertices[side.vertices.length - 1] === next.vertices[0]) return;
    throw new PlanError(
      "outline-sides",
      `Side ${k + 1} (${side.id}) of panel ${panel.id} does not end where the next one begins: the outline is open.`,
      [panel.id, side.id],
    );
  });
  const within = fairWithin(panel);
  const fair = joinSides(
    panel,
    panel.sides.map((side) => keptVertices(panel, side, place, within)),
  );
  if (isSimpleRing(fair.net) && ringArea(fair.net) > 0) return fair;
  return joinSides(
    panel,
    panel.sides.map((side) => side.vertices),
  );
}
