import { expect, test } from "vitest";
import { buildAdjacency } from "../../src/core/surface/adjacency.ts";
import { buildHoleCuts } from "../../src/core/surface/holeCuts.ts";
import {
  checkPoint,
  findHalfedge,
  findTrianglesAt,
  isSamePoint,
  isVertexPoint,
  namePoint,
  normalizePoint,
  vertexPoint,
} from "../../src/core/surface/surfacePoint.ts";
import { buildUnfolding, measureCornerAngle } from "../../src/core/surface/unfolding.ts";
import { makeHeights, makeRing } from "./madeSurfaces.ts";

test("one way of writing a place", () => {
  expect(normalizePoint({ a: 7, b: 3, t: 0.25 })).toEqual({ a: 3, b: 7, t: 0.75 });
  expect(normalizePoint({ a: 7, b: 3, t: 0 })).toEqual(vertexPoint(7));
  expect(normalizePoint({ a: 7, b: 3, t: 1 })).toEqual(vertexPoint(3));
  expect(normalizePoint({ a: 7, b: 3, t: 0.004 }, 0.01)).toEqual(vertexPoint(7));
  expect(isVertexPoint(vertexPoint(4))).toBe(true);
  expect(isSamePoint({ a: 7, b: 3, t: 0.25 }, { a: 3, b: 7, t: 0.75 })).toBe(true);
  expect(isSamePoint({ a: 7, b: 3, t: 0.25 }, { a: 3, b: 7, t: 0.7501 })).toBe(false);
  expect(namePoint({ a: 7, b: 3, t: 0.25 })).toBe("edge 3–7 at 0.750");
});

test("triangles that hold a place: one or two at a side, all round a vertex", () => {
  const s = makeHeights(4, 4, () => 0);
  const adjacency = buildAdjacency(s);
  expect(findTrianglesAt(s, adjacency, { a: 0, b: 1, t: 0.5 }).triangles).toHaveLength(1);
  expect(findTrianglesAt(s, adjacency, { a: 6, b: 7, t: 0.5 }).triangles).toHaveLength(2);
  for (let v = 0; v < 25; v++) {
    const all = [...Array(32).keys()].filter((t) => [0, 1, 2].some((k) => s.tri[3 * t + k] === v));
    expect(findTrianglesAt(s, adjacency, vertexPoint(v)).triangles.sort((a, b) => a - b)).toEqual(all);
  }
  expect(findHalfedge(s, adjacency, 0, 24)).toBe(-1);
  expect(() => checkPoint(s, adjacency, { a: 0, b: 24, t: 0.5 })).toThrow(/not joined/);
  expect(() => checkPoint(s, adjacency, { a: 0, b: 25, t: 0.5 })).toThrow(/0 to 24/);
});

test("hole cuts: a closed walk round the hole crosses its cut once, one beside it an even number of times", () => {
  const s = makeRing(12, 4, (a, v) => [(1 + v) * Math.cos(a), (1 + v) * Math.sin(a), 0]);
  const adjacency = buildAdjacency(s);
  const { crossing, holePiece } = buildHoleCuts(s, adjacency, buildUnfolding(s));
  expect(holePiece).toEqual([0]);
  // Round along the middle: side from (i, 2) to (i, 3) and the diagonal of each cell, 24 sides.
  let crossed = 0;
  for (let i = 0; i < 12; i++) {
    const a = 24 + i;
    for (const b of [a + 12, 36 + ((i + 1) % 12)]) crossed += crossing?.[findHalfedge(s, adjacency, a, b)] ?? 0;
  }
  expect(crossed % 2).toBe(1);
  // Round any inner vertex.
  for (let v = 12; v < 48; v++) {
    let around = 0;
    for (let i = adjacency.fanStart[v]; i < adjacency.fanStart[v + 1]; i++) around += crossing?.[adjacency.fan[i]] ?? 0;
    expect(around % 2).toBe(0);
  }
  const flat = makeHeights(3, 3, () => 0);
  expect(buildHoleCuts(flat, buildAdjacency(flat), buildUnfolding(flat)).crossing).toBeNull();
});

test("unfolding: third corner in the frame of each side", () => {
  const s = { xyz: Float64Array.of(1, 1, 1, 4, 1, 1, 1, 5, 1), tri: Uint32Array.of(0, 1, 2) };
  const u = buildUnfolding(s);
  expect([...u.length]).toEqual([3, 5, 4]);
  expect(u.apexX[0]).toBeCloseTo(0, 14);
  expect(u.apexY[0]).toBeCloseTo(4, 14);
  expect(u.apexX[1]).toBeCloseTo(9 / 5, 14);
  expect(u.apexY[1]).toBeCloseTo(12 / 5, 14);
  expect(measureCornerAngle(u, 0)).toBeCloseTo(Math.PI / 2, 14);
});
