import fc from "fast-check";
import { Matrix, solve } from "ml-matrix";
import { describe, expect, test } from "vitest";
import {
  buildForceDensitySystem,
  measureDensities,
  measureIsotropicDensities,
  stepForceDensity,
} from "../../../src/core/form/settle/naturalForceDensity.ts";
import { buildRandom } from "../../../src/core/numeric/random.ts";
import type { Surface } from "../../../src/core/surface/surface.ts";

const fraction = fc.double({ min: 0, max: 1, noNaN: true, noDefaultInfinity: true });
const seeds = fc.integer({ min: 0, max: 1e9 });

/** A triangle anywhere in space, never near flat. */
function drawTriangle(seed: number): Surface {
  const random = buildRandom(seed);
  for (;;) {
    const xyz = Float64Array.from({ length: 9 }, () => 4 * random() - 2);
    const tri = Uint32Array.of(0, 1, 2);
    const side = (a: number, b: number) => [0, 1, 2].map((k) => xyz[3 * b + k] - xyz[3 * a + k]);
    const n = cross(side(0, 1), side(0, 2));
    if (Math.hypot(...n) > 0.5) return { xyz, tri };
  }
}

function cross(a: number[], b: number[]): number[] {
  return [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]];
}

const dot = (a: number[], b: number[]) => a.reduce((s, v, k) => s + v * b[k], 0);

test("closed form against the published T matrix: q = A T^-T S / l² (fast-check seed 31)", () => {
  // CMAME 197 (2008): T has rows [cos² b, sin² b, sin b cos b], b the angle of a side to the warp
  fc.assert(
    fc.property(seeds, fraction, fraction, fraction, (seed, sw, sf, sh) => {
      const surface = drawTriangle(seed);
      const { xyz } = surface;
      const point = (v: number) => [xyz[3 * v], xyz[3 * v + 1], xyz[3 * v + 2]];
      const edge = (a: number, b: number) => point(b).map((v, k) => v - point(a)[k]);
      const n = cross(edge(0, 1), edge(0, 2));
      const area = Math.hypot(...n) / 2;
      const unit = n.map((v) => v / (2 * area));
      const warp = edge(0, 1).map((v, k) => v + 0.7 * edge(0, 2)[k] + 0.3 * unit[k]);
      const flat = warp.map((v, k) => v - dot(warp, unit) * unit[k]);
      const w = flat.map((v) => v / Math.hypot(...flat));
      const f = cross(unit, w);
      const stress = [1 + 4 * sw, 0.5 + 3 * sf, sh - 0.5];
      const sides = [edge(1, 2), edge(2, 0), edge(0, 1)];
      const T = new Matrix(
        sides.map((e) => {
          const [c, s] = [dot(e, w) / Math.hypot(...e), dot(e, f) / Math.hypot(...e)];
          return [c * c, s * s, s * c];
        }),
      );
      const natural = solve(T.transpose(), Matrix.columnVector(stress)).to1DArray();
      const q = measureDensities(surface, Float64Array.from(stress), Float64Array.from(warp));
      const size = Math.max(...natural.map((v, k) => Math.abs((area * v) / dot(sides[k], sides[k]))));
      sides.forEach((e, k) => {
        expect(Math.abs(q[k] - (area * natural[k]) / dot(e, e))).toBeLessThan(1e-10 * size);
      });
    }),
    { seed: 31, numRuns: 300 },
  );
});

test("equal stress both ways: the cloth's direction does not matter, densities follow the cotangents", () => {
  for (let seed = 0; seed < 50; seed++) {
    const surface = drawTriangle(seed);
    const plain = measureIsotropicDensities(surface, 2.5);
    const cloth = measureDensities(surface, Float64Array.of(2.5, 2.5, 0), Float64Array.of(0.3, 0.9, -0.4));
    const { xyz } = surface;
    for (let k = 0; k < 3; k++) {
      const to = (v: number) => [0, 1, 2].map((c) => xyz[3 * v + c] - xyz[3 * k + c]);
      const [a, b] = [to((k + 1) % 3), to((k + 2) % 3)];
      const cot = dot(a, b) / Math.hypot(...cross(a, b));
      expect(plain[k]).toBeCloseTo((2.5 * cot) / 2, 12);
      expect(cloth[k]).toBeCloseTo(plain[k], 11);
    }
  }
});

