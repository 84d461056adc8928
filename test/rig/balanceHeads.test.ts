import { expect, test } from "vitest";
import { balanceHeads } from "../../src/core/rig/build/balanceHeads.ts";

// Foot, head, sail corner, feet of two stays. Mast 4 m high, the sail pulls level with 10 kN along +x.
const xyz = [0, 0, 0, 0, 0, 4, 3, 0, 4, -3, 1.5, 0, -3, -1.5, 0];
const mast = { id: "M1", nodes: [0, 1] as [number, number] };
const pull = { head: 1, force: [10, 0, 0] };
const stay = (name: string, foot: number, force: number | null = null) => ({ name, nodes: [1, foot], force });

test("a mast with two stays: forces by hand", () => {
  // 2·S·3/d = 10 along x, strut = 2·S·4/d, d² = 3² + 1.5² + 4²
  const d = Math.hypot(3, 1.5, 4);
  const { strut, stay: s } = balanceHeads(xyz, [1], [pull], { struts: [mast], stays: [stay("S1", 3), stay("S2", 4)] });
  expect(s[0]).toBeCloseTo((10 * d) / 6, 9);
  expect(s[1]).toBeCloseTo((10 * d) / 6, 9);
  expect(strut[0]).toBeCloseTo(40 / 3, 9);
});

test("a stay whose force the job gives is taken as it is, its end order does not count", () => {
  const d = Math.hypot(3, 1.5, 4);
  const given = { name: "S1", nodes: [3, 1], force: (10 * d) / 6 };
  const { strut, stay: s } = balanceHeads(xyz, [1], [pull], { struts: [mast], stays: [given, stay("S2", 4)] });
  expect(s).toEqual([given.force, expect.closeTo((10 * d) / 6, 6)]);
  expect(strut[0]).toBeCloseTo(40 / 3, 6);
});

test("stays on the side of the pull cannot hold the head: the stop names the mast and the force left", () => {
  const wrong = xyz.map((q, c) => (c === 9 || c === 12 ? 3 : q));
  const { unbalanced } = balanceHeads(wrong, [1], [pull], { struts: [mast], stays: [stay("S1", 3), stay("S2", 4)] });
  expect(unbalanced).toMatchObject({ code: "mast-balance", level: "stop", where: ["M1"], limit: 0.1 });
  expect(unbalanced?.text).toMatch(/M1.*kN/);
});

test("one stay across the pull leaves the head unheld", () => {
  const aside = xyz.map((q, c) => (c === 10 ? 5 : q));
  const { unbalanced } = balanceHeads(aside, [1], [pull], { struts: [mast], stays: [stay("S1", 3)] });
  expect(unbalanced?.where).toEqual(["M1"]);
});

test("two heads with a stay between them: each holds its own share", () => {
  // two masts 4 m apart along x, each pulled outwards by the sail with 10 kN; the stay between them carries both
  const at = [0, 0, 0, 0, 0, 4, 4, 0, 0, 4, 0, 4];
  const struts = [
    { id: "M1", nodes: [0, 1] as [number, number] },
    { id: "M2", nodes: [3, 2] as [number, number] },
  ];
  const pulls = [
    { head: 1, force: [-10, 0, -3] },
    { head: 3, force: [10, 0, -5] },
  ];
  const { strut, stay: s } = balanceHeads(at, [1, 3], pulls, {
    struts,
    stays: [{ name: "S1", nodes: [3, 1], force: null }],
  });
  expect(s[0]).toBeCloseTo(10, 9);
  expect(strut[0]).toBeCloseTo(3, 9);
  expect(strut[1]).toBeCloseTo(5, 9);
});

test("without masts nothing is balanced", () => {
  expect(balanceHeads(xyz, [], [pull], { struts: [], stays: [stay("S1", 3, 7), stay("S2", 4)] })).toEqual({
    strut: [],
    stay: [7, 0],
    unbalanced: null,
  });
});
