import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { buildAdjacency, findBoundaryLoops, previousHalfedge } from "../../src/core/surface/adjacency.ts";
import { cutSurface } from "../../src/core/surface/cut.ts";
import { createGeodesicSolver, traceGeodesic, traceThrough } from "../../src/core/surface/geodesic.ts";
import { measureAreas, measureVectorAreas, pointAt, vertexAt } from "../../src/core/surface/measures.ts";
import type { Surface, SurfacePoint } from "../../src/core/surface/surface.ts";
import { findHalfedge, vertexPoint } from "../../src/core/surface/surfacePoint.ts";
import { drawBoundaryPlace, makeHeights, makeHills, makeRing } from "./madeSurfaces.ts";

/** Euler number. */
function measureEuler(s: Surface): number {
  const { nV, nT, twin } = buildAdjacency(s);
  let nE = 0;
  for (let h = 0; h < 3 * nT; h++) if (twin[h] < h) nE++;
  return nV - nE + nT;
}

/** What must hold of every cut; returns the cut. */
function checkCut(s: Surface, paths: SurfacePoint[][], snap?: number) {
  const cut = cutSurface(s, paths, snap === undefined ? {} : { snap });
  const nV = s.xyz.length / 3;
  expect(Array.from(cut.surface.xyz.subarray(0, 3 * nV))).toEqual(Array.from(s.xyz));
  expect(cut.surface.xyz.length / 3).toBe(nV + cut.vertexPlace.length);
  cut.vertexPlace.forEach((p, i) => {
    expect(vertexAt(cut.surface, nV + i)).toEqual(pointAt(s, p));
  });
  const [before, after] = [measureVectorAreas(s), measureVectorAreas(cut.surface)];
  const whole = measureAreas(s);
  const parts = measureAreas(cut.surface);
  const sum = new Float64Array(whole.length);
  cut.parent.forEach((t, i) => {
    sum[t] += parts[i];
    let along = 0;
    for (let k = 0; k < 3; k++) along += before[3 * t + k] * after[3 * i + k];
    expect(along).toBeGreaterThan(0);
  });
  for (let t = 0; t < sum.length; t++) expect(Math.abs(sum[t] / whole[t] - 1)).toBeLessThan(1e-12);
  const adjacency = buildAdjacency(cut.surface);
  expect(measureEuler(cut.surface)).toBe(measureEuler(s));
  expect(findBoundaryLoops(cut.surface, adjacency)).toHaveLength(findBoundaryLoops(s, buildAdjacency(s)).length);
  const joined = new Set<string>();
  const { tri } = cut.surface;
  for (let h = 0; h < tri.length; h++) {
    const w = tri[h % 3 === 2 ? h - 2 : h + 1];
    joined.add(`${tri[h]} ${w}`).add(`${w} ${tri[h]}`);
  }
  for (const path of cut.pathVertices)
    for (let i = 1; i < path.length; i++) expect(joined.has(`${path[i - 1]} ${path[i]}`)).toBe(true);
  return cut;
}

const codeOf = (run: () => unknown): string => {
  try {
    run();
  } catch (e) {
    return (e as { code?: string }).code ?? String(e);
  }
  return "none";
};

test("one triangle, one chord from corner to side: two children, the place kept", () => {
  const s = { xyz: Float64Array.of(0, 0, 0, 4, 0, 0, 0, 3, 0), tri: Uint32Array.of(0, 1, 2) };
  const cut = checkCut(s, [[vertexPoint(0), { a: 2, b: 1, t: 0.25 }]]);
  expect(cut.pathVertices).toEqual([[0, 3]]);
  expect(cut.vertexPlace).toEqual([{ a: 1, b: 2, t: 0.75 }]);
  expect(vertexAt(cut.surface, 3)).toEqual([1, 2.25, 0]);
  expect(cut.surface.tri).toHaveLength(6);
});

test("no path: the same surface", () => {
  const s = makeHills(4);
  const cut = checkCut(s, []);
  expect(cut.surface.tri).toEqual(s.tri);
});

test("snap: a crossing near a corner is moved to it, for every path alike; off the corner it stays", () => {
  const s = makeHeights(4, 4, () => 0);
  const h = findHalfedge(s, buildAdjacency(s), 12, 13);
  const apex = s.tri[previousHalfedge(h)];
  const paths: SurfacePoint[][] = [
    [vertexPoint(12), { a: 12, b: 13, t: 0.995 }],
    [vertexPoint(apex), { a: 13, b: 12, t: 0.004 }],
  ];
  const cut = checkCut(s, paths);
  expect(cut.vertexPlace).toHaveLength(0);
  expect(cut.pathVertices).toEqual([
    [12, 13],
    [apex, 13],
  ]);
  expect(checkCut(s, [paths[0]], 0).vertexPlace).toHaveLength(1);
});

