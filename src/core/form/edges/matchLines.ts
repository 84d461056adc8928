// The mesh file's polylines onto sides of the surface: snapped to vertices, gaps filled along the mesh, chained by name,
// parted where they leave the boundary. Decides nothing about cables.
import type { Finding } from "../../problem.ts";
import type { MeshSource } from "../../records/job.ts";
import type { Adjacency } from "../../surface/adjacency.ts";
import { nextHalfedge, previousHalfedge } from "../../surface/adjacency.ts";
import { buildFormFinding, describeVertex } from "../formFinding.ts";
import { type SoundSurface, WELD } from "../repair/soundSurface.ts";
import { findNearestVertex, measureMeanSide } from "./nearestVertex.ts";

/** A polyline on the surface: consecutive vertices share a side. A closed one repeats its first vertex. */
export interface SurfaceLine {
  name: string | null;
  vertices: number[];
  /** True where every side of it is on the boundary, false where none is. */
  boundary: boolean;
}

/** Snapping distance as a share of the mean side. */
const SNAP = 0.1;

/** A gap between two points of a line is filled along mesh sides no longer than this times the straight distance. */
const DETOUR = 1.15;

/** Unnamed lines along more than this share of all sides are a drawn wireframe, not cables. */
const WIREFRAME = 0.3;

interface Links {
  name: string | null;
  /** Neighbours along the line, in order of appearance. */
  next: Map<number, number[]>;
  count: number;
}

/** Vertices that share a side with v. */
function findNeighbours(tri: Uint32Array<ArrayBuffer>, adjacency: Adjacency, v: number): number[] {
  const out: number[] = [];
  for (let i = adjacency.fanStart[v]; i < adjacency.fanStart[v + 1]; i++) {
    const h = adjacency.fan[i];
    out.push(tri[nextHalfedge(h)], tri[previousHalfedge(h)]);
  }
  return [...new Set(out)];
}

function measureGap(x: Float64Array<ArrayBuffer>, a: number, b: number): number {
  return Math.sqrt(
    (x[3 * a] - x[3 * b]) ** 2 + (x[3 * a + 1] - x[3 * b + 1]) ** 2 + (x[3 * a + 2] - x[3 * b + 2]) ** 2,
  );
}

type Sides = (a: number, b: number) => boolean;

/** Shortest way along sides that may be used, a to b, within DETOUR of the straight distance; null where there is none. */
function findWay(sound: SoundSurface, adjacency: Adjacency, [a, b]: [number, number], mayUse: Sides): number[] | null {
  const { xyz, tri } = sound.surface;
  const limit = DETOUR * measureGap(xyz, a, b);
  const far = new Map<number, number>([[a, 0]]);
  const from = new Map<number, number>();
  const done = new Set<number>();
  const open = new Set<number>([a]);
  while (open.size > 0) {
    let v = -1;
    let best = Infinity;
    for (const o of open) {
      const d = (far.get(o) as number) + measureGap(xyz, o, b);
      if (d < best) {
        best = d;
        v = o;
      }
    }
    if (best > limit) return null;
    if (v === b) break;
    open.delete(v);
    done.add(v);
    for (const w of findNeighbours(tri, adjacency, v)) {
      if (done.has(w) || !mayUse(v, w)) continue;
      const d = (far.get(v) as number) + measureGap(xyz, v, w);
      if (d >= (far.get(w) ?? Infinity)) continue;
      far.set(w, d);
      from.set(w, v);
      open.add(w);
    }
  }
  const way = [b];
  while (way[0] !== a) {
    const back = from.get(way[0]);
    if (back === undefined) return null;
    way.unshift(back);
  }
  return way;
}

function addLinkInPlace(links: Links, a: number, b: number): void {
  const at = links.next.get(a) ?? [];
  if (at.includes(b)) return;
  links.next.set(a, [...at, b]);
  links.next.set(b, [...(links.next.get(b) ?? []), a]);
  links.count++;
}

/** A point of a line that lies off the surface's vertices. */
interface Astray {
  source: number;
  distance: number;
}

/** Surface vertices of a line's points with the points that were moved onto them, or the point farthest off where one is beyond reach. */
function snapLine(
  sound: SoundSurface,
  vertices: readonly number[],
  reach: number,
): { path: number[]; moved: Astray[] } | Astray {
  const out: number[] = [];
  const moved: Astray[] = [];
  let off: Astray | null = null;
  for (const source of vertices) {
    let v = sound.fromSource[source];
    if (v < 0) {
      const near = findNearestVertex(sound.surface, sound.sourceXyz.subarray(3 * source, 3 * source + 3));
      if (near.distance > reach && near.distance > (off?.distance ?? 0)) off = { source, distance: near.distance };
      v = near.vertex;
      moved.push({ source, distance: near.distance });
    }
    if (out[out.length - 1] !== v) out.push(v);
  }
  return off ?? { path: out, moved };
}

/** Paths of a set of links, parted at branches and where boundary and inside meet. */
function walkLinks(links: Links, isBoundary: Sides): SurfaceLine[] {
  const { next, name } = links;
  const used = new Set<string>();
  const key = (a: number, b: number) => (a < b ? `${a}-${b}` : `${b}-${a}`);
  const isEnd = (v: number) => {
    const at = next.get(v) ?? [];
    return at.length !== 2 || isBoundary(v, at[0]) !== isBoundary(v, at[1]);
  };
  const walk = (start: number, first: number): SurfaceLine => {
    const vertices = [start, first];
    used.add(key(start, first));
    for (let v = first; v !== start && !isEnd(v); ) {
      const before = vertices[vertices.length - 2];
      const at = next.get(v) ?? [];
      const w = at[0] === before ? at[1] : at[0];
      used.add(key(v, w));
      vertices.push(w);
      v = w;
    }
    return { name, vertices, boundary: isBoundary(start, first) };
  };
  const out: SurfaceLine[] = [];
  for (const ends of [true, false])
    for (const [v, at] of next)
      if (isEnd(v) === ends) for (const w of at) if (!used.has(key(v, w))) out.push(walk(v, w));
  return out;
}

