import { describe, expect, test } from "vitest";
import { buildAdjacency, findBoundaryLoops } from "../../src/core/surface/adjacency.ts";
import { cutSurface } from "../../src/core/surface/cut.ts";
import { traceGeodesic } from "../../src/core/surface/geodesic.ts";
import { measureArea } from "../../src/core/surface/measures.ts";
import {
  type CutEdge,
  extractPiece,
  partSurface,
  traceOutlineSides,
  tracePieceOutline,
} from "../../src/core/surface/pieces.ts";
import { vertexPoint } from "../../src/core/surface/surfacePoint.ts";
import { makeHeights, makeRing } from "./madeSurfaces.ts";

const edgesOf = (path: number[]): CutEdge[] => path.slice(1).map((v, i) => [path[i], v]);
const members = (piece: Int32Array, k: number) => [...piece.keys()].filter((t) => piece[t] === k);

/** Area enclosed by a loop of points in the plane z = 0. */
const shoelace = (xyz: Float64Array, loop: number[]) =>
  loop.reduce((sum, v, i) => {
    const w = loop[(i + 1) % loop.length];
    return sum + (xyz[3 * v] * xyz[3 * w + 1] - xyz[3 * v + 1] * xyz[3 * w]) / 2;
  }, 0);

describe("square cut by two lines", () => {
  const s = makeHeights(6, 6, () => 0, 0.5);
  const adjacency = buildAdjacency(s);
  const paths = [
    traceGeodesic(s, adjacency, { a: 1, b: 2, t: 0.5 }, { a: 43, b: 44, t: 0.5 }).points,
    traceGeodesic(s, adjacency, { a: 3, b: 4, t: 0.25 }, { a: 45, b: 46, t: 0.25 }).points,
  ];
  const cut = cutSurface(s, paths);
  const cuts = cut.pathVertices.flatMap(edgesOf);
  const piece = partSurface(cut.surface, cuts);

  test("three pieces, with the areas of the strips; cut direction does not matter", () => {
    expect(Math.max(...piece)).toBe(2);
    expect(
      partSurface(
        cut.surface,
        cuts.map(([a, b]) => [b, a]),
      ),
    ).toEqual(piece);
    const areas = [0, 1, 2].map((k) => measureArea({ xyz: cut.surface.xyz, tri: extractTri(members(piece, k)) }));
    expect(areas.map((a) => a.toFixed(9)).sort()).toEqual(["10.500000000", "16.500000000", "9.000000000"]);
  });
  function extractTri(triangles: number[]) {
    return Uint32Array.from(triangles.flatMap((t) => [...cut.surface.tri.subarray(3 * t, 3 * t + 3)]));
  }
  test("outline of each piece: one loop, counter-clockwise, round the piece's area", () => {
    for (let k = 0; k < 3; k++) {
      const loops = tracePieceOutline(cut.surface, members(piece, k));
      expect(loops).toHaveLength(1);
      const area = measureArea({ xyz: cut.surface.xyz, tri: extractTri(members(piece, k)) });
      expect(shoelace(cut.surface.xyz, loops[0])).toBeCloseTo(area, 11);
    }
  });
  test("a cut that is no mesh edge is refused", () => {
    expect(() => partSurface(cut.surface, [[0, 40]])).toThrow(/vertices 0 and 40/);
  });
});

test("a piece that touches itself at a vertex: its outline stays in the piece, opened it is a disc", () => {
  const s = makeHeights(3, 3, () => 0);
  const adjacency = buildAdjacency(s);
  const cell = (t: number) => {
    const c = [0, 1].map((k) =>
      Math.floor((s.xyz[3 * s.tri[3 * t] + k] + s.xyz[3 * s.tri[3 * t + 1] + k] + s.xyz[3 * s.tri[3 * t + 2] + k]) / 3),
    );
    return c[1] * 3 + c[0];
  };
  const all = [...Array(18).keys()];
  // Eight cells round the middle one are a ring; without cell 6 the cells 3 and 7 touch in vertex 9 (x 1, y 2) alone.
  expect(
    tracePieceOutline(
      s,
      all.filter((t) => cell(t) !== 4),
    ),
  ).toHaveLength(2);
  const c = all.filter((t) => cell(t) !== 4 && cell(t) !== 6);
  const loops = tracePieceOutline(s, c);
  expect(loops).toHaveLength(1);
  expect(loops[0].filter((v) => v === 9)).toHaveLength(2);
  expect(shoelace(s.xyz, loops[0])).toBeCloseTo(7, 12);
  const piece = extractPiece(s, c, [], adjacency);
  expect([...piece.surfaceVertex].filter((v) => v === 9)).toHaveLength(2);
  const mesh = { xyz: piece.xyz, tri: piece.tri };
  expect(findBoundaryLoops(mesh, buildAdjacency(mesh))).toHaveLength(1);
  expect(new Set(piece.outline[0]).size).toBe(piece.outline[0].length);
});

test("a ring slit along one seam: one piece, its outline runs along both sides of the slit", () => {
  const s = makeRing(10, 3, (a, v) => [(2 + v) * Math.cos(a), (2 + v) * Math.sin(a), 0]);
  const slit = traceGeodesic(s, buildAdjacency(s), vertexPoint(0), vertexPoint(30)).points;
  const cut = cutSurface(s, [slit]);
  const edges = edgesOf(cut.pathVertices[0]);
  const piece = partSurface(cut.surface, edges);
  expect(Math.max(...piece)).toBe(0);
  const all = members(piece, 0);
  expect(tracePieceOutline(cut.surface, all)).toHaveLength(2);
  const loops = tracePieceOutline(cut.surface, all, edges);
  expect(loops).toHaveLength(1);
  for (const v of cut.pathVertices[0]) expect(loops[0].filter((w) => w === v)).toHaveLength(2);
  const opened = extractPiece(cut.surface, all, edges);
  expect(opened.xyz.length / 3).toBe(40 + cut.vertexPlace.length + cut.pathVertices[0].length);
  const mesh = { xyz: opened.xyz, tri: opened.tri };
  const own = findBoundaryLoops(mesh, buildAdjacency(mesh));
  expect(own).toHaveLength(1);
  expect(own[0]).toHaveLength(opened.outline[0].length);
  expect(measureArea(mesh)).toBeCloseTo(measureArea(s), 11);
  const sides = traceOutlineSides(cut.surface, all, edges);
  expect(sides[0].map((h) => cut.surface.tri[h])).toEqual(loops[0]);
});
