// Published and recomputed values for the cloth law and for what curvature costs a flat strip.
import { expect, test } from "vitest";
import { flattenPanels } from "../../src/core/panels/flatten/flattenPanels.ts";
import { buildStiffness, measureTargetStrain } from "../../src/core/structure/cloth.ts";
import { cutGrid, gridSurface, measurePath, PLAIN } from "../panels/stripFixtures.ts";

const VECTOR = { Ew: 1000, Ef: 800, nuWf: 0.3, G: 30 };

// Law: Beccarelli 2015, eqs 3.9-3.15, with nwf the weft strain of unit warp strain. Numbers recomputed by hand from its compliance
// [1.00, −0.30; −0.30, 1.25]·1e-3 at Ew 1000, Ef 800 kN/m, nwf 0.30, nfw 0.24, G 30.
test("stiffness of the test vector", () => {
  const d = buildStiffness(VECTOR);
  expect(d.ww).toBeCloseTo(1077.586, 3);
  expect(d.wf).toBeCloseTo(258.621, 3);
  expect(d.ff).toBeCloseTo(862.069, 3);
  expect(d.g).toBe(30);
});

test.each([
  [2, 2, 0.14, 0.19],
  [3, 2, 0.24, 0.16],
  [2, 3, 0.11, 0.315],
  [4, 2, 0.34, 0.13],
])("strain at %d / %d kN/m", (warp, weft, percentWarp, percentWeft) => {
  const e = measureTargetStrain(buildStiffness(VECTOR), { warp, weft });
  expect(100 * e.warp).toBeCloseTo(percentWarp, 12);
  expect(100 * e.weft).toBeCloseTo(percentWeft, 12);
});

// Differential geometry (Jacobi fields): beside a geodesic on curvature K < 0 the line at distance h is cosh(√−K·h) times as long,
// so the edges of a strip want to be |K|w²/8 longer than its middle: 0.500 % at K = −0.01, w = 2 m (recomputed; 2 % for the mesh).
// Surface of constant K = −1/a²: radius b·cosh(v/a) about an axis, v the length along the meridian; the waist v = 0 is the geodesic.
test("a strip 2 m wide on curvature −0.01 pays 0.500 % between edge and middle", () => {
  const [ni, nj, a, b] = [16, 80, 10, 4];
  const height = (v: number) => {
    let z = 0;
    for (let k = 0; k < 200; k++) z += (v / 200) * Math.sqrt(1 - ((b / a) * Math.sinh(((k + 0.5) * v) / 200 / a)) ** 2);
    return z;
  };
  const surface = gridSurface(ni, nj, (i, j) => {
    const v = -1 + (2 * i) / ni;
    const r = b * Math.cosh(v / a);
    const turn = (4 * j) / nj;
    return [r * Math.cos(turn), r * Math.sin(turn), -height(v)];
  });
  const options = { ...PLAIN, fabric: { ...PLAIN.fabric, G: 300 }, prestress: { warp: 0, weft: 0 } };
  const [p] = flattenPanels(cutGrid(surface, ni, nj, [0, ni]), options, {}).output;
  const stretch = (i: number) => {
    const path = Array.from({ length: 9 }, (_, k) => (nj / 2 - 4 + k) * (ni + 1) + i);
    return measurePath(p.erected, path) / (measurePath(p.flat, path, 2) / 1000);
  };
  const mismatch = (stretch(0) + stretch(ni)) / 2 / stretch(ni / 2) - 1;
  expect(Math.abs(mismatch / 0.005 - 1), `${mismatch}`).toBeLessThan(0.02);
});
