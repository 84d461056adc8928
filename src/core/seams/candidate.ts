// Ways to lay strips over a region: which part of its outline the seams start on, which they end on, what lies beside
// the first and the last strip. Says nothing of how many seams there are. Source: own, stacking order between two ends.
import type { FormEdge, FoundForm } from "../records/foundForm.ts";
import { vertexAt } from "../surface/measures.ts";
import type { Vec3 } from "../surface/surface.ts";
import { buildChain, type Chain, findNearestOnChain, listChainPoints, measureChain } from "./chain.ts";
import type { Outline, Region } from "./region.ts";

/** One way to lay strips. Strips run from `start` to `finish`; they are stacked from `left` to `right`. */
export interface Candidate {
  layout: "bands" | "gores";
  start: Chain;
  finish: Chain;
  /** Beside the first and last strip; one vertex where start and finish meet; null round a ring. */
  left: Chain | null;
  right: Chain | null;
  /** Round a ring: arc length of the first seam on start and finish. */
  offset: { start: number; finish: number };
  /** Names of what the strips run from and to. */
  from: string;
  to: string;
}

/** Edge names along a chain, each once, in order. */
export function nameChain(form: FoundForm, chain: Chain): string {
  const names: string[] = [];
  for (const e of chain.edge) if (!names.includes(form.edges[e].id)) names.push(form.edges[e].id);
  return names.join(" + ");
}

function makeBands(form: FoundForm, o: Outline, left: [number, number], right: [number, number]): Candidate {
  const start = buildChain(o, left[1], right[0]);
  const finish = buildChain(o, right[1], left[0], { reverse: true });
  return {
    layout: "bands",
    start,
    finish,
    left: buildChain(o, left[0], left[1], { reverse: true }),
    right: buildChain(o, right[0], right[1]),
    offset: { start: 0, finish: 0 },
    from: nameChain(form, start),
    to: nameChain(form, finish),
  };
}

/** Position on an outline whose vertex is nearest to arc length s. */
function findPosition(o: Outline, s: number): number {
  const n = o.vertices.length;
  let best = 0;
  for (let i = 1; i < n; i++) if (Math.abs(o.arc[i] - s) < Math.abs(o.arc[best] - s)) best = i;
  return best;
}

/** Position of the lowest vertex of an outline; among equally low ones the one farthest along +x, then +y. */
function findLowest(region: Region, o: Outline): number {
  let best = 0;
  const scale = 1e-6 * o.arc[o.vertices.length];
  for (let i = 1; i < o.vertices.length; i++) {
    const p = vertexAt(region.surface, o.vertices[i]);
    const q = vertexAt(region.surface, o.vertices[best]);
    const order = [q[2] - p[2], p[0] - q[0], p[1] - q[1]].find((d) => Math.abs(d) > scale) ?? 0;
    if (order > 0) best = i;
  }
  return best;
}

/** All sensible ways for a region with one outline. */
export function listBands(form: FoundForm, region: Region): Candidate[] {
  const o = region.outlines[0];
  const n = o.vertices.length;
  const total = o.arc[n];
  const m = o.turns.length;
  const out: Candidate[] = [];
  if (m < 2) {
    const first = m === 1 ? o.turns[0] : findLowest(region, o);
    for (let k = 0; k < (m === 1 ? 1 : 4); k++) {
      const a = findPosition(o, (o.arc[first] + (k * total) / 8) % total);
      const b = findPosition(o, (o.arc[a] + total / 2) % total);
      if (a !== b) out.push(makeBands(form, o, [a, a], [b, b]));
    }
    return out;
  }
  // ends of the stack: corner i is 2i, the side after it 2i + 1
  const span = (e: number): [number, number] => [o.turns[e >> 1], o.turns[((e + 1) >> 1) % m]];
  for (let a = 0; a < 2 * m; a++)
    for (let b = a + 1; b < 2 * m; b++) {
      const sidesOn = (from: number, to: number) => ((to >> 1) - ((from + 1) >> 1) + m) % m;
      const first = sidesOn(a, b);
      const second = sidesOn(b, a);
      const taken = (a & 1) + (b & 1);
      if (first < 1 || second < 1 || first + second + taken !== m) continue;
      if (Math.abs(first - second) > m % 2) continue;
      out.push(makeBands(form, o, span(a), span(b)));
    }
  return out;
}

/** Runs of an outline whose segments answer to `is`, as [from, to) positions; the whole outline gives none. */
function findRuns(o: Outline, is: (edge: number) => boolean): [number, number][] {
  const n = o.vertices.length;
  const runs: [number, number][] = [];
  for (let i = 0; i < n; i++) {
    if (!is(o.edge[i]) || is(o.edge[(i + n - 1) % n])) continue;
    let end = i;
    while (is(o.edge[end % n])) end++;
    runs.push([i, end % n]);
  }
  return runs;
}

/** Strips from one run of a one-outline region to another; null where either is not exactly one run or they overlap. */
export function bandsBetween(
  form: FoundForm,
  region: Region,
  isFrom: (edge: FormEdge) => boolean,
  isTo: (edge: FormEdge) => boolean,
): Candidate | null {
  const o = region.outlines[0];
  const from = findRuns(o, (e) => isFrom(form.edges[e]));
  const to = findRuns(o, (e) => isTo(form.edges[e]));
  if (from.length !== 1 || to.length !== 1 || from[0][0] === to[0][0]) return null;
  return makeBands(form, o, [to[0][1], from[0][0]], [from[0][1], to[0][0]]);
}

