// Where a surface runs through itself, lies on itself, or is folded back. Says where; repairs nothing.
// Source: the signs of tetrahedron volumes decide whether a side pierces a triangle (M. Segura, F. Feito, WSCG 2001).
import type { Finding } from "../../problem.ts";
import { measureVectorAreas } from "../../surface/measures.ts";
import type { Surface } from "../../surface/surface.ts";
import { buildFormFinding, describePlace } from "../formFinding.ts";
import { isGraph } from "./isGraph.ts";
import { buildTriangleTree, visitNearPairs } from "./triangleTree.ts";

/** Cosine of the turn between neighbours beyond which cloth lies back on itself: 175 degrees. */
const FOLDED_BACK = -0.996;

/** Pairs after which the search ends: the mesh must be mended anyway. */
const ENOUGH = 1000;

/** Share of the shorter triangle's size that a crossing must reach inside to count, so that touching corners do not. */
const INSIDE = 1e-6;

/** Six times the volume of the tetrahedron a b c d; indices into x. */
function measureVolume(x: Float64Array<ArrayBuffer>, a: number, b: number, c: number, d: number): number {
  const ux = x[b] - x[a];
  const uy = x[b + 1] - x[a + 1];
  const uz = x[b + 2] - x[a + 2];
  const vx = x[c] - x[a];
  const vy = x[c + 1] - x[a + 1];
  const vz = x[c + 2] - x[a + 2];
  return (
    (x[d] - x[a]) * (uy * vz - uz * vy) +
    (x[d + 1] - x[a + 1]) * (uz * vx - ux * vz) +
    (x[d + 2] - x[a + 2]) * (ux * vy - uy * vx)
  );
}

/** Whether the side p q passes through the inside of triangle a b c. `least`: volume that counts as none. */
function pierces(x: Float64Array<ArrayBuffer>, p: number, q: number, abc: readonly number[], least: number): boolean {
  const [a, b, c] = abc;
  const from = measureVolume(x, a, b, c, p);
  const to = measureVolume(x, a, b, c, q);
  if (!((from > least && to < -least) || (from < -least && to > least))) return false;
  const ab = measureVolume(x, p, q, a, b);
  const bc = measureVolume(x, p, q, b, c);
  const ca = measureVolume(x, p, q, c, a);
  return (ab > least && bc > least && ca > least) || (ab < -least && bc < -least && ca < -least);
}

/** Whether two triangles of one plane overlap by more than a sliver: no side of either parts them. */
function overlapsInPlane(
  x: Float64Array<ArrayBuffer>,
  n: readonly number[],
  first: readonly number[],
  second: readonly number[],
  size: number,
): boolean {
  const across = (a: number, b: number, p: number) => {
    const u = [x[b] - x[a], x[b + 1] - x[a + 1], x[b + 2] - x[a + 2]];
    const v = [x[p] - x[a], x[p + 1] - x[a + 1], x[p + 2] - x[a + 2]];
    const out =
      n[0] * (u[1] * v[2] - u[2] * v[1]) + n[1] * (u[2] * v[0] - u[0] * v[2]) + n[2] * (u[0] * v[1] - u[1] * v[0]);
    return out / Math.sqrt(u[0] ** 2 + u[1] ** 2 + u[2] ** 2);
  };
  for (const [own, other] of [
    [first, second],
    [second, first],
  ])
    for (let k = 0; k < 3; k++) {
      const [a, b] = [own[k], own[(k + 1) % 3]];
      const side = Math.sign(across(a, b, own[(k + 2) % 3]));
      if (other.every((p) => side * across(a, b, p) <= 1e-3 * size)) return false;
    }
  return true;
}

interface Contact {
  pairs: number;
  vertex: number;
  folded: number;
}

/** Whether the boxes of two triangles are apart along an axis. */
function areApart({ xyz: x, tri }: Surface, s: number, t: number): boolean {
  const [a, b, c] = [3 * tri[3 * s], 3 * tri[3 * s + 1], 3 * tri[3 * s + 2]];
  const [d, e, f] = [3 * tri[3 * t], 3 * tri[3 * t + 1], 3 * tri[3 * t + 2]];
  for (let k = 0; k < 3; k++) {
    if (Math.max(x[a + k], x[b + k], x[c + k]) < Math.min(x[d + k], x[e + k], x[f + k])) return true;
    if (Math.max(x[d + k], x[e + k], x[f + k]) < Math.min(x[a + k], x[b + k], x[c + k])) return true;
  }
  return false;
}

