// Lengths of a cut panel to hold a tape to, after cutting and after welding: sides, diagonals, widths. mm. Judges nothing.
import type { ControlLengths, CutPanel, Ring } from "../../records/flatPanel.ts";
import { listPoints, type Point } from "./sideLine.ts";

const gap = (p: Point, q: Point) => Math.hypot(q[0] - p[0], q[1] - p[1]);

function meanOf(points: readonly Point[]): Point {
  return [points.reduce((s, p) => s + p[0], 0) / points.length, points.reduce((s, p) => s + p[1], 0) / points.length];
}

/** Net length of side k and the straight line between its two corners. */
function measureSide(panel: CutPanel, k: number): { net: number; chord: number } {
  const { net, outlines, sides } = panel;
  const n = net.length / 2;
  const { netFrom, netTo } = outlines[k];
  const count = sides.length > 1 ? (netTo - netFrom + n) % n : n;
  const at = (i: number): Point => [net[2 * (i % n)], net[2 * (i % n) + 1]];
  let length = 0;
  for (let i = 0; i < count; i++) length += gap(at(netFrom + i), at(netFrom + i + 1));
  return { net: length, chord: gap(at(netFrom), at(netTo)) };
}

/** Corners (numbers of the sides that begin there) at which an end's run of sides begins and ends, counter-clockwise. */
function endCorners(panel: CutPanel, end: readonly number[]): [number, number] | null {
  const all = new Set(end);
  const n = panel.sides.length;
  const within = panel.sides.map((s) => s.vertices.every((v) => all.has(v)));
  for (let k = 0; k < n; k++) {
    if (!within[k] || within[(k + n - 1) % n]) continue;
    let last = k;
    while (within[(last + 1) % n]) last++;
    return [k, (last + 1) % n];
  }
  const corner = panel.sides.findIndex((s) => all.has(s.vertices[0]));
  return corner < 0 ? null : [corner, corner];
}

/** Where a line through p in direction u crosses a ring: the stretch that p lies in or next to, as its two ends along u. */
function chordAt(ring: Ring, p: Point, u: Point): [number, number] | null {
  const cuts: number[] = [];
  for (let k = 0, j = ring.length - 2; k < ring.length; j = k, k += 2) {
    const a = (ring[j] - p[0]) * u[1] - (ring[j + 1] - p[1]) * u[0];
    const b = (ring[k] - p[0]) * u[1] - (ring[k + 1] - p[1]) * u[0];
    if (a > 0 === b > 0) continue;
    const t = a / (a - b);
    cuts.push(
      (ring[j] + t * (ring[k] - ring[j]) - p[0]) * u[0] + (ring[j + 1] + t * (ring[k + 1] - ring[j + 1]) - p[1]) * u[1],
    );
  }
  cuts.sort((x, y) => x - y);
  let best: [number, number] | null = null;
  const off = (c: [number, number]) => Math.max(c[0], -c[1], 0);
  for (let i = 0; i + 1 < cuts.length; i += 2) {
    const chord: [number, number] = [cuts[i], cuts[i + 1]];
    if (best === null || off(chord) < off(best)) best = chord;
  }
  return best;
}

/**
 * Each side along its net line and straight; both diagonals between the corners of the panel's two ends (none at a pointed end);
 * widths square to the axis at a quarter, half and three quarters of it, between the net lines and between the cut lines.
 * @units mm
 */
export function measureControl(panel: CutPanel): ControlLengths {
  const sides = panel.sides.map((_, k) => measureSide(panel, k));
  const { from, to } = panel.axis;
  const [a, b] = [meanOf(listPoints(panel, from)), meanOf(listPoints(panel, to))];
  const length = gap(a, b);
  const corner = (k: number): Point => {
    const i = 2 * panel.outlines[k].netFrom;
    return [panel.net[i], panel.net[i + 1]];
  };
  const [e, f] = [endCorners(panel, from), endCorners(panel, to)];
  const diagonals =
    e === null || f === null || e[0] === e[1] || f[0] === f[1]
      ? []
      : [0, 1].map((k) => ({ from: e[k], to: f[k], length: gap(corner(e[k]), corner(f[k])) }));
  if (!(length > 0)) return { sides, diagonals, widths: [] };
  const along: Point = [(b[0] - a[0]) / length, (b[1] - a[1]) / length];
  const across: Point = [-along[1], along[0]];
  const widths = [0.25, 0.5, 0.75].flatMap((share) => {
    const p: Point = [a[0] + share * (b[0] - a[0]), a[1] + share * (b[1] - a[1])];
    const [net, cut] = [chordAt(panel.net, p, across), chordAt(panel.cut, p, across)];
    return net && cut ? [{ share, at: share * length, net: net[1] - net[0], cut: cut[1] - cut[0] }] : [];
  });
  return { sides, diagonals, widths };
}
