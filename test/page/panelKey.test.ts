// Which lines the key of the flat panels names: those that are drawn, no others; no browser.
import { expect, it } from "vitest";
import { lineLooks } from "../../src/page/flat/PanelKey.tsx";

const side = (kind: "seam" | "cable" | "clamped" | "free") => ({
  kind,
  id: kind,
  vertices: [],
  netFrom: 0,
  netTo: 1,
  lengthErected: 1,
  lengthFlat: 1000,
  allowance: 0,
});
const run: [number, number][] = [
  [0, 0],
  [1, 0],
];
const one = {
  sides: [side("free"), side("seam"), side("seam")],
  marks: [
    { kind: "warp", points: run },
    { kind: "name", at: run[0], text: "P1" },
    { kind: "match", points: run },
    { kind: "slit", points: run },
  ],
};

it("names each kind of side once, in one order whatever the panels begin with", () => {
  const words = lineLooks([one, { sides: [side("cable"), side("seam")], marks: [] }], false).map((l) => l.words);
  expect(words).toEqual(["cut line", "seam line: weld to the next panel", "cable edge", "free edge"]);
});

it("of a panel alone it names what the pen draws there, and slits apart: they are cut", () => {
  const looks = lineLooks([one], true);
  expect(looks.slice(-2)).toEqual([
    { look: "slit", words: "slit, cut" },
    { look: "pen", words: "pen: match marks, warp arrow" },
  ]);
  expect(lineLooks([{ ...one, marks: [] }], true).some((l) => l.look === "pen")).toBe(false);
});
