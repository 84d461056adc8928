// The whole roof seen at once: panels, seams and edges projected to a plane, for the key plan on a card and the assembly map.
// From above; a roof that stands rather upright is seen from outside instead.
import type { Facts, FactsPanel, Vec2 } from "../../../records/facts.ts";
import type { Vec3 } from "../../../surface/surface.ts";
import type { BoxArea } from "./pen.ts";

export interface RoofView {
  name: "seen from above" | "seen from outside";
  panels: { id: string; outlines: Vec2[][] }[];
  seams: { id: string; upper: string; run: Vec2[] }[];
  edges: { id: string; run: Vec2[] }[];
  anchors: { id: string; at: Vec2 }[];
  /** A place of the roof in the plane of the view. */
  project: (p: Vec3) => Vec2;
}

/** Below this share of its true area in plan a roof is shown from outside. */
const UPRIGHT = 0.35;

/** Closed loops of the border of a panel, in its own vertices: triangle sides that no second triangle runs back. */
export function borderLoops(panel: FactsPanel): number[][] {
  const next = new Map<number, number>();
  const sides = new Set(panel.triangles.flatMap(([a, b, c]) => [`${a} ${b}`, `${b} ${c}`, `${c} ${a}`]));
  for (const [a, b, c] of panel.triangles) {
    for (const [p, q] of [
      [a, b],
      [b, c],
      [c, a],
    ]) {
      if (!sides.has(`${q} ${p}`)) next.set(p, q);
    }
  }
  const loops: number[][] = [];
  const left = new Set(next.keys());
  for (const start of next.keys()) {
    const loop: number[] = [];
    for (let v: number | undefined = start; v !== undefined && left.delete(v); v = next.get(v)) loop.push(v);
    if (loop.length > 2) loops.push(loop);
  }
  return loops;
}

function areaVector(panels: readonly FactsPanel[]): { sum: Vec3; total: number } {
  const sum: Vec3 = [0, 0, 0];
  let total = 0;
  for (const panel of panels) {
    for (const [a, b, c] of panel.triangles.map((t) => t.map((v) => panel.erected[v]))) {
      const u = [b[0] - a[0], b[1] - a[1], b[2] - a[2]];
      const w = [c[0] - a[0], c[1] - a[1], c[2] - a[2]];
      const n = [u[1] * w[2] - u[2] * w[1], u[2] * w[0] - u[0] * w[2], u[0] * w[1] - u[1] * w[0]];
      for (const k of [0, 1, 2]) sum[k] += n[k] / 2;
      total += Math.hypot(n[0], n[1], n[2]) / 2;
    }
  }
  return { sum, total };
}

/** The roof of the facts, projected. @units m */
export function viewRoof(facts: Facts): RoofView {
  const panels = facts.panels ?? [];
  const { sum, total } = areaVector(panels);
  const flat = Math.hypot(sum[0], sum[1]);
  const upright = Math.abs(sum[2]) < UPRIGHT * total && flat > UPRIGHT * total;
  // Seen from outside: up stays up, right is z × outward normal.
  const project = upright
    ? (p: Vec3): Vec2 => [(-sum[1] * p[0] + sum[0] * p[1]) / flat, p[2]]
    : (p: Vec3): Vec2 => [p[0], p[1]];
  const form = facts.form;
  const vertex = (v: number): Vec2 => project(form?.vertices[v] ?? [0, 0, 0]);
  return {
    name: upright ? "seen from outside" : "seen from above",
    panels: panels.map((p) => ({
      id: p.id,
      outlines: borderLoops(p).map((loop) => loop.map((v) => project(p.erected[v]))),
    })),
    seams: (facts.seams ?? []).map((s) => ({ id: s.id, upper: s.upper, run: s.path.map(project) })),
    edges: (form?.edges ?? []).map((e) => ({ id: e.id, run: e.vertices.map(vertex) })),
    anchors: (form?.anchors ?? []).map((a) => ({ id: a.id, at: vertex(a.vertex) })),
    project,
  };
}

/** Puts the roof, and what else is to be seen, into a box, evenly scaled and centred: m in, mm on the sheet out. */
export function fitRoof(view: RoofView, box: BoxArea, beside: readonly Vec2[] = []): (p: Vec2) => Vec2 {
  const points = [...view.panels.flatMap((p) => p.outlines.flat()), ...beside];
  let [x0, y0, x1, y1] = [Infinity, Infinity, -Infinity, -Infinity];
  for (const [x, y] of points) {
    x0 = Math.min(x0, x);
    y0 = Math.min(y0, y);
    x1 = Math.max(x1, x);
    y1 = Math.max(y1, y);
  }
  const scale = Math.min(box.width / Math.max(x1 - x0, 1e-9), box.height / Math.max(y1 - y0, 1e-9));
  const dx = box.x + (box.width - scale * (x1 - x0)) / 2;
  const dy = box.y + (box.height - scale * (y1 - y0)) / 2;
  return ([x, y]) => [dx + scale * (x - x0), dy + scale * (y - y0)];
}
