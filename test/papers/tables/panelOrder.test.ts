import { describe, expect, test } from "vitest";
import { writePanelCards } from "../../../src/core/papers/pdf/cloth/panelCards.ts";
import { foldOrder, panelRow, seamAbove } from "../../../src/core/papers/tables/panelOrder.ts";
import type { Facts } from "../../../src/core/records/facts.ts";
import { fonts, missing, reason, textOf, wordsOf } from "../made/madePapers.ts";
import { sampleFacts } from "../made/sampleFacts.ts";
import { withRig } from "../made/sampleRig.ts";

/** Facts of so many panels that meet as the pairs say; nothing but what the order asks for. */
function meeting(count: number, pairs: [number, number][]): Facts {
  const facts = sampleFacts({ stop: false });
  const [panel] = facts.panels!;
  const [seam] = facts.seams!;
  facts.panels = Array.from({ length: count }, (_, i) => ({ ...panel!, id: `P${i + 1}` }));
  facts.seams = pairs.map(([a, b], k) => ({
    ...seam!,
    id: `S${k + 1}`,
    sides: [
      { panel: `P${a}`, vertices: [] },
      { panel: `P${b}`, vertices: [] },
    ],
  }));
  return facts;
}

describe("the row of panels", () => {
  test("strips given in any order follow on each other from one end to the other", () => {
    const row = panelRow(
      meeting(5, [
        [3, 1],
        [1, 5],
        [5, 2],
        [2, 4],
      ]),
    );
    const names = row.map((r) => r.panel);
    expect([names, [...names].reverse()]).toContainEqual(["P3", "P1", "P5", "P2", "P4"]);
    expect(row.filter((r) => r.seam === null)).toHaveLength(1);
  });

  test("a ring is one row and leaves one seam out; what nothing joins begins a row of its own; every panel comes once", () => {
    const ring = panelRow(
      meeting(6, [
        [1, 2],
        [2, 3],
        [3, 4],
        [4, 5],
        [5, 6],
        [6, 1],
      ]),
    );
    expect(ring.filter((r) => r.seam === null)).toHaveLength(1);
    expect(new Set(ring.map((r) => r.seam)).size).toBe(6);
    const parts = panelRow(
      meeting(5, [
        [1, 2],
        [4, 5],
      ]),
    );
    expect(parts.map((r) => r.panel).sort()).toEqual(["P1", "P2", "P3", "P4", "P5"]);
    expect(parts.filter((r) => r.seam === null)).toHaveLength(3);
    expect(panelRow(meeting(1, []))).toEqual([{ panel: "P1", seam: null }]);
  });

  test("the seam between two strips lies above the one and below the other", () => {
    const { panels } = sampleFacts();
    expect(
      panels!.map((p) => ["S1", "S2"].map((s) => (p.sides.some((q) => q.id === s) ? seamAbove(p, s) : null))),
    ).toEqual([
      [true, null],
      [false, true],
      [null, false],
    ]);
  });
});

describe("the order of folding", () => {
  test("the panel at the first corner comes last, its neighbours before it, farther ones first", () => {
    const facts = withRig(sampleFacts({ stop: false }));
    const { corners, panels } = foldOrder(facts, ["P1", "P2", "P3"]);
    expect(corners.length).toBeGreaterThan(2);
    expect([panels, [...panels].reverse()]).toContainEqual(["P1", "P2", "P3"]);
    const first = facts.rig!.adjusters.find((a) => corners[0]!.includes(`(${a.id})`))!;
    const at = facts.form!.vertices[facts.form!.anchors.find((a) => a.id === first.anchor)!.vertex]!;
    const gap = (id: string) =>
      Math.min(
        ...facts
          .panels!.find((p) => p.id === id)!
          .erected.map((q) => Math.hypot(q[0] - at[0], q[1] - at[1], q[2] - at[2])),
      );
    expect(gap(panels.at(-1)!)).toBeLessThanOrEqual(Math.min(...panels.map(gap)));
  });

  test("without any corner it still holds every panel of the piece once", () => {
    const { form: _, ...bare } = sampleFacts({ stop: false });
    expect(foldOrder(bare, ["P2", "P3"]).panels.sort()).toEqual(["P2", "P3"]);
    expect(foldOrder(bare, ["P2", "P3"]).corners).toEqual([]);
  });
});

describe.skipIf(missing.length > 0)(`the sheets of it${reason}`, () => {
  test("the unrolled map names every panel and every seam between two; folding names the corner that leaves first", async () => {
    const facts = withRig(sampleFacts({ stop: false }));
    const bytes = await writePanelCards(facts, fonts);
    const { pages } = wordsOf(bytes);
    const page = Array.from({ length: pages }, (_, i) => i + 1).find((p) =>
      textOf(bytes, p).startsWith("Assembly map, unrolled"),
    )!;
    const at = (name: string) =>
      wordsOf(bytes).words.filter((w) => w.page === page && w.text === name && w.y0 > 40)[0]!;
    const order = ["P1", "S1", "P2", "S2", "P3"].map((n) => at(n).y0);
    expect([order, [...order].reverse()]).toContainEqual([...order].sort((a, b) => a - b));
    // As in the plan beside it: what lies north lies above, whichever end the row begins at.
    expect(at("P3").y0).toBeLessThan(at("P1").y0);
    expect([at("E1").y0 > at("P2").y0, at("E3").y0 < at("P2").y0]).toEqual([true, true]);
    const { corners } = foldOrder(facts, ["P1", "P2", "P3"]);
    expect(textOf(bytes)).toContain(`${corners[0]} leaves first and is held`);
  });
});
