import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { buildAdjacency, findBoundaryLoops } from "../../src/core/surface/adjacency.ts";
import { measureArea } from "../../src/core/surface/measures.ts";
import type { Surface, Vec3 } from "../../src/core/surface/surface.ts";
import { measureLeastAreaShare, measureStrain, unfoldSurface } from "../../src/core/surface/unfold.ts";
import { buildUnfolding } from "../../src/core/surface/unfolding.ts";
import { embedConvex, relaxWithBarrier } from "../../src/core/surface/unfoldSafe.ts";
import { makeGrid, makeRing, moveSurface, readSharedMesh, renumberSurface, sharedMeshes } from "./madeSurfaces.ts";

const flatten = (s: Surface) => {
  const xy = unfoldSurface(s.xyz, s.tri);
  const unfolding = buildUnfolding(s);
  return {
    xy,
    strain: measureStrain(s.tri, unfolding, xy),
    share: measureLeastAreaShare(s.tri, unfolding, xy),
    flat: {
      xyz: Float64Array.from({ length: s.xyz.length }, (_, i) =>
        i % 3 === 2 ? 0 : xy[2 * Math.floor(i / 3) + (i % 3)],
      ),
      tri: s.tri,
    },
  };
};
const distance = (xy: Float64Array, a: number, b: number) =>
  Math.hypot(xy[2 * a] - xy[2 * b], xy[2 * a + 1] - xy[2 * b + 1]);

describe("developable strips are laid flat exactly", () => {
  test("cylinder: a rectangle of the summed chords", () => {
    const s = makeGrid(60, 8, (u, v) => [4 * Math.cos(2 * u), 1.5 * v, 4 * Math.sin(2 * u)]);
    const { xy, strain, share, flat } = flatten(s);
    const length = 60 * 8 * Math.sin(1 / 60);
    expect(strain).toBeLessThan(1e-9);
    expect(share).toBeGreaterThan(1 - 1e-9);
    expect(distance(xy, 0, 60)).toBeCloseTo(length, 10);
    expect(distance(xy, 0, 61 * 9 - 1)).toBeCloseTo(Math.hypot(length, 1.5), 10);
    expect(measureArea(flat)).toBeCloseTo(length * 1.5, 10);
  });
  test("cone: an annular sector", () => {
    // Slant a from 2 to 9 m; n chords of equal angle, each seen under 2·asin(chord / 2a).
    const n = 40;
    const [sine, turn] = [0.6, 1.2];
    const s = makeGrid(n, 14, (u, v): Vec3 => {
      const a = 2 + 7 * v;
      return [a * sine * Math.cos(turn * u), a * sine * Math.sin(turn * u), -a * Math.sqrt(1 - sine * sine)];
    });
    const { xy, strain, share } = flatten(s);
    expect(strain).toBeLessThan(1e-9);
    expect(share).toBeGreaterThan(0.999999);
    const angle = n * 2 * Math.asin(sine * Math.sin(turn / (2 * n)));
    expect(distance(xy, 0, n)).toBeCloseTo(2 * 2 * Math.sin(angle / 2), 9);
    expect(distance(xy, 14 * (n + 1), 15 * (n + 1) - 1)).toBeCloseTo(2 * 9 * Math.sin(angle / 2), 9);
  });
  // Flat shapes of the strips made by another program: ../shared/meshes/NAME.facts.json; their OBJ has 9 decimals.
  for (const [name, corners, length] of [
    ["cylinder_strip.obj", [0, 540], 9.598901379410043],
    ["cone_strip.obj", [0, 8], 2 * 2 * Math.sin(0.2692321937687218 / 2)],
  ] as const)
    test.skipIf(!sharedMeshes)(`${name} (skipped without ../shared)`, () => {
      const { xy, strain } = flatten(readSharedMesh(name));
      expect(strain).toBeLessThan(2e-9);
      expect(Math.abs(distance(xy, corners[0], corners[1]) / length - 1)).toBeLessThan(1e-8);
    });
});

