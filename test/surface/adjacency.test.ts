import { expect, test } from "vitest";
import { buildAdjacency, findBoundaryLoops, nextHalfedge, previousHalfedge } from "../../src/core/surface/adjacency.ts";
import { makeHeights, makeRing } from "./madeSurfaces.ts";

test("half-edges: next and previous go round the triangle, twins run against each other", () => {
  const s = makeHeights(5, 5, () => 0);
  const { twin, fan, fanStart } = buildAdjacency(s);
  for (let h = 0; h < s.tri.length; h++) {
    expect(previousHalfedge(nextHalfedge(h))).toBe(h);
    if (twin[h] < 0) continue;
    expect(twin[twin[h]]).toBe(h);
    expect(s.tri[twin[h]]).toBe(s.tri[nextHalfedge(h)]);
  }
  for (let v = 0; v < 36; v++) for (let i = fanStart[v]; i < fanStart[v + 1]; i++) expect(s.tri[fan[i]]).toBe(v);
});

test("boundary loops: the surface to the left, one loop for each rim", () => {
  const square = makeHeights(3, 3, () => 0);
  expect(findBoundaryLoops(square, buildAdjacency(square))).toEqual([[0, 1, 2, 3, 7, 11, 15, 14, 13, 12, 8, 4]]);
  const ring = makeRing(6, 2, (a, v) => [Math.cos(a), Math.sin(a), v]);
  expect(findBoundaryLoops(ring, buildAdjacency(ring)).map((l) => l.length)).toEqual([6, 6]);
});

test("an edge of three triangles and a pinched vertex are refused by name", () => {
  const three = { xyz: new Float64Array(15), tri: Uint32Array.of(0, 1, 2, 1, 0, 3, 0, 1, 4) };
  expect(() => buildAdjacency(three)).toThrow(/side 0–1 occurs twice/);
  const pinched = { xyz: new Float64Array(15), tri: Uint32Array.of(0, 1, 2, 0, 3, 4) };
  expect(() => findBoundaryLoops(pinched, buildAdjacency(pinched))).toThrow(/touch at vertex 0/);
});
