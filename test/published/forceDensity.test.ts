// Force density vectors. Methods: force density method, Comput. Methods Appl. Mech. Eng. 3 (1974); natural force density
// method, ibid. 197 (2008). Numbers: recomputed for the project's collection of check values (sections 5.2, 5.3, 5.1 and
// list 10: T5, T6, T9), exact to the digits shown unless a mesh is named.
import { describe, expect, test } from "vitest";
import {
  buildForceDensitySystem,
  measureDensities,
  measureIsotropicDensities,
  stepForceDensity,
} from "../../src/core/form/settle/naturalForceDensity.ts";
import { measureArea } from "../../src/core/surface/measures.ts";
import type { Surface } from "../../src/core/surface/surface.ts";

/** Links only: a surface without triangles. */
function solveLinks(points: number[][], fixed: number[], links: number[][], q: number[], load?: number[]) {
  const surface: Surface = { xyz: Float64Array.from(points.flat()), tri: new Uint32Array(0) };
  const system = buildForceDensitySystem(surface, Uint8Array.from(fixed), Uint32Array.from(links.flat()));
  const densities = { side: new Float64Array(0), line: Float64Array.from(q) };
  return stepForceDensity(system, surface, densities, load === undefined ? undefined : Float64Array.from(load));
}

describe("force density method (check values 5.2)", () => {
  const points = [
    [0, 0, 0],
    [4, 0, 1],
    [4, 3, 0],
    [0, 3, 1],
    [9, 9, 9],
  ];
  const links = [0, 1, 2, 3].map((v) => [v, 4]);

  test("T6: one free node, densities 1, 2, 3, 4; lengths and forces", () => {
    const xyz = solveLinks(points, [1, 1, 1, 1, 0], links, [1, 2, 3, 4]);
    const node = xyz.subarray(12);
    [2, 2.1, 0.6].forEach((want, k) => {
      expect(Math.abs(node[k] - want)).toBeLessThan(1e-12);
    });
    const lengths = [2.961419, 2.927456, 2.273763, 2.22935];
    const forces = [2.961419, 5.854912, 6.82129, 8.917399];
    lengths.forEach((want, v) => {
      const length = Math.hypot(...[0, 1, 2].map((k) => points[v][k] - node[k]));
      expect(Math.abs(length - want)).toBeLessThan(6e-7);
      expect(Math.abs(length * (v + 1) - forces[v])).toBeLessThan(6e-7);
    });
  });

  test("the same with a load of 2 downwards", () => {
    const load = [...new Array<number>(12).fill(0), 0, 0, -2];
    const node = solveLinks(points, [1, 1, 1, 1, 0], links, [1, 2, 3, 4], load).subarray(12);
    [2, 2.1, 0.4].forEach((want, k) => {
      expect(Math.abs(node[k] - want)).toBeLessThan(1e-12);
    });
  });

  test("chain of five links, density 10, span 10, loads of 1 downwards", () => {
    const chain = [0, 1, 2, 3, 4, 5].map((k) => [k === 5 ? 10 : 0, 0, 0]);
    const load = chain.flatMap((_, k) => [0, 0, k > 0 && k < 5 ? -1 : 0]);
    const xyz = solveLinks(
      chain,
      [1, 0, 0, 0, 0, 1],
      [0, 1, 2, 3, 4].map((k) => [k, k + 1]),
      new Array(5).fill(10),
      load,
    );
    [2, 4, 6, 8].forEach((x, k) => {
      expect(Math.abs(xyz[3 * (k + 1)] - x)).toBeLessThan(1e-12);
      expect(Math.abs(xyz[3 * (k + 1) + 2] - [-0.2, -0.3, -0.3, -0.2][k])).toBeLessThan(1e-12);
      expect(10 * (xyz[3 * (k + 1)] - xyz[3 * k])).toBeCloseTo(20, 11);
    });
  });

  test("equal densities on a square grid over a skew quad give the bilinear surface", () => {
    const m = 9;
    const grid = Array.from({ length: m * m }, (_, v) => [v % m, Math.floor(v / m), 0]);
    const rim = grid.map(([i, j]) => (i === 0 || j === 0 || i === m - 1 || j === m - 1 ? 1 : 0));
    const bilinear = (i: number, j: number) => (i * j) / (m - 1) ** 2;
    grid.forEach((p, v) => {
      p[2] = rim[v] ? bilinear(p[0], p[1]) : 0;
    });
    const nets = grid.flatMap(([i, j], v) => [...(i < m - 1 ? [[v, v + 1]] : []), ...(j < m - 1 ? [[v, v + m]] : [])]);
    const xyz = solveLinks(grid, rim, nets, new Array(nets.length).fill(1));
    grid.forEach(([i, j], v) => {
      expect(Math.abs(xyz[3 * v + 2] - bilinear(i, j))).toBeLessThan(1e-13);
    });
  });
});

