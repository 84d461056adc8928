// Parts the cloth of a seam in hand (holdSeam.ts) along a new line into its two strips, and names their sides as the layout does.
import { PlanError } from "../problem.ts";
import type { Seam, Strip, StripLayout, StripSide } from "../records/stripLayout.ts";
import { nextHalfedge } from "../surface/adjacency.ts";
import { cutSurface } from "../surface/cut.ts";
import { partSurface, traceOutlineSides } from "../surface/pieces.ts";
import type { Surface, SurfacePoint } from "../surface/surface.ts";
import { type BorderMark, type CutForm, SNAP_REACH, SNAPS } from "./cutStrips.ts";
import { compareMoments, type HeldSeam, measureMoments, type RimPiece, sideKey } from "./holdSeam.ts";
import { findEnds, measureVertices } from "./stripEnds.ts";
import { listSides, type RawSide } from "./stripSides.ts";
import { laysOver } from "./upperStrip.ts";

/** The two strips of a moved seam, and all seams they have. */
export interface MovedSeam {
  /** Vertices of the base, then those of the new line; triangles of the two strips alone. */
  layout: StripLayout;
  /** By strip: its vertices laid flat without a fold, in the order of their numbers; none where the cloth could not be. */
  flat: Map<string, Float64Array<ArrayBuffer>>;
}

/** The piece parted in two, in numbers of its own. */
export interface PartedSeam {
  cut: CutForm;
  /** Vertex of the base, or further on, for each vertex. */
  baseVertex: Uint32Array<ArrayBuffer>;
  /** The half to the left of the line's way. */
  left: number;
  /** What a side of the rim lies on, its inserted vertices considered. */
  rimAt: (a: number, b: number) => RimPiece | undefined;
  /** @shape 2*n */
  flat: Float64Array<ArrayBuffer> | null;
}

function refuseParting(weld: string, parts: number): never {
  throw new PlanError(
    "seam-move",
    `${weld} would part its cloth into ${parts} panels in place of 2 there: it runs too near an edge or another seam`,
    weld,
    { parts },
  );
}

/** Places of inserted vertices laid flat with the piece. */
function placeFlat(flat: Float64Array<ArrayBuffer>, inserted: readonly SurfacePoint[]): Float64Array<ArrayBuffer> {
  const out = new Float64Array(flat.length + 2 * inserted.length);
  out.set(flat);
  inserted.forEach(({ a, b, t }, i) => {
    for (let c = 0; c < 2; c++) out[flat.length + 2 * i + c] = (1 - t) * flat[2 * a + c] + t * flat[2 * b + c];
  });
  return out;
}

/**
 * Parts the held cloth along a line from rim to rim.
 * @throws PlanError seam-move: the line does not part it in two; those of cutting
 */