test("densities are those of the triangle itself: turned, moved and scaled copies", () => {
  for (let seed = 0; seed < 30; seed++) {
    const surface = drawTriangle(seed);
    const stress = Float64Array.of(4, 2, 0.5);
    const warp = Float64Array.of(1, 0.2, -0.3);
    const q = measureDensities(surface, stress, warp);
    // quarter turn about z, moved, seven times as large: force over length stays
    const turn = (a: Float64Array, s: number, d: number) => {
      const out = new Float64Array(a.length);
      for (let k = 0; k < a.length; k += 3) out.set([-s * a[k + 1] + d, s * a[k] - d, s * a[k + 2] + d], k);
      return out;
    };
    const moved = measureDensities({ xyz: turn(surface.xyz, 7, 100), tri: surface.tri }, stress, turn(warp, 2, 0));
    q.forEach((v, k) => {
      expect(moved[k]).toBeCloseTo(v, 10);
    });
  }
});

describe("one pass", () => {
  const m = 12;
  const xyz = new Float64Array(3 * m * m);
  const tri: number[] = [];
  const fixed = new Uint8Array(m * m);
  for (let v = 0; v < m * m; v++) {
    const [i, j] = [v % m, Math.floor(v / m)];
    xyz.set([i + 0.2 * Math.sin(3 * v), j, Math.sin(i) * Math.cos(2 * j)], 3 * v);
    if (j === 0 || j === m - 1) fixed[v] = 1;
    if (i < m - 1 && j < m - 1) tri.push(v, v + 1, v + m + 1, v, v + m + 1, v + m);
  }
  const surface: Surface = { xyz, tri: Uint32Array.from(tri) };
  // cables along the two open edges, one running against the numbering
  const lines = Uint32Array.from(
    Array.from({ length: m - 1 }, (_, j) => [j * m, (j + 1) * m, (j + 2) * m - 1, (j + 1) * m - 1]).flat(),
  );
  const nL = lines.length / 2;
  const densities = {
    side: measureIsotropicDensities(surface, 2),
    line: Float64Array.from({ length: nL }, (_, l) => 5 + l),
  };
  const load = xyz.map((_, k) => (k % 3 === 2 ? -0.05 : 0.01));

  test("forces of all links and the load add to zero at every free vertex; held vertices stay", () => {
    const system = buildForceDensitySystem(surface, fixed, lines);
    const before = xyz.slice();
    const out = stepForceDensity(system, surface, densities, load);
    expect(xyz).toEqual(before);
    const force = load.slice();
    const pull = (a: number, b: number, q: number) => {
      for (let k = 0; k < 3; k++) {
        force[3 * a + k] += q * (out[3 * b + k] - out[3 * a + k]);
        force[3 * b + k] -= q * (out[3 * b + k] - out[3 * a + k]);
      }
    };
    for (let t = 0; t < tri.length; t += 3)
      for (let k = 0; k < 3; k++) pull(tri[t + ((k + 1) % 3)], tri[t + ((k + 2) % 3)], densities.side[t + k]);
    for (let l = 0; l < nL; l++) pull(lines[2 * l], lines[2 * l + 1], densities.line[l]);
    for (let v = 0; v < m * m; v++)
      for (let k = 0; k < 3; k++) {
        if (fixed[v]) expect(out[3 * v + k]).toBe(xyz[3 * v + k]);
        else expect(Math.abs(force[3 * v + k])).toBeLessThan(1e-11);
      }
    // the kept factor is refilled: a second pass of the same gives the same bits
    expect(stepForceDensity(system, surface, densities, load)).toEqual(out);
  });

  test("a net that is held nowhere is refused with the vertex", () => {
    const system = buildForceDensitySystem(surface, new Uint8Array(m * m), lines);
    expect(() => stepForceDensity(system, surface, densities)).toThrow(/do not hold vertex \d+ in place/);
  });

  test("all held: nothing moves", () => {
    const system = buildForceDensitySystem(surface, new Uint8Array(m * m).fill(1), lines);
    expect(stepForceDensity(system, surface, densities)).toEqual(xyz);
  });
});

test("flat triangles and a warp direction square on the cloth are named", () => {
  const flat: Surface = { xyz: Float64Array.of(0, 0, 0, 1, 0, 0, 2, 0, 0), tri: Uint32Array.of(0, 1, 2) };
  expect(() => measureIsotropicDensities(flat, 1)).toThrow(/triangle 0 has no area/);
  const level: Surface = { xyz: Float64Array.of(0, 0, 0, 1, 0, 0, 0, 1, 0), tri: Uint32Array.of(0, 1, 2) };
  expect(() => measureDensities(flat, Float64Array.of(1, 1, 0), Float64Array.of(1, 0, 0))).toThrow(/no area/);
  expect(() => measureDensities(level, Float64Array.of(1, 1, 0), Float64Array.of(0, 0, 1))).toThrow(/square on it/);
});