describe("natural force densities of one triangle (check values 5.3)", () => {
  const densities = (corners: number[], stress: number[], warpDegrees: number) => {
    const surface: Surface = { xyz: Float64Array.from(corners), tri: Uint32Array.of(0, 1, 2) };
    const a = (warpDegrees * Math.PI) / 180;
    return measureDensities(surface, Float64Array.from(stress), Float64Array.of(Math.cos(a), Math.sin(a), 0));
  };
  const right = [0, 0, 0, 1, 0, 0, 0, 1, 0];
  const equal = [0, 0, 0, 1, 0, 0, 0.5, Math.sqrt(0.75), 0];
  // side k lies opposite corner k: for the right triangle hypotenuse, y side, x side
  test.each([
    ["T5: right unit triangle, S = (4, 2, 0)", right, [4, 2, 0], 0, [0, 1, 2], 1e-12],
    ["equilateral, S = (3, 3, 0)", equal, [3, 3, 0], 0, [0.866025, 0.866025, 0.866025], 5e-7],
    ["equilateral, S = (4, 2, 0), warp along the x side", equal, [4, 2, 0], 0, [0.57735, 0.57735, 1.443376], 5e-7],
    ["equilateral, S = (4, 2, 0), warp at 30°", equal, [4, 2, 0], 30, [0.288675, 1.154701, 1.154701], 5e-7],
  ])("%s", (_, corners, stress, warp, want, limit) => {
    const q = densities(corners, stress, warp);
    q.forEach((value, k) => {
      expect(Math.abs(value - want[k])).toBeLessThan(limit);
    });
  });

  test("a density may be negative in pure tension: obtuse triangle", () => {
    const surface: Surface = { xyz: Float64Array.of(0, 0, 0, 4, 0, 0, 2, 0.5, 0), tri: Uint32Array.of(0, 1, 2) };
    expect(measureIsotropicDensities(surface, 1)[2]).toBeLessThan(0);
  });
});

test("T9: minimal surface over the skew quad of the unit cube, 32 × 32, area 1.27969 (5.1: 1.279691, limit 1.279262)", () => {
  const m = 33;
  const xyz = new Float64Array(3 * m * m);
  const fixed = new Uint8Array(m * m);
  const tri: number[] = [];
  for (let v = 0; v < m * m; v++) {
    const [i, j] = [v % m, Math.floor(v / m)];
    const [x, y] = [i / (m - 1), j / (m - 1)];
    // corners 000, 101 → 110, 011 of the cube: bilinear start over four face diagonals
    xyz.set([x, y, x + y - 2 * x * y], 3 * v);
    fixed[v] = i === 0 || j === 0 || i === m - 1 || j === m - 1 ? 1 : 0;
    if (i < m - 1 && j < m - 1) tri.push(v, v + 1, v + m + 1, v, v + m + 1, v + m);
  }
  let surface: Surface = { xyz, tri: Uint32Array.from(tri) };
  const system = buildForceDensitySystem(surface, fixed, new Uint32Array(0));
  for (let pass = 0; pass < 12; pass++) {
    const side = measureIsotropicDensities(surface, 1);
    surface = { xyz: stepForceDensity(system, surface, { side, line: new Float64Array(0) }), tri: surface.tri };
  }
  expect(Math.abs(measureArea(surface) - 1.27969)).toBeLessThan(1e-4);
});
