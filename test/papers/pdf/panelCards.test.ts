import { describe, expect, test } from "vitest";
import { writePanelCards } from "../../../src/core/papers/pdf/cloth/panelCards.ts";
import { writeRollSheets } from "../../../src/core/papers/pdf/cloth/rollSheets.ts";
import { orderWelds } from "../../../src/core/papers/tables/weldOrder.ts";
import { longFacts } from "../made/longFacts.ts";
import { fonts, missing, reason, textOf, wordsOf } from "../made/madePapers.ts";
import { sampleFacts } from "../made/sampleFacts.ts";

describe.skipIf(missing.length > 0)(`cards as another reader finds them${reason}`, () => {
  test("a card says at which seams its panel lies on top and where below, and where each seam stands in the order of welding", async () => {
    const facts = sampleFacts({ stop: false });
    facts.seams![0]!.upper = "P1";
    facts.seams![1]!.upper = "P3";
    const bytes = await writePanelCards(facts, fonts);
    expect(textOf(bytes, 2)).toContain("on top at S1");
    expect(textOf(bytes, 2)).not.toContain("below at");
    expect(textOf(bytes, 3)).toContain("below at S1, S2");
    expect(textOf(bytes, 4)).toContain("on top at S2");
    const { steps } = orderWelds(facts);
    const rowOf = (page: number, seam: string) => {
      const { words } = wordsOf(bytes);
      const name = words.find((w) => w.page === page && w.text === seam && w.x0 < 50)!;
      return words.filter((w) => w.page === page && Math.abs(w.y0 - name.y0) < 0.5).map((w) => w.text);
    };
    for (const [page, seam] of [
      [2, "S1"],
      [3, "S1"],
      [3, "S2"],
      [4, "S2"],
    ] as const) {
      const order = `${steps.findIndex((s) => s.seams.includes(seam)) + 1}`;
      expect(rowOf(page, seam)).toContain(order);
    }
    for (const head of ["before", "after"]) expect(textOf(bytes, 2)).toContain(head);
  });

  test("a name the table of sides must shorten stands whole above it; corners at anchors carry their names; notes stay off the card", async () => {
    const long = "edge-cable-of-the-south-eastern-rim-over-the-quay";
    const facts = sampleFacts({ stop: false, names: { E1: long } });
    const note = { ...facts.findings.find((f) => f.level === "note")!, where: ["P1"], code: "panel-compensated" };
    facts.findings = [...facts.findings, note];
    const text = textOf(await writePanelCards(facts, fonts), 2).replace(/\s+/g, " ");
    expect(text).toContain(`Names in full: side 1 ${long}.`);
    expect(text).toContain("C1, A1");
    expect(text).toContain("pocket-fold (caution)");
    expect(text).not.toContain("panel-compensated");
    expect(textOf(await writePanelCards(sampleFacts({ stop: false }), fonts), 2)).not.toContain("Names in full");
  });

  test("a panel without a batch of its own has that of the roll it lies on; slits are counted by their side", async () => {
    const facts = sampleFacts({ stop: false });
    const [panel] = facts.panels!;
    panel!.batch = null;
    facts.rolls!.find((r) => r.placements.some((p) => p.panel === "P1"))!.batch = "LOT 7";
    const cable = panel!.sides[0]!;
    const at = panel!.net[cable.netFrom + 5]!;
    for (const shift of [0, 400])
      panel!.marks.push({
        kind: "slit",
        points: [
          [at[0] + shift, at[1] - 40],
          [at[0] + shift, at[1] - 95],
        ],
      });
    const text = textOf(await writePanelCards(facts, fonts), 2);
    expect(text).toContain("batch LOT 7");
    expect(text).toContain("Slits: 2 in the flap of side 1.");
  });

  test("no number of a long panel is shortened, in millimetres or in feet and inches, and all sides stand on the card", async () => {
    for (const job of [
      { units: "imperial", sheet: "Letter" },
      { units: "imperial", sheet: "A4" },
      { units: "metric", sheet: "A4" },
    ] as const) {
      const facts = longFacts(job);
      for (const bytes of [await writePanelCards(facts, fonts), await writeRollSheets(facts, fonts)]) {
        const cut = wordsOf(bytes).words.filter((w) => w.text.includes("…") && w.y0 > 24);
        expect(cut.map((w) => `${w.page} ${w.text}`)).toEqual([]);
      }
      expect(textOf(await writePanelCards(facts, fonts))).not.toContain("more sides");
    }
  });
});