function reportOff(sound: SoundSurface, name: string, source: number, why: string): Finding {
  return buildFormFinding("stop", {
    code: "mesh-line-off",
    where: [name, `vertex ${source}`],
    text: `line ${name} does not follow the mesh: ${why} at ${describeVertex(sound.sourceXyz, source)}; this line was left out`,
    remedy: "draw the line through vertices of the surface, every vertex it passes named in turn",
  });
}

/** A line that leaves the surface by more than a side is a mast, a stay or a drawing aid; one that just misses it is a fault. */
function reportAstray(sound: SoundSurface, name: string, off: Astray, side: number): Finding {
  const far = `its nearest vertex is ${off.distance.toFixed(3)} m away (limit ${(SNAP * side).toFixed(3)} m)`;
  if (off.distance <= side) return reportOff(sound, name, off.source, far);
  return buildFormFinding("note", {
    code: "mesh-line-elsewhere",
    where: [name, `vertex ${off.source}`],
    value: off.distance,
    limit: side,
    text: `line ${name} leaves the surface by up to ${off.distance.toFixed(3)} m at ${describeVertex(sound.sourceXyz, off.source)}: taken for a mast, a stay or a drawing aid, not for an edge`,
    remedy: "nothing to do if it is that; else draw it through vertices of the surface",
  });
}

/** Points of lines that were moved by more than the file's rounding, all lines together. */
function reportSnapped(sound: SoundSurface, moved: ReadonlyMap<number, [string, number]>, reach: number): Finding[] {
  const order = [...moved].sort(([, [, a]], [, [, b]]) => b - a);
  if (order.length === 0) return [];
  const [source, [name, distance]] = order[0];
  return [
    buildFormFinding("note", {
      code: "mesh-line-snapped",
      where: [name, `vertex ${source}`],
      value: order.length,
      limit: reach,
      text: `${order.length} ${order.length === 1 ? "point of a line lies" : "points of lines lie"} beside the mesh and moved to the nearest vertex, by up to ${(1000 * distance).toPrecision(2)} mm (limit ${(1000 * reach).toPrecision(2)} mm), worst on line ${name} at ${describeVertex(sound.sourceXyz, source)}`,
      remedy: "nothing to do if the line runs along these vertices; else draw it through vertices of the surface",
    }),
  ];
}

/**
 * The file's lines as paths of the surface.
 * @shape onBoundary: whether the side between two vertices is on the boundary
 */
export function matchLines(
  sound: SoundSurface,
  adjacency: Adjacency,
  lines: MeshSource["lines"],
  isBoundary: Sides,
): { lines: SurfaceLine[]; findings: Finding[] } {
  const findings: Finding[] = [];
  const groups = new Map<string | null, Links>();
  const side = measureMeanSide(sound.surface);
  const moved = new Map<number, [string, number]>();
  const exact = WELD * sound.diagonal;
  for (const line of lines) {
    const label = line.name ?? "without a name";
    const found = snapLine(sound, line.vertices, SNAP * side);
    if (!("path" in found)) {
      findings.push(reportAstray(sound, label, found, side));
      continue;
    }
    const snapped = found.path;
    const ways = snapped.slice(1).map((b, i) => {
      const a = snapped[i];
      if (findNeighbours(sound.surface.tri, adjacency, a).includes(b)) return [a, b];
      return findWay(sound, adjacency, [a, b], isBoundary) ?? findWay(sound, adjacency, [a, b], () => true);
    });
    const gap = ways.indexOf(null);
    if (gap >= 0) {
      const at = sound.toSource[snapped[gap]];
      findings.push(
        reportOff(
          sound,
          label,
          at,
          `no run of mesh sides leads to its next point within ${DETOUR} times the straight distance`,
        ),
      );
      continue;
    }
    const links = groups.get(line.name) ?? { name: line.name, next: new Map(), count: 0 };
    groups.set(line.name, links);
    for (const { source, distance } of found.moved) if (distance > exact) moved.set(source, [label, distance]);
    for (const way of ways as number[][])
      for (let i = 1; i < way.length; i++) addLinkInPlace(links, way[i - 1], way[i]);
  }
  findings.push(...reportSnapped(sound, moved, SNAP * side));
  const sides = (adjacency.twin.length + adjacency.twin.reduce((n, t) => n + (t < 0 ? 1 : 0), 0)) / 2;
  const wire = groups.get(null);
  if (wire && wire.count > WIREFRAME * sides) {
    groups.delete(null);
    findings.push(
      buildFormFinding("note", {
        code: "mesh-wireframe",
        where: "mesh",
        value: wire.count,
        limit: WIREFRAME,
        text: `${wire.count} of ${sides} sides of the mesh are drawn as lines without a name: taken for a wireframe, not for cables`,
        remedy: "name the lines that are cables",
      }),
    );
  }
  return { lines: [...groups.values()].flatMap((links) => walkLinks(links, isBoundary)), findings };
}
