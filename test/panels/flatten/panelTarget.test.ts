import { expect, test } from "vitest";
import { buildLocalStrip } from "../../../src/core/panels/flatten/localStrip.ts";
import {
  buildPanelTarget,
  buildTargetField,
  type FlattenOptions,
} from "../../../src/core/panels/flatten/panelTarget.ts";
import { buildStiffness } from "../../../src/core/structure/cloth.ts";
import { CLOTH, cutGrid, gridSurface, PLAIN } from "../stripFixtures.ts";

const D = buildStiffness(CLOTH);
const layout = cutGrid(
  gridSurface(4, 10, (i, j) => [0.5 * i, 0.5 * j, 0]),
  4,
  10,
  [0, 2, 4],
  "cable",
);
const strip = buildLocalStrip(layout, layout.strips[0]);
/** The sheet itself as flat: run along x. */
const flat = Float64Array.from({ length: (2 * strip.erected.length) / 3 }, (_, i) =>
  i % 2 === 0 ? strip.erected[(3 * i) / 2 + 1] : -strip.erected[(3 * (i - 1)) / 2],
);

test("without a test the compensation is the elastic strain of the prestress; a panel's own target goes first", () => {
  const plain = buildPanelTarget(strip, D, PLAIN);
  expect(plain.permanent).toEqual({ warp: 0, weft: 0 });
  expect(plain.compensation).toEqual(plain.elastic);
  // By hand: Ew 600, Ef 500, nuWf 0.25 → e_ww = 2/600 − nuFw·2/500, nuFw = 0.25·500/600.
  expect(plain.green.warp).toBeCloseTo(2 / 600 - ((0.25 * 500) / 600) * (2 / 500), 14);
  expect(plain.green.weft).toBeCloseTo(2 / 500 - 0.25 * (2 / 600), 14);
  const own = buildPanelTarget(strip, D, { ...PLAIN, panels: { P1: { target: { warp: 4, weft: 1 }, warp: 12 } } });
  expect([own.stress, own.turn]).toEqual([{ warp: 4, weft: 1 }, 12]);
});

test("a batch without a test of its own takes the default", () => {
  const options: FlattenOptions = {
    ...PLAIN,
    panels: { P1: { batch: "B7" } },
    compensation: { default: { warp: 0.004, weft: 0.02 }, B8: { warp: 0.1, weft: 0.1 } },
  };
  const t = buildPanelTarget(strip, D, options);
  expect([t.batch, t.compensation]).toEqual(["B7", { warp: 0.004, weft: 0.02 }]);
  expect((1 + t.permanent.warp) * (1 + t.elastic.warp)).toBeCloseTo(1.004, 14);
});

test("cable sides are decompensated when asked; the component along them is taken back and fades", () => {
  const options = { ...PLAIN, decompensation: { clamped: 1, ring: 1, cable: 0.8 } };
  const t = buildPanelTarget(strip, D, options);
  expect(t.decompensated.map((q) => q.side)).toEqual([0, 2, 3]);
  const { strain: field, share } = buildTargetField(strip, { ...t, decompensated: [{ side: 3, fade: 0.8 }] }, flat);
  for (let k = 0; k < field.length; k += 3) {
    const middle = [0, 1, 2].reduce((s, c) => s + strip.erected[3 * strip.tri[k + c]] / 3, 0);
    // Side 3 lies at x = 0 of the form and runs along the warp: only E_ww is taken back.
    const left = middle < 0.8 ? 0.5 * (1 - Math.cos((Math.PI * middle) / 0.8)) : 1;
    expect(field[k]).toBeCloseTo(left * t.green.warp, 12);
    expect(field[k + 1]).toBeCloseTo(t.green.weft, 12);
    expect(field[k + 2]).toBeCloseTo(0, 12);
    // Nothing taken back: whole weight; the less is left of the strain, the less it counts, down to a twentieth.
    expect(share[k / 3]).toBeCloseTo(0.05 + 0.95 * left, 12);
  }
});

test("with a permanent part the relaxed cloth beside the side is longer than the form by that part", () => {
  const options: FlattenOptions = {
    ...PLAIN,
    compensation: { default: { warp: 0.01, weft: 0.03 } },
    decompensation: { clamped: null, ring: null, cable: 100 },
  };
  const t = buildPanelTarget(strip, D, options);
  // A fade of 100 m: the whole strip counts as beside its side along the warp. Cut as long as erected: relaxed = erected·(1 + permanent).
  const { strain } = buildTargetField(strip, { ...t, decompensated: [{ side: 3, fade: 100 }] }, flat);
  const wanted = ((1 + t.permanent.warp) ** -2 - 1) / 2;
  for (let k = 0; k < strain.length; k += 3) expect(Math.abs(strain[k] - wanted)).toBeLessThan(1e-5);
});