export function partHeld(held: HeldSeam, line: readonly SurfacePoint[], weld: string): PartedSeam {
  const { surface, adjacency } = held;
  const n = held.baseVertex.length;
  const nBase = held.base.xyz.length / 3;
  let parts = 0;
  for (const snap of SNAPS) {
    const cut = cutSurface(surface, [line], { adjacency, snap, reach: SNAP_REACH });
    const [run] = cut.pathVertices;
    const { tri } = cut.surface;
    const sides = run.slice(1).map((v, i): [number, number] => [run[i], v]);
    const stripOf = partSurface(cut.surface, sides, cut.adjacency);
    parts = stripOf.reduce((most, s) => Math.max(most, s + 1), 0);
    if (parts !== 2) continue;
    const own = new Set(sides.map(([a, b]) => sideKey(a, b, tri.length)));
    const rimAt = (a: number, b: number) => {
      const v = a >= n ? cut.vertexPlace[a - n] : b >= n ? cut.vertexPlace[b - n] : { a, b };
      return held.rim.get(sideKey(v.a, v.b, n));
    };
    const marks = new Map<number, BorderMark>();
    const strips = [0, 1].map((s) => {
      const triangles: number[] = [];
      stripOf.forEach((o, t) => {
        if (o === s) triangles.push(t);
      });
      const [outline] = traceOutlineSides(cut.surface, triangles, [], cut.adjacency);
      for (const h of outline) {
        const [a, b] = [tri[h], tri[nextHalfedge(h)]];
        const mark = own.has(sideKey(a, b, tri.length)) ? HELD : rimAt(a, b)?.mark;
        if (mark) marks.set(h, mark);
      }
      return { region: 0, place: s, triangles, outline };
    });
    const first = strips[0].outline.find((h) => marks.get(h) === HELD) ?? 0;
    return {
      cut: {
        surface: cut.surface,
        adjacency: cut.adjacency,
        stripOf,
        strips,
        marks,
        inserted: cut.vertexPlace,
        paths: [],
        findings: [],
      },
      baseVertex: Uint32Array.from({ length: n + cut.vertexPlace.length }, (_, v) =>
        v < n ? held.baseVertex[v] : nBase + v - n,
      ),
      left: run.indexOf(tri[nextHalfedge(first)]) > run.indexOf(tri[first]) ? 0 : 1,
      rimAt,
      flat: held.flat && placeFlat(held.flat, cut.vertexPlace),
    };
  }
  refuseParting(weld, parts);
}

/** The mark of the seam in hand: a path of a number that no other has. */
const HELD: BorderMark = { edge: -1, path: Number.MAX_SAFE_INTEGER, end: 0 };

/** Names of the left and the right half, by the strips of the whole layout that they are where the seam has not moved. */
export function nameHalves(parted: PartedSeam, whole: StripLayout, strips: readonly Strip[]): [string, string] {
  const left = measureMoments(parted.cut.surface, parted.cut.strips[parted.left].triangles);
  const off = strips.map((s) => compareMoments(measureMoments(whole.surface, s.triangles), left));
  const own = off[0] <= off[1] ? 0 : 1;
  return [strips[own].id, strips[1 - own].id];
}

/** The seam of the whole layout that a side lies on: the one of this strip before those of its sister. */
function findSeam(seams: readonly Seam[], vertices: ReadonlySet<number>, strip: string): Seam | undefined {
  let best: { seam: Seam; score: number } | undefined;
  for (const seam of seams) {
    const common = seam.vertices.filter((v) => vertices.has(v)).length;
    if (common === 0) continue;
    const score = (common > 1 ? 1e6 : 0) + (seam.strips.includes(strip) ? 1e5 : 0) + common;
    if (!best || score > best.score) best = { seam, score };
  }
  return best?.seam;
}

/**
 * Strips and seams of the parted cloth under the names of the layout. A border that a half did not have before gets a seam of a new name.
 * @throws PlanError seam-sides: a side lies on no seam of the layout
 */
