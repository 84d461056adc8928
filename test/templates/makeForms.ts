// Makes the meshes of the starter jobs: minimal surfaces in balance. Shares no code with the form station, so that the
// starters also test it. Written out by starterForms.test.ts.
import { approachInPlace } from "./approachForm.ts";
import type { MadeForm } from "./madeForm.ts";
import { settleInPlace } from "./settleForm.ts";

type Point = [number, number, number];

/** A grid of quads, each cut in two, over the unit square; south at v = 0, west at u = 0. */
function makeGrid([nx, ny]: [number, number], place: (u: number, v: number) => Point) {
  const at = (i: number, j: number) => j * (nx + 1) + i;
  const xyz = new Float64Array(3 * (nx + 1) * (ny + 1));
  for (let j = 0; j <= ny; j++) for (let i = 0; i <= nx; i++) xyz.set(place(i / nx, j / ny), 3 * at(i, j));
  const tri: number[] = [];
  for (let j = 0; j < ny; j++) {
    for (let i = 0; i < nx; i++) {
      const [a, b, c, d] = [at(i, j), at(i + 1, j), at(i + 1, j + 1), at(i, j + 1)];
      // Diagonals alternate, so that the mesh favours no direction.
      tri.push(...((i + j) % 2 === 0 ? [a, b, c, a, c, d] : [a, b, d, b, c, d]));
    }
  }
  const along = (n: number, vertexAt: (k: number) => number) => Array.from({ length: n + 1 }, (_, k) => vertexAt(k));
  const lines = [
    { name: "south", vertices: along(nx, (k) => at(k, 0)) },
    { name: "east", vertices: along(ny, (k) => at(nx, k)) },
    { name: "north", vertices: along(nx, (k) => at(nx - k, ny)) },
    { name: "west", vertices: along(ny, (k) => at(0, ny - k)) },
  ];
  const corners = [
    { name: "corner-sw", vertex: at(0, 0) },
    { name: "corner-se", vertex: at(nx, 0) },
    { name: "corner-ne", vertex: at(nx, ny) },
    { name: "corner-nw", vertex: at(0, ny) },
  ];
  return { xyz, tri: new Uint32Array(tri), lines, corners };
}

const mix = (a: Point, b: Point, t: number): Point => [0, 1, 2].map((k) => a[k] + t * (b[k] - a[k])) as Point;

/** Clamped along four straight edges over a rectangle, corners at their own heights (SW, SE, NE, NW). */
export function makeSaddle(
  size: [number, number],
  heights: [number, number, number, number],
  cells: [number, number],
): MadeForm {
  const [sw, se, ne, nw]: Point[] = [
    [0, 0, heights[0]],
    [size[0], 0, heights[1]],
    [size[0], size[1], heights[2]],
    [0, size[1], heights[3]],
  ];
  const grid = makeGrid(cells, (u, v) => mix(mix(sw, se, u), mix(nw, ne, u), v));
  const fixed = [...new Set(grid.lines.flatMap((l) => l.vertices))].sort((a, b) => a - b);
  const form = { ...grid, pull: {}, fixed };
  settleInPlace(form);
  return form;
}

/** A cable of force T against a stress s takes the radius T/s: the parabola of that curvature from a to b, sagging inward in plan. */
function bendEdge(a: Point, b: Point, radius: number): (t: number) => Point {
  const [dx, dy, dz] = [0, 1, 2].map((k) => b[k] - a[k]);
  const plan = Math.hypot(dx, dy);
  const sag = (t: number) => ((plan * plan + dz * dz) / (2 * radius)) * t * (1 - t);
  return (t) => [a[0] + t * dx - (sag(t) * dy) / plan, a[1] + t * dy + (sag(t) * dx) / plan, a[2] + t * dz];
}