/** Number of corners that two triangles share. */
function countShared(tri: Uint32Array<ArrayBuffer>, s: number, t: number): number {
  let shared = 0;
  for (let i = 3 * s; i < 3 * s + 3; i++) for (let j = 3 * t; j < 3 * t + 3; j++) if (tri[i] === tri[j]) shared++;
  return shared;
}

/** Judges pairs of triangles; counts those in contact. */
function buildJudge(surface: Surface, contact: Contact): (s: number, t: number) => boolean {
  const { xyz: x, tri } = surface;
  const areas = measureVectorAreas(surface);
  const size = Float64Array.from({ length: tri.length / 3 }, (_, t) =>
    Math.sqrt(areas[3 * t] ** 2 + areas[3 * t + 1] ** 2 + areas[3 * t + 2] ** 2),
  );
  const count = (t: number) => {
    if (contact.pairs === 0) contact.vertex = tri[3 * t];
    contact.pairs++;
    return contact.pairs < ENOUGH;
  };
  return (s, t) => {
    if (areApart(surface, s, t)) return true;
    const [p, q] = [size[s], size[t]];
    const dot = areas[3 * s] * areas[3 * t] + areas[3 * s + 1] * areas[3 * t + 1] + areas[3 * s + 2] * areas[3 * t + 2];
    if (countShared(tri, s, t) === 2) {
      if (dot > FOLDED_BACK * p * q) return true;
      contact.folded++;
      return count(s);
    }
    // corners of t all on one side of the plane of s: apart
    const [a, b, c] = [3 * tri[3 * s], 3 * tri[3 * s + 1], 3 * tri[3 * s + 2]];
    const least = INSIDE * Math.min(p, q) ** 1.5;
    let above = 0;
    let below = 0;
    for (let k = 3 * t; k < 3 * t + 3; k++) {
      const volume = measureVolume(x, a, b, c, 3 * tri[k]);
      if (volume > least) above++;
      if (volume < -least) below++;
    }
    if ((above > 0 && below === 0) || (below > 0 && above === 0)) return true;
    return touches(surface, { s, t, least, flat: above + below === 0, n: areas, p, q }) ? count(s) : true;
  };
}

/** Whether two triangles, neither on one side of the other, pierce each other or overlap in their plane. */
function touches(
  { xyz: x, tri }: Surface,
  pair: { s: number; t: number; least: number; flat: boolean; n: Float64Array<ArrayBuffer>; p: number; q: number },
): boolean {
  const { s, t, least, flat, n, p, q } = pair;
  const first = [3 * tri[3 * s], 3 * tri[3 * s + 1], 3 * tri[3 * s + 2]];
  const second = [3 * tri[3 * t], 3 * tri[3 * t + 1], 3 * tri[3 * t + 2]];
  if (flat) {
    const unit = [n[3 * s] / p, n[3 * s + 1] / p, n[3 * s + 2] / p];
    return overlapsInPlane(x, unit, first, second, Math.sqrt(Math.min(p, q)));
  }
  for (let k = 0; k < 3; k++) {
    const l = (k + 1) % 3;
    if (pierces(x, first[k], first[l], second, least) || pierces(x, second[k], second[l], first, least)) return true;
  }
  return false;
}

/**
 * A caution where cloth runs through, lies on or folds back onto other cloth of the same surface.
 * @shape toSource nV
 */
export function findSelfContact(surface: Surface, toSource: ArrayLike<number>): Finding[] {
  if (isGraph(surface)) return [];
  const contact: Contact = { pairs: 0, vertex: -1, folded: 0 };
  visitNearPairs(buildTriangleTree(surface, 0), buildJudge(surface, contact));
  if (contact.pairs === 0) return [];
  const vertex = `vertex ${toSource[contact.vertex]}`;
  const many =
    contact.pairs >= ENOUGH ? `${ENOUGH} or more pairs` : contact.pairs === 1 ? "1 pair" : `${contact.pairs} pairs`;
  const folds = contact.folded > 0 ? ` (${contact.folded} of neighbours folded back on each other)` : "";
  return [
    buildFormFinding("caution", {
      code: "mesh-self-contact",
      where: vertex,
      value: contact.pairs,
      limit: 0,
      text: `the surface runs through or lies on itself: ${many} of triangles${folds}, first at ${vertex} at ${describePlace(surface.xyz, contact.vertex)}; nothing was changed`,
      remedy: "mend the mesh there: cloth cannot pass through cloth, and seams found across it mean nothing",
    }),
  ];
}
