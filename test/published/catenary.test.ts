// Hanging cables against their closed forms: the elastic catenary (Irvine 1981 ch. 1.3, as cited by Irvine & Sinclair), the catenary
// and its parabola, the taut string. Numbers recomputed.
import { expect, test } from "vitest";
import { measureVibrationForce } from "../../src/core/rig/correct/readReadings.ts";
import { measureLink } from "../../src/core/structure/elements.ts";
import { hangChain } from "./hangChain.ts";

/** Horizontal force of a level elastic catenary of unstrained length L0 over a span: X(H) = span, by halving. m, kN */
function solveCatenary(span: number, L0: number, w: number, EA: number): { H: number; V: number; sag: number } {
  const V = (w * L0) / 2;
  const reach = (H: number) => (H * L0) / EA + (H / w) * 2 * Math.asinh(V / H);
  let [low, high] = [1e-9, 1e6];
  for (let i = 0; i < 200; i++) {
    const H = Math.sqrt(low * high);
    if (reach(H) < span) low = H;
    else high = H;
  }
  const H = low;
  // depth at the middle, s = L0/2
  const s = L0 / 2;
  const sag = (s / EA) * (V - (w * s) / 2) + (H / w) * (Math.hypot(1, V / H) - Math.hypot(1, (V - w * s) / H));
  return { H, V, sag };
}

test("an elastic catenary as many links: horizontal force and sag go to the closed form with the square of the links", () => {
  const [span, L0, w, EA] = [40, 41.2, 0.05, 9000];
  const exact = solveCatenary(span, L0, w, EA);
  const chain = (n: number) => {
    const s = hangChain(new Array(n).fill(L0 / n), span, w, EA);
    expect(s.converged).toBe(true);
    const { force, u } = measureLink(s.structure, s.x, new Float64Array(n).fill(L0 / n), 0);
    return { H: force * u[0], sag: -s.x[(3 * n) / 2 + 2] };
  };
  const [coarse, fine] = [chain(60), chain(120)];
  for (const q of ["H", "sag"] as const) {
    const errors = [coarse[q] - exact[q], fine[q] - exact[q]];
    expect(Math.abs(errors[1] / exact[q])).toBeLessThan(1e-4);
    expect(errors[0] / errors[1]).toBeCloseTo(4, 1);
    const limit = fine[q] + (fine[q] - coarse[q]) / 3;
    expect(Math.abs(limit / exact[q] - 1)).toBeLessThan(1e-6);
  }
});

// L = 20 m, w = 10 N/m: sag over span, H of the parabola and of the catenary in N, length of the parabola (exact) and of the catenary in m
const sags = [
  [0.01, 2500, 2500.333, 20.005332, 20.005332],
  [0.02, 1250, 1250.666, 20.021313, 20.021317],
  [0.05, 500, 501.658, 20.132545, 20.132717],
  [0.1, 250, 253.265, 20.521213, 20.523737],
  [0.125, 200, 204.036, 20.804576, 20.810366],
  [0.2, 125, 131.173, 21.964602, 21.994364],
];

test("parabola and catenary over 20 m: a chain of the catenary's length hangs with its force and sag", () => {
  for (const [ratio, parabola, catenary, parabolaLength, length] of sags) {
    const f = 20 * ratio;
    expect((0.01 * 400) / (8 * f)).toBeCloseTo(parabola / 1000, 9);
    const q = 4 * ratio;
    expect(10 * (Math.hypot(1, q) + Math.asinh(q) / q)).toBeCloseTo(parabolaLength, 5);
    // as good as inextensible; a link is a little shorter than the arc it stands for
    const n = 200;
    const chain = hangChain(new Array(n).fill(length / n), 20, 0.01, 1e8);
    const { force, u } = measureLink(chain.structure, chain.x, new Float64Array(n).fill(length / n), 0);
    // the flattest one is most sensitive to the length's last printed digit
    const tolerance = ratio < 0.02 ? 1e-3 : 2e-4;
    expect(Math.abs((1000 * force * u[0]) / catenary - 1), `sag ${ratio}`).toBeLessThan(tolerance);
    expect(Math.abs(-chain.x[(3 * n) / 2 + 2] / f - 1), `sag ${ratio}`).toBeLessThan(tolerance);
  }
});

// Sag modulus over E for E 150 kN/mm2 and 83 kN/m3: stress in N/mm2, then at a span of 20 m and of 50 m
// (Et/E = 1/(1 + (γ l)² E/(12 σ³)): Ernst 1965, EN 1993-1-11:2006 5.4.2, from memory; values recomputed)
const sagModuli = [
  [50, 0.784, 0.367],
  [100, 0.967, 0.823],
  [200, 0.996, 0.974],
  [400, 0.9995, 0.9967],
];

test("sag modulus: a chain of many links pulled a little further apart is as soft as its sag says", () => {
  // 1000 mm2
  const [EA, w, n] = [150_000, 0.083, 200];
  for (const [stress, ...ratios] of sagModuli)
    [20, 50].forEach((span, i) => {
      const given = 1 / (1 + ((w * span) ** 2 * EA) / (12 * stress ** 3));
      expect(given).toBeCloseTo(ratios[i], 3);
      // parabola of that force: its length, less what it stretches
      const r = (w * span) / (8 * stress);
      const L0 = (span * (1 + (8 / 3) * r * r)) / (1 + stress / EA);
      const pull = (reach: number) => {
        const chain = hangChain(new Array(n).fill(L0 / n), reach, w, EA);
        expect(chain.converged).toBe(true);
        const { force, u } = measureLink(chain.structure, chain.x, new Float64Array(n).fill(L0 / n), 0);
        return force * u[0];
      };
      const step = 1e-6 * span;
      const H = pull(span);
      const tangent = ((pull(span + step) - pull(span - step)) / (2 * step)) * (span / EA);
      const sag = 1 / (1 + ((w * span) ** 2 * EA) / (12 * H ** 3));
      expect(Math.abs(tangent / sag - 1), `${stress} N/mm2, ${span} m`).toBeLessThan(0.01);
      expect(Math.abs(H / stress - 1)).toBeLessThan(0.01);
    });
});

test("taut string: 20 kN, 12 m, 0.70 kg/m at 7.0430 Hz; 50, 15, 1.25 at 6.6667; 100, 20, 4.0 at 3.9528; 1 % of frequency is 2.01 % of force", () => {
  for (const [force, length, mass, frequency] of [
    [20, 12, 0.7, 7.043],
    [50, 15, 1.25, 6.6667],
    [100, 20, 4, 3.9528],
  ]) {
    expect(Math.abs(measureVibrationForce({ frequency, length, mass }) / force - 1)).toBeLessThan(3e-5);
    const off = measureVibrationForce({ frequency: 1.01 * frequency, length, mass });
    expect(off / measureVibrationForce({ frequency, length, mass }) - 1).toBeCloseTo(0.0201, 6);
  }
});
