import { expect, test } from "vitest";
import { buildAdjacency } from "../../src/core/surface/adjacency.ts";
import { findShorterSleeve } from "../../src/core/surface/exactSearch.ts";
import { createGeodesicSolver, traceGeodesic } from "../../src/core/surface/geodesic.ts";
import { vertexPoint } from "../../src/core/surface/surfacePoint.ts";
import { makeHeights, makeHills } from "./madeSurfaces.ts";

test("a steep hill in the way: the path goes round it, though the search starts with one over it", () => {
  // Cap of 4 m height amid 10 × 10 m; ends slightly off the axis of symmetry.
  const s = makeHeights(30, 10, (x, y) => 4 * Math.exp(-((x - 5) ** 2 + (y - 5) ** 2) / 1.5), 0.3);
  const adjacency = buildAdjacency(s);
  const [from, to] = [vertexPoint(14 * 31), vertexPoint(16 * 31 + 30)];
  const path = traceGeodesic(s, adjacency, from, to);
  const solver = createGeodesicSolver(s, adjacency);
  const bends = (v: number) => solver.onBoundary[v] === 1;
  // Nothing shorter is left, and from a longer length in hand the search comes to the same.
  expect(findShorterSleeve(solver, [from, to], path.length, bends)).toBeNull();
  const sleeve = findShorterSleeve(solver, [from, to], 1.5 * path.length, bends);
  expect(sleeve?.sides.length).toBeGreaterThan(20);
  expect(path.length).toBeGreaterThan(10.05);
  expect(path.length).toBeLessThan(11.5);
});

// makeHills(40), vertices 0-based; CGAL 5.5.1 Surface_mesh_shortest_path, run on this surface for this test.
const exactHills: [number, number, number][] = [
  [0, 1680, 15.7336323693],
  [20, 1660, 10.9073606911],
  [10, 1650, 10.3458758493],
  [40, 1640, 15.0459318403],
  [410, 1271, 5.25],
  [5, 1675, 13.8730635271],
  [123, 1500, 10.8727386909],
  [205, 1640, 8.75],
];

test("hills: exact lengths by another program", () => {
  const s = makeHills(40);
  const adjacency = buildAdjacency(s);
  const solver = createGeodesicSolver(s, adjacency);
  for (const [from, to, length] of exactHills) {
    const path = traceGeodesic(s, adjacency, vertexPoint(from), vertexPoint(to), { solver });
    expect(Math.abs(path.length / length - 1)).toBeLessThan(1e-10);
    expect(
      traceGeodesic(s, adjacency, vertexPoint(from), vertexPoint(to), { solver, homotopy: "start" }).length,
    ).toBeGreaterThanOrEqual(path.length * (1 - 1e-12));
  }
});
