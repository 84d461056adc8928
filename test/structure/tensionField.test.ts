import fc from "fast-check";
import { expect, test } from "vitest";
import { buildStiffness } from "../../src/core/structure/cloth.ts";
import { relaxStress } from "../../src/core/structure/tensionField.ts";

const d = buildStiffness({ Ew: 600, Ef: 500, nuWf: 0.25, G: 20 });
const strains = fc.tuple(
  fc.double({ min: -0.02, max: 0.02, noNaN: true }),
  fc.double({ min: -0.02, max: 0.02, noNaN: true }),
  fc.double({ min: -0.04, max: 0.04, noNaN: true }),
);

function energyOf(e: readonly number[]): number {
  return (d.ww * e[0] * e[0] + 2 * d.wf * e[0] * e[1] + d.ff * e[1] * e[1] + d.g * e[2] * e[2]) / 2;
}

/** Relaxed energy by brute force: the least ½(E+P)ᵀD(E+P) over P = L Lᵀ, compass search from several starts. */
function bruteEnergy(e: readonly number[]): number {
  const at = (l: number[]) => energyOf([e[0] + l[0] * l[0], e[1] + l[1] * l[1] + l[2] * l[2], e[2] + 2 * l[0] * l[1]]);
  let best = Infinity;
  const size = Math.sqrt(Math.max(...e.map(Math.abs)));
  for (const start of [
    [0, 0, 0],
    [1, 0, 1],
    [1, 1, 0],
    [1, -1, 0],
    [0, 1, 1],
    [0.3, 0.3, 0],
    [0.3, -0.3, 0],
  ]) {
    let l = start.map((q) => q * size);
    let value = at(l);
    for (let h = size / 2; h > 1e-7 * size; ) {
      let better = false;
      for (let i = 0; i < 3; i++) {
        for (const way of [h, -h]) {
          const trial = l.slice();
          trial[i] += way;
          const v = at(trial);
          if (v < value) {
            l = trial;
            value = v;
            better = true;
          }
        }
      }
      if (!better) h /= 2;
    }
    best = Math.min(best, value);
  }
  return best;
}

test("the relaxed energy is the least over all wrinklings (second method: direct search)", () => {
  fc.assert(
    fc.property(strains, (e) => {
      const s = new Float64Array(3);
      relaxStress(d, e, s, new Float64Array(6));
      const det = d.ww * d.ff - d.wf * d.wf;
      const energy = ((d.ff * s[0] ** 2 - 2 * d.wf * s[0] * s[1] + d.ww * s[1] ** 2) / det + s[2] ** 2 / d.g) / 2;
      const brute = bruteEnergy(e);
      expect(energy).toBeLessThanOrEqual(brute + 1e-9);
      expect(brute).toBeLessThanOrEqual(energy + 1e-6);
    }),
    { numRuns: 150, seed: 7 },
  );
});

test("stress is never compressive, and the tangent is its derivative (central differences)", () => {
  fc.assert(
    fc.property(strains, (e) => {
      if (Math.hypot(...e) < 1e-4) return;
      const s = new Float64Array(3);
      const c = new Float64Array(6);
      const state = relaxStress(d, e, s, c);
      const least = (s[0] + s[1]) / 2 - Math.hypot((s[0] - s[1]) / 2, s[2]);
      expect(least).toBeGreaterThan(-1e-9);
      const full = [c[0], c[1], c[3], c[1], c[2], c[4], c[3], c[4], c[5]];
      const h = 1e-8;
      for (let j = 0; j < 3; j++) {
        const [up, down] = [h, -h].map((way) => {
          const trial = [...e];
          trial[j] += way;
          const out = new Float64Array(3);
          return { out, state: relaxStress(d, trial, out, new Float64Array(6)) };
        });
        if (up.state !== state || down.state !== state) continue;
        for (let i = 0; i < 3; i++)
          expect(Math.abs((up.out[i] - down.out[i]) / (2 * h) - full[3 * i + j])).toBeLessThan(0.05);
      }
    }),
    { numRuns: 300, seed: 11 },
  );
});

test("taut cloth follows the plain law, slack cloth carries nothing", () => {
  const s = new Float64Array(3);
  expect(relaxStress(d, [0.003, 0.003, 0.001], s, new Float64Array(6))).toBe(0);
  expect(s[0]).toBeCloseTo(d.ww * 0.003 + d.wf * 0.003, 12);
  expect(relaxStress(d, [-0.003, -0.003, 0.001], s, new Float64Array(6))).toBe(2);
  expect([...s]).toEqual([0, 0, 0]);
});

test("uniaxial stretch across free edges gives E·ε along the warp (closed form)", () => {
  const s = new Float64Array(3);
  // weft strain below the natural contraction −nuWf·ε: the cloth wrinkles and only the warp pulls
  expect(relaxStress(d, [0.004, -0.01, 0], s, new Float64Array(6))).toBe(1);
  expect(s[0]).toBeCloseTo(600 * 0.004, 9);
  expect(Math.abs(s[1])).toBeLessThan(1e-9);
});