/** Hung from four corners (SW, SE, NE, NW) by edge cables whose force over the cloth's stress is given (south, east, north, west), m. */
export function makeSail(
  corners: [Point, Point, Point, Point],
  pull: [number, number, number, number],
  cells: [number, number],
): MadeForm {
  const [sw, se, ne, nw] = corners;
  const [south, east, north, west] = [
    bendEdge(sw, se, pull[0]),
    bendEdge(se, ne, pull[1]),
    bendEdge(ne, nw, pull[2]),
    bendEdge(nw, sw, pull[3]),
  ];
  // The surface that blends four border curves (S. A. Coons 1967).
  const grid = makeGrid(cells, (u, v) => {
    const flat = mix(mix(sw, se, u), mix(nw, ne, u), v);
    const across = mix(south(u), north(1 - u), v);
    const along = mix(west(1 - v), east(v), u);
    return [0, 1, 2].map((k) => across[k] + along[k] - flat[k]) as Point;
  });
  const names = ["south", "east", "north", "west"];
  const form = {
    ...grid,
    pull: Object.fromEntries(names.map((name, i) => [name, pull[i]])),
    fixed: grid.corners.map((c) => c.vertex).sort((a, b) => a - b),
  };
  settleInPlace(form);
  return form;
}

/** A round ring held in space, level. */
interface Ring {
  centre: Point;
  radius: number;
}

/**
 * A cone from a held ring down to corners (counter-clockwise from above, the first one at the ring's angle `from`, rad), between
 * which edge cables run whose force over the cloth's stress is given, m. Cells: along each edge, from ring to edge.
 */
export function makeCone(
  ring: Ring,
  corners: { name: string; at: Point }[],
  edges: { name: string; pull: number }[],
  [along, rows]: [number, number],
  from: number,
): MadeForm {
  const n = along * corners.length;
  const rim = Array.from({ length: n }, (_, i) => {
    const k = Math.floor(i / along);
    return bendEdge(corners[k].at, corners[(k + 1) % corners.length].at, edges[k].pull)((i % along) / along);
  });
  const at = (i: number, j: number) => j * n + (i % n);
  const xyz = new Float64Array(3 * n * (rows + 1));
  for (let i = 0; i < n; i++) {
    const angle = from + (2 * Math.PI * i) / n;
    const [c, s] = [Math.cos(angle), Math.sin(angle)];
    const top: Point = [ring.centre[0] + ring.radius * c, ring.centre[1] + ring.radius * s, ring.centre[2]];
    const reach = Math.hypot(rim[i][0] - ring.centre[0], rim[i][1] - ring.centre[1]);
    for (let j = 0; j <= rows; j++) {
      // Rows at radii in geometric steps: near the ring, where cells are narrow, they are short too.
      const t = (ring.radius * (reach / ring.radius) ** (j / rows) - ring.radius) / (reach - ring.radius);
      // Hollow as a cone under tension is: height falls with the logarithm of the radius (small slopes).
      const point = mix(top, rim[i], t);
      point[2] = top[2] + (rim[i][2] - top[2]) * (j / rows);
      xyz.set(point, 3 * at(i, j));
    }
  }
  const tri: number[] = [];
  for (let j = 0; j < rows; j++) {
    for (let i = 0; i < n; i++) {
      const [a, b, c, d] = [at(i, j + 1), at(i + 1, j + 1), at(i + 1, j), at(i, j)];
      tri.push(...((i + j) % 2 === 0 ? [a, b, c, a, c, d] : [a, b, d, b, c, d]));
    }
  }
  const ringVertices = Array.from({ length: n + 1 }, (_, i) => at(n - i, 0));
  const form: MadeForm = {
    xyz,
    tri: new Uint32Array(tri),
    lines: [
      ...edges.map(({ name }, k) => ({
        name,
        vertices: Array.from({ length: along + 1 }, (_, i) => at(k * along + i, rows)),
      })),
      { name: "ring", vertices: ringVertices },
    ],
    pull: Object.fromEntries(edges.map(({ name, pull }) => [name, pull])),
    corners: corners.map(({ name }, k) => ({ name, vertex: at(k * along, rows) })),
    fixed: [...ringVertices.slice(1), ...corners.map((_, k) => at(k * along, rows))].sort((a, b) => a - b),
  };
  approachInPlace(form, 12);
  settleInPlace(form);
  return form;
}