/** Strips from a ring side to the outer rim of a region between inner cables, or null where it is no such region. */
export function findSector(form: FoundForm, region: Region): Candidate | null {
  const sector = bandsBetween(
    form,
    region,
    (e) => e.loop > 0,
    (e) => e.loop === 0,
  );
  return sector ? { ...sector, layout: "gores" } : null;
}

/**
 * Strips from the spine of an opened region (opening seams and the rings between them) to the outer rim: with the rim's first and
 * last straight piece beside the outer strips, and without. None where the region has no such spine.
 */
export function listSpineBands(form: FoundForm, region: Region): Candidate[] {
  const o = region.outlines[0];
  const n = o.vertices.length;
  const inner = (e: number) => form.edges[e].loop !== 0;
  const rings = new Set([...o.edge].map((e) => form.edges[e].loop).filter((loop) => loop > 0));
  const spine = findRuns(o, inner);
  if (rings.size === 0) return [];
  if (spine.length === 2) return [makeBands(form, o, [spine[1][1], spine[0][0]], [spine[0][1], spine[1][0]])];
  if (spine.length !== 1) return [];
  const [first, last] = spine[0];
  const onRim = o.turns.filter((i) => (i - last + n) % n > 0 && (i - last + n) % n < (first - last + n) % n);
  onRim.sort((a, b) => ((a - last + n) % n) - ((b - last + n) % n));
  const out = [makeBands(form, o, [first, first], [last, last])];
  if (onRim.length > 1) out.push(makeBands(form, o, [onRim[onRim.length - 1], first], [last, onRim[0]]));
  return out;
}

/** Gores from the shorter loop of a ring to the longer one; `from` names an edge of the loop to start on. */
export function listGores(form: FoundForm, region: Region, from: string | null): Candidate[] {
  const [long, short] = region.outlines;
  const named = from !== null && [...long.edge].some((e) => form.edges[e].id === from);
  const inner = named ? long : short;
  const outer = named ? short : long;
  const upright = measureTurn(region, outer) >= 0;
  const start = buildChain(inner, 0, 0, { whole: true, reverse: upright });
  const seat = findSeat(region, outer);
  const finish = buildChain(outer, seat, seat, { whole: true, reverse: !upright });
  const at: Vec3 = vertexAt(region.surface, outer.vertices[seat]);
  return [
    {
      layout: "gores",
      start,
      finish,
      left: null,
      right: null,
      offset: { start: findNearestOnChain(region.surface, start, at), finish: 0 },
      from: nameChain(form, start),
      to: nameChain(form, finish),
    },
  ];
}

/** Place in a ring's outer outline at which its gores begin to be counted. */
export function findSeat(region: Region, outer: Outline): number {
  return outer.turns.length > 0 ? pickCorner(region, outer) : findLowest(region, outer);
}

/** The corner of an outline that lies lowest, then farthest along +x, then +y. */
function pickCorner(region: Region, o: Outline): number {
  const place = (i: number) => vertexAt(region.surface, o.vertices[i]);
  const scale = 1e-6 * o.arc[o.vertices.length];
  return o.turns.reduce((best, i) => {
    const p = place(i);
    const q = place(best);
    const order = [q[2] - p[2], p[0] - q[0], p[1] - q[1]].find((d) => Math.abs(d) > scale) ?? 0;
    return order > 0 ? i : best;
  });
}

/** Mean place of a chain's vertices. */
function meanPlace(region: Region, chain: Chain): Vec3 {
  const points = listChainPoints(region.surface, chain);
  const sum: Vec3 = [0, 0, 0];
  for (const p of points) for (let k = 0; k < 3; k++) sum[k] += p[k] / points.length;
  return sum;
}

/** Doubled area of an outline seen from above, m2: positive where it runs counter-clockwise. */
function measureTurn(region: Region, o: Outline): number {
  let sum = 0;
  o.vertices.forEach((v, i) => {
    const p = vertexAt(region.surface, v);
    const q = vertexAt(region.surface, o.vertices[(i + 1) % o.vertices.length]);
    sum += p[0] * q[1] - q[0] * p[1];
  });
  return sum;
}

/** The candidate with its stack turned round: right becomes left. */
function turnCandidate(c: Candidate): Candidate {
  const turn = (chain: Chain): Chain => {
    const length = measureChain(chain);
    return {
      vertices: [...chain.vertices].reverse(),
      arc: Float64Array.from(chain.arc, (_, k) => length - chain.arc[chain.arc.length - 1 - k]),
      edge: [...chain.edge].reverse(),
      corners: chain.corners.map((s) => length - s).reverse(),
      reversed: !chain.reversed,
    };
  };
  return { ...c, start: turn(c.start), finish: turn(c.finish), left: c.right, right: c.left };
}

/**
 * The candidate turned, where needed, so that its strips are read along +x or, for a stack nearer to y, along +y;
 * gores counter-clockwise from above.
 */
export function orientCandidate(region: Region, c: Candidate): Candidate {
  if (!c.left || !c.right) return c;
  if (c.layout === "gores") return measureTurn(region, region.outlines[0]) >= 0 ? turnCandidate(c) : c;
  const a = meanPlace(region, c.left);
  const b = meanPlace(region, c.right);
  const d = [b[0] - a[0], b[1] - a[1], b[2] - a[2]];
  const scale = 1e-6 * (measureChain(c.start) + measureChain(c.finish));
  const flatX = Math.abs(d[0]) >= Math.abs(d[1]) - scale;
  const way = flatX ? d[0] : d[1];
  if (Math.abs(way) > scale ? way > 0 : d[2] >= 0) return c;
  return turnCandidate(c);
}