export function joinParts(
  held: HeldSeam,
  parted: PartedSeam,
  halves: readonly [string, string],
  form: { edges: readonly { id: string; kind: string }[] },
  weld: string,
): MovedSeam {
  const { cut, baseVertex } = parted;
  const order = parted.left === 0 ? [0, 1] : [1, 0];
  const name = (s: number) => halves[s === parted.left ? 0 : 1];
  let raw = listSides([], cut, held.corners);
  const ends = raw.map((sides, s) => findEnds(cut, s, sides));
  const split = ends.flatMap((end) => end.split ?? []);
  if (split.length > 0) raw = listSides([], cut, new Set([...held.corners, ...split]));
  const surface = joinSurface(held, parted);
  const others = held.seams.filter((s) => s.weld !== weld);
  const own = held.seams.filter((s) => s.weld === weld);
  const seams: Seam[] = [];
  const named = new Map<string, string>();
  let fresh = 0;
  const add = (seam: Seam, vertices: number[], extra: Partial<Seam>): string => {
    let { id } = seam;
    while (seams.some((s) => s.id === id) || (id !== seam.id && held.seams.some((s) => s.id === id)))
      id = `${seam.id.replace(/\d+$/, "")}${held.seams.length + ++fresh}`;
    seams.push({ ...seam, ...extra, id, vertices, length: measureVertices(surface, vertices) });
    return id;
  };
  const sideOf = (s: number, side: RawSide): StripSide => {
    const vertices = side.vertices.map((v) => baseVertex[v]);
    if (side.neighbour >= 0) {
      const key = [...vertices].reverse().join();
      let id = named.get(key);
      if (id === undefined) {
        const strips: [string, string] = [name(s), name(1 - s)];
        const upper = laysOver(cut, side.vertices) ? strips[0] : strips[1];
        id = add(own[Math.min(own.length - 1, named.size)], vertices, { strips, upper });
        named.set(vertices.join(), id);
      }
      return { kind: "seam", id, vertices };
    }
    const rim = side.vertices.slice(1).flatMap((v, i) => parted.rimAt(side.vertices[i], v) ?? []);
    if (rim[0]?.outside === false) {
      const { id, kind } = form.edges[rim[0].mark.edge];
      return { kind: kind === "clamped" || kind === "free" ? kind : "cable", id, vertices };
    }
    const seam = findSeam(others, new Set(rim.flatMap((piece) => piece.ends)), name(s));
    if (!seam)
      throw new PlanError("seam-sides", `a side of ${name(s)} lies on no seam of the layout: move the seam a little`, [
        name(s),
        weld,
      ]);
    const far = seam.strips.find((id) => !halves.includes(id)) ?? name(1 - s);
    const upper = seam.upper === far ? far : name(s);
    const twin = seams.find((q) => q.id === seam.id && q.strips.includes(name(s)) && far === name(1 - s));
    return { kind: "seam", id: twin ? twin.id : add(seam, vertices, { strips: [name(s), far], upper }), vertices };
  };
  const sides: StripSide[][] = [];
  for (const s of order) sides[s] = raw[s].map((side) => sideOf(s, side));
  const strips = order.map(
    (s): Strip => ({
      id: name(s),
      triangles: cut.strips[s].triangles,
      sides: sides[s],
      from: ends[s].from.map((v) => baseVertex[v]),
      to: ends[s].to.map((v) => baseVertex[v]),
    }),
  );
  return {
    layout: { surface, seams, strips, choices: [] },
    flat: new Map(order.flatMap((s) => (parted.flat ? [[name(s), pickFlat(parted, parted.flat, s)]] : []))),
  };
}

/** The two strips in numbers of the base. */
function joinSurface({ base }: HeldSeam, { cut, baseVertex }: PartedSeam): Surface {
  const last = baseVertex.reduce((most, v) => Math.max(most, v), 0);
  const xyz = new Float64Array(Math.max(base.xyz.length, 3 * (last + 1)));
  xyz.set(base.xyz);
  baseVertex.forEach((b, v) => {
    xyz.set(cut.surface.xyz.subarray(3 * v, 3 * v + 3), 3 * b);
  });
  return { xyz, tri: cut.surface.tri.map((v) => baseVertex[v]) };
}

/** Flat places of a half, in the order of its vertices' numbers in the base. */
function pickFlat({ cut, baseVertex }: PartedSeam, flat: Float64Array<ArrayBuffer>, s: number) {
  const own = new Map<number, number>();
  for (const t of cut.strips[s].triangles)
    for (let k = 0; k < 3; k++) own.set(baseVertex[cut.surface.tri[3 * t + k]], cut.surface.tri[3 * t + k]);
  const out = new Float64Array(2 * own.size);
  [...own.keys()]
    .sort((a, b) => a - b)
    .forEach((b, i) => {
      const v = own.get(b) ?? 0;
      out.set(flat.subarray(2 * v, 2 * v + 2), 2 * i);
    });
  return out;
}
