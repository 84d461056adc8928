// Seeded sails of three to eight corners, settled by the form station, a third of them with a guyed mast or with adjusters at
// cable ends. Small meshes.
import { buildRandom } from "../../src/core/numeric/random.ts";
import type { Finding } from "../../src/core/problem.ts";
import type { Job, RigJob } from "../../src/core/records/job.ts";
import type { RigInput } from "../../src/core/rig/rigInput.ts";
import type { Vec3 } from "../../src/core/surface/surface.ts";
import type { MadeForm } from "../templates/madeForm.ts";
import { cable, giveAdjusters, planInput, turnbuckle } from "./madeRig.ts";

/** A fan of triangles round the middle of n corners, m rings, straight rims; corner k starts edge k, counter-clockwise. */
function buildFan(corners: Vec3[], m: number): MadeForm {
  const n = corners.length;
  const middle = [0, 1, 2].map((k) => corners.reduce((s, c) => s + c[k], 0) / n);
  const xyz: number[] = [...middle];
  // ring r has n·r vertices, the k-th sector's first one towards corner k
  const start = (r: number) => (r === 0 ? 0 : 1 + (n * r * (r - 1)) / 2);
  const id = (r: number, k: number, i: number) => (r === 0 ? 0 : start(r) + ((k * r + i) % (n * r)));
  for (let r = 1; r <= m; r++)
    for (let k = 0; k < n; k++)
      for (let i = 0; i < r; i++) {
        const [a, b] = [corners[k], corners[(k + 1) % n]];
        for (let c = 0; c < 3; c++) xyz.push(middle[c] + (r / m) * (a[c] - middle[c] + (i / r) * (b[c] - a[c])));
      }
  const tri: number[] = [];
  for (let r = 1; r <= m; r++)
    for (let k = 0; k < n; k++)
      for (let i = 0; i < r; i++) {
        tri.push(id(r - 1, k, i), id(r, k, i), id(r, k, i + 1));
        if (i < r - 1) tri.push(id(r - 1, k, i), id(r, k, i + 1), id(r - 1, k, i + 1));
      }
  const lines = corners.map((_, k) => ({
    name: `rim-${k + 1}`,
    vertices: Array.from({ length: m + 1 }, (_, i) => id(m, k, i)),
  }));
  return {
    xyz: new Float64Array(xyz),
    tri: new Uint32Array(tri),
    lines,
    pull: {},
    fixed: corners.map((_, k) => id(m, k, 0)),
    corners: corners.map((_, k) => ({ name: `corner-${k + 1}`, vertex: id(m, k, 0) })),
  };
}

/** What makes a rig more than a sail hung from its corners. */
export type RigKind = "corners" | "mast" | "cable-ends" | "mast-ends";

/** Kinds of the first thirty: a third is more than a sail hung from its corners, and most of that has several tension modes. */
function pickKind(seed: number): RigKind {
  if (seed % 3 !== 0) return "corners";
  if (seed % 2 === 1) return "cable-ends";
  return seed % 12 === 0 ? "mast" : "mast-ends";
}

/** Rig number `seed`: its input, as the chain makes it. */
export function makeRandomRig(
  seed: number,
  kind: RigKind = pickKind(seed),
): { input: RigInput; findings: Finding[]; kind: RigKind; corners: number } {
  const random = buildRandom(seed);
  const draw = (low: number, high: number) => low + (high - low) * random();
  const n = 3 + (seed % 6);
  const radius = draw(4, 6);
  const tilt = draw(0, 6);
  const corners = Array.from({ length: n }, (_, k): Vec3 => {
    const angle = (2 * Math.PI * (k + draw(-0.12, 0.12))) / n + tilt;
    const r = radius * draw(0.92, 1.08);
    return [r * Math.cos(angle), r * Math.sin(angle), k % 2 === 0 ? draw(2, 3) : draw(4, 5)];
  });
  const made = buildFan(corners, 6);
  const edges: Job["edges"] = {};
  made.lines.forEach((line, k) => {
    const [a, b] = [corners[k], corners[(k + 1) % n]];
    const chord = Math.hypot(...a.map((q, c) => b[c] - q));
    // radius of a rim that sags a ninth of its chord, in cloth of 2 kN/m
    const sag = chord / draw(8, 10);
    edges[line.name] = { kind: "cable", force: 2 * ((chord * chord) / (8 * sag) + sag / 2), cable };
  });
  const free = { ...turnbuckle, shortest: 100, longest: 3000 };
  const rig: Partial<RigJob> = { adjusters: giveAdjusters(made, free) };
  const anchors: Job["anchors"] = [];
  const atEnd = (name: string, edge: string) => ({
    name,
    anchor: null,
    edge,
    end: "first" as const,
    turnbuckle: free,
    EA: 60000,
  });
  if (kind === "mast") Object.assign(rig, guyCorner(corners, 1, anchors, random));
  if (kind === "cable-ends" || kind === "mast-ends")
    rig.adjusters = made.lines.map((line, k) => atEnd(`T${k + 1}`, line.name));
  if (kind === "mast-ends") {
    // the corner sits on the mast's head; its stays have turnbuckles at their feet
    Object.assign(rig, guyCorner(corners, 1, null, random));
    for (const s of rig.stays ?? []) rig.adjusters?.push({ ...atEnd(`${s.name}-foot`, s.name), end: "last" });
  }
  const { input, findings } = planInput(made, { settle: true, edges, anchors }, rig);
  return { input, findings, kind, corners: n };
}

/** A mast that leans a little outward under a high corner's far pin (without anchors: under the corner itself), two stays behind it. */
function guyCorner(corners: Vec3[], k: number, anchors: Job["anchors"] | null, random: () => number) {
  const [x, y, z] = corners[k];
  const r = Math.hypot(x, y);
  const [ux, uy] = [x / r, y / r];
  const head: Vec3 = anchors ? [x + ux, y + uy, z + 0.15] : [x, y, z];
  anchors?.push({ name: `corner-${k + 1}`, support: head });
  const behind = (out: number, side: number): Vec3 => [
    head[0] + out * ux - side * uy,
    head[1] + out * uy + side * ux,
    0,
  ];
  const from: Vec3 = [head[0] + 0.4 * ux * random(), head[1] + 0.4 * uy * random(), 0];
  return {
    struts: [{ name: "mast-1", from, to: `corner-${k + 1}`, EA: 630000 }],
    stays: [1, -1].map((side, i) => ({
      name: `stay-${i + 1}`,
      from: `corner-${k + 1}`,
      to: behind(4, 2.5 * side),
      EA: 25000,
      force: null,
      minBreakingForce: 250,
    })),
  };
}