test("snap: a path that passes near an inner vertex on three sides goes through it once", () => {
  // Straight line over the whole square, 0.3 mm beside the middle row of vertices.
  const s = makeHeights(8, 8, () => 0);
  const y = 4.0003;
  const adjacency = buildAdjacency(s);
  const line = traceGeodesic(s, adjacency, { a: 36, b: 45, t: y - 4 }, { a: 44, b: 53, t: y - 4 });
  expect(line.points.length).toBeGreaterThan(9);
  const cut = checkCut(s, [line.points]);
  expect(cut.pathVertices[0]).toEqual([36, 37, 38, 39, 40, 41, 42, 43, 44]);
  expect(cut.vertexPlace).toHaveLength(0);
});

test("a path along mesh edges takes up the vertices that another path ends with on it", () => {
  const s = makeHeights(4, 4, () => 0);
  const row = [10, 11, 12, 13, 14].map(vertexPoint);
  const up = traceGeodesic(s, buildAdjacency(s), { a: 11, b: 12, t: 0.5 }, vertexPoint(22)).points;
  const cut = checkCut(s, [row, up]);
  expect(cut.pathVertices[0]).toEqual([10, 11, 25, 12, 13, 14]);
  expect(cut.pathVertices[1][0]).toBe(25);
});

describe("crossings", () => {
  const s = makeHeights(9, 9, (x, y) => 0.1 * x * y, 0.5);
  const adjacency = buildAdjacency(s);
  const go = (p: SurfacePoint, q: SurfacePoint) => traceGeodesic(s, adjacency, p, q).points;
  const at = (x: number, y: number) => vertexPoint(10 * y + x);
  test("inside a triangle: named with both numbers and the place", () => {
    const run = () => cutSurface(s, [go(at(0, 9), at(9, 9)), go(at(0, 0), at(9, 8)), go(at(9, 0), at(0, 8))]);
    expect(codeOf(run)).toBe("seam-crossing");
    expect(run).toThrow(/paths 2 and 3 cross at \(/);
    try {
      run();
    } catch (e) {
      const { facts, where } = e as { facts: Record<string, number>; where: string[] };
      expect(where).toEqual(["path 2", "path 3"]);
      expect([facts.first, facts.second]).toEqual([1, 2]);
      // Both paths rise over the square: x from 0 to 9, they meet about amid it.
      expect(facts.x).toBeGreaterThan(3.5);
      expect(facts.x).toBeLessThan(5.5);
    }
  });
  test("through one vertex from side to side", () => {
    const middle = at(4, 4);
    const paths = [
      traceThrough(s, adjacency, [at(0, 4), middle, at(9, 4)]).points,
      traceThrough(s, adjacency, [at(4, 0), middle, at(4, 9)]).points,
    ];
    expect(codeOf(() => cutSurface(s, paths))).toBe("seam-crossing");
  });
  test("touching at a vertex, ending there, and sharing a stretch are allowed", () => {
    const middle = at(4, 4);
    const end = at(5, 5);
    const touch = [
      traceThrough(s, adjacency, [at(0, 3), middle, at(3, 0)]).points,
      traceThrough(s, adjacency, [at(9, 5), middle, at(4, 9)]).points,
    ];
    expect(checkCut(s, touch).pathVertices.every((p) => p.includes(middle.a))).toBe(true);
    checkCut(s, [traceThrough(s, adjacency, [at(0, 4), middle, at(9, 4)]).points, go(middle, at(4, 9))]);
    const shared = [
      traceThrough(s, adjacency, [at(0, 3), middle, end, at(9, 4)]).points,
      traceThrough(s, adjacency, [at(1, 9), middle, end, at(6, 9)]).points,
    ];
    checkCut(s, shared);
    // The same stretch, but the second path leaves it on the other side, also where it runs the other way.
    const crossing = traceThrough(s, adjacency, [at(1, 9), middle, end, at(6, 0)]).points;
    expect(codeOf(() => cutSurface(s, [shared[0], crossing]))).toBe("seam-crossing");
    expect(codeOf(() => cutSurface(s, [shared[0], [...crossing].reverse()]))).toBe("seam-crossing");
  });
  test("across a path that runs along mesh edges", () => {
    const flat = makeHeights(4, 4, () => 0);
    const row = [10, 11, 12, 13, 14].map(vertexPoint);
    const across = traceGeodesic(flat, buildAdjacency(flat), { a: 1, b: 2, t: 0.5 }, { a: 21, b: 22, t: 0.5 }).points;
    expect(codeOf(() => cutSurface(flat, [row, across]))).toBe("seam-crossing");
  });
  test("a path that crosses itself", () => {
    const loop = traceThrough(s, adjacency, [at(0, 2), at(8, 3), at(5, 8), at(3, 0)]).points;
    expect(() => cutSurface(s, [loop])).toThrow(/path 1 crosses itself/);
  });
});

test("a closed path round a ring keeps its first vertex at the end", () => {
  const s = makeRing(12, 4, (a, v) => [Math.cos(a), Math.sin(a), v]);
  const points = Array.from({ length: 13 }, (_, i) => vertexPoint(24 + (i % 12)));
  const cut = checkCut(s, [points]);
  expect(cut.pathVertices[0]).toHaveLength(13);
  expect(cut.pathVertices[0][12]).toBe(cut.pathVertices[0][0]);
});

describe("any paths between boundary places", () => {
  const hole = makeRing(20, 6, (a, v) => [
    (1 + v) * Math.cos(a),
    (1 + v) * Math.sin(a),
    0.4 * v * v + 0.1 * Math.sin(3 * a),
  ]);
  const s10 = makeHills(10);
  for (const [name, s] of [
    ["hills", s10],
    ["ring", hole],
  ] as const) {
    const adjacency = buildAdjacency(s);
    const solver = createGeodesicSolver(s, adjacency);
    const loops = findBoundaryLoops(s, adjacency);
    const number = fc.noBias(fc.integer({ min: 0, max: 999_999 })).map((n) => n / 1e6);
    test(`${name}: cut and whole again, or refused as a crossing`, () => {
      let held = 0;
      let refused = 0;
      fc.assert(
        fc.property(fc.array(fc.tuple(number, number, number, number), { minLength: 1, maxLength: 3 }), (draws) => {
          const paths: SurfacePoint[][] = [];
          for (const d of draws) {
            const p = drawBoundaryPlace(loops, d[0], d[1]);
            const q = drawBoundaryPlace(loops, d[2], d[3]);
            const [u, w] = [pointAt(s, p), pointAt(s, q)];
            if (Math.hypot(u[0] - w[0], u[1] - w[1], u[2] - w[2]) < 0.05) continue;
            paths.push(traceGeodesic(s, adjacency, p, q, { solver }).points);
          }
          const code = codeOf(() => cutSurface(s, paths));
          if (code === "seam-crossing" && paths.length > 1) {
            refused++;
            return;
          }
          checkCut(s, paths);
          held++;
        }),
        { seed: 77, numRuns: 200 },
      );
      expect(held).toBeGreaterThan(100);
      expect(refused).toBeGreaterThan(5);
    });
  }
});

describe("refusals", () => {
  const s = makeHills(5);
  test("places in a row without a common triangle", () => {
    expect(codeOf(() => cutSurface(s, [[vertexPoint(0), vertexPoint(20)]]))).toBe("cut-path");
  });
  test("a path of nothing", () => {
    expect(codeOf(() => cutSurface(s, [[vertexPoint(0), { a: 0, b: 1, t: 0.001 }]]))).toBe("seam-point");
    expect(codeOf(() => cutSurface(s, [[]]))).toBe("seam-point");
  });
  test("a place off the mesh", () => {
    expect(codeOf(() => cutSurface(s, [[vertexPoint(0), { a: 0, b: 30, t: 0.5 }]]))).toBe("surface-point");
  });
});

test("reach: a crossing is moved to a corner no further than that, however long the edge (bug: jogs of 0.5 mm in seams)", () => {
  // Two triangles on a square of 1 m; the path crosses the diagonal 3 mm from its end.
  const square: Surface = {
    xyz: Float64Array.from([0, 0, 0, 1, 0, 0, 1, 1, 0, 0, 1, 0]),
    tri: Uint32Array.from([0, 1, 2, 0, 2, 3]),
  };
  const path: SurfacePoint[] = [
    { a: 0, b: 1, t: 0.3 },
    { a: 0, b: 2, t: 0.3 },
    { a: 0, b: 3, t: 0.3 },
  ];
  const inserted = (t: number, reach?: number) => {
    const places = path.map((p, i) => (i === 0 ? { ...p, t } : p));
    const cut = cutSurface(
      square,
      places.length ? [places] : [],
      reach === undefined ? { snap: 0.004 } : { snap: 0.004, reach },
    );
    return cut.pathVertices[0].map((v) => [...vertexAt(cut.surface, v)][0]);
  };
  expect(inserted(0.003)[0]).toBe(0);
  expect(inserted(0.003, 1.5e-4)[0]).toBeCloseTo(0.003, 12);
  expect(inserted(0.0001, 1.5e-4)[0]).toBe(0);
});