describe("curved strips", () => {
  const saddle = makeGrid(120, 10, (u, v) => {
    const [x, y] = [16 * u - 8, 2 * v - 1];
    return [x, y, 0.02 * x * x - 0.15 * y * y];
  });
  test("saddle strip: strain about half the Gauss curvature times the square of the half width", () => {
    // Edge length over centre length 1 + |K| h²/2 with K = 4·0.02·0.15 at most, h = 1 (geodesic strip, second order): 0.6 %.
    const { strain, share, flat } = flatten(saddle);
    expect(strain).toBeLessThan(0.009);
    expect(share).toBeGreaterThan(0.98);
    expect(measureArea(flat)).toBeCloseTo(measureArea(saddle), 1);
  });
  test("a moved and a renumbered copy lie flat alike", () => {
    const { xy } = flatten(saddle);
    const moved = flatten(moveSurface(saddle)).xy;
    const { surface, number } = renumberSurface(saddle);
    const other = flatten(surface);
    expect(other.strain).toBeLessThan(0.009);
    for (const [a, b] of [
      [0, 120],
      [0, 1330],
      [605, 1210],
    ]) {
      expect(distance(moved, a, b)).toBeCloseTo(distance(xy, a, b), 6);
      // The first triangle laid, and with it where the rounds end, depends on the numbers.
      expect(distance(other.xy, number[a], number[b])).toBeCloseTo(distance(xy, a, b), 2);
    }
  });
  test("any hills: never a triangle turned over", () => {
    fc.assert(
      fc.property(
        fc.tuple(
          fc.integer({ min: 1, max: 24 }),
          fc.integer({ min: 1, max: 30 }),
          fc.integer({ min: 1, max: 30 }),
          fc.integer(),
        ),
        ([h, p, q, seed]) => {
          const s = makeGrid(
            16,
            9,
            (u, v) => [8 * u, 4 * v, (h / 8) * Math.sin((p / 3) * u) * Math.cos((q / 3) * v)],
            seed,
          );
          const { share } = flatten(s);
          expect(share).toBeGreaterThan(0);
        },
      ),
      { seed: 8, numRuns: 60 },
    );
  });
  test("a spike that gentle rounds fold is laid flat without folds", () => {
    const s = makeGrid(40, 40, (u, v) => [u, v, 2 * Math.exp(-40 * ((u - 0.5) ** 2 + (v - 0.5) ** 2))]);
    expect(flatten(s).share).toBeGreaterThan(0);
  });
  test("twice the same bytes", () => {
    expect(unfoldSurface(saddle.xyz, saddle.tri)).toEqual(unfoldSurface(saddle.xyz, saddle.tri));
  });
});

describe("the way out", () => {
  const s = makeGrid(30, 6, (u, v) => [6 * u, 1.2 * v, 0.4 * Math.sin(5 * u) * v]);
  const unfolding = buildUnfolding(s);
  const adjacency = buildAdjacency(s);
  const start = embedConvex(s, adjacency, findBoundaryLoops(s, adjacency)[0]);
  test("embedding in a convex outline: every triangle the right way round", () => {
    expect(measureLeastAreaShare(s.tri, unfolding, start)).toBeGreaterThan(0);
  });
  test("barrier descent: no fold, lengths come near those of the gentle layout", () => {
    const xy = relaxWithBarrier(s.tri, unfolding, start);
    expect(measureLeastAreaShare(s.tri, unfolding, xy)).toBeGreaterThan(0.8);
    const gentle = unfoldSurface(s.xyz, s.tri);
    expect(Math.abs(distance(xy, 0, 30) / distance(gentle, 0, 30) - 1)).toBeLessThan(0.02);
  });
});

describe("refusals", () => {
  const codeOf = (s: Surface) => {
    try {
      unfoldSurface(s.xyz, s.tri);
    } catch (e) {
      return `${(e as { code: string }).code}: ${(e as Error).message}`;
    }
    return "none";
  };
  test("a ring without a slit, two pieces, a vertex without triangle", () => {
    expect(codeOf(makeRing(8, 2, (a, v) => [Math.cos(a), Math.sin(a), v]))).toMatch(/^panel-disc: .*2 outlines/);
    const s = makeGrid(2, 2, (u, v) => [u, v, 0]);
    const twice = {
      xyz: Float64Array.from([...s.xyz, ...s.xyz]),
      tri: Uint32Array.from([...s.tri, ...s.tri.map((v) => v + 9)]),
    };
    expect(codeOf(twice)).toMatch(/^panel-disc/);
    expect(codeOf({ xyz: Float64Array.from([...s.xyz, 5, 5, 5]), tri: s.tri })).toMatch(/^panel-disc: .*vertex 9/);
  });
});
