// A card printed without scaling: what a ruler finds on the rendered sheet, times the scale it states, is the panel.
import { describe, expect, test } from "vitest";
import { writePanelCards } from "../../../src/core/papers/pdf/cloth/panelCards.ts";
import type { Facts, Vec2 } from "../../../src/core/records/facts.ts";
import { rasterOf } from "../made/ink.ts";
import { fonts, missing, reason, textOf } from "../made/madePapers.ts";
import { sampleFacts } from "../made/sampleFacts.ts";

const DPI = 200;

/** The sample's first panel at a quarter of its size, so that a card holds it at 1:10; no mark, name or number on it. */
function smallPanel(): Facts {
  const facts = sampleFacts({ stop: false, sheet: "A3" });
  const [panel] = facts.panels!;
  const quarter = (p: Vec2): Vec2 => [p[0] / 4, p[1] / 4];
  facts.panels = [
    {
      ...panel!,
      flat: panel!.flat.map(quarter),
      net: panel!.net.map(quarter),
      cut: panel!.cut.map(quarter),
      marks: [],
    },
  ];
  facts.seams = [];
  delete facts.rolls;
  return facts;
}

describe.skipIf(missing.length > 0)(`a card under a ruler${reason}`, () => {
  test("a panel at 1:10 measures right on the rendered page: its outline lies where the facts have it, within 0.35 mm of paper", async () => {
    const facts = smallPanel();
    const bytes = await writePanelCards(facts, fonts);
    expect(textOf(bytes, 1)).toContain("Scale 1:10,");
    const [page] = rasterOf(bytes, DPI);
    const { width, height, grey } = page!;
    const px = DPI / 25.4;
    const { cut } = facts.panels![0]!;
    const span = (k: 0 | 1) => [Math.min(...cut.map((p) => p[k])), Math.max(...cut.map((p) => p[k]))] as const;
    const [[x0, x1], [y0, y1]] = [span(0), span(1)];
    // The cut line is the thickest of the figure, 0.5 mm: dark pixels in whose neighbourhood of 0.4 mm all is dark.
    const reach = Math.floor((0.4 * px) / 2);
    const dark = (x: number, y: number) => grey[y * width + x]! < 100;
    const sheet = { left: 22 * px, right: width - 12 * px, top: 45 * px, bottom: height - 110 * px };
    const left = new Set<number>();
    for (let y = Math.round(sheet.top); y < sheet.bottom; y++) {
      for (let x = Math.round(sheet.left); x < sheet.right; x++) {
        let all = true;
        for (let d = -reach; d <= reach && all; d++) all = dark(x + d, y) && dark(x, y + d);
        if (all) left.add(y * width + x);
      }
    }
    // Strokes of bold letters are as thick: the outline is the largest of what hangs together.
    let thick: Vec2[] = [];
    for (const seed of left) {
      const part = [seed];
      left.delete(seed);
      for (const at of part)
        for (const dy of [-2, -1, 0, 1, 2])
          for (const dx of [-2, -1, 0, 1, 2]) if (left.delete(at + dy * width + dx)) part.push(at + dy * width + dx);
      if (part.length > thick.length)
        thick = part.map((at): Vec2 => [((at % width) + 0.5) / px, (Math.floor(at / width) + 0.5) / px]);
    }
    expect(thick.length).toBeGreaterThan(500);
    // Where the figure stands on the sheet follows from its own extremes; its size and shape must not.
    const low = (k: 0 | 1) => thick.reduce((m, p) => Math.min(m, p[k]), Infinity);
    const high = (k: 0 | 1) => thick.reduce((m, p) => Math.max(m, p[k]), -Infinity);
    expect(Math.abs(high(0) - low(0) - (x1 - x0) / 10)).toBeLessThan(0.4);
    expect(Math.abs(high(1) - low(1) - (y1 - y0) / 10)).toBeLessThan(0.4);
    const middle: Vec2 = [(low(0) + high(0)) / 2, (low(1) + high(1)) / 2];
    const ring = cut.map(
      ([x, y]): Vec2 => [middle[0] + (x - (x0 + x1) / 2) / 10, middle[1] - (y - (y0 + y1) / 2) / 10],
    );
    for (let i = 0; i < ring.length; i++) {
      const [a, b] = [ring[i]!, ring[(i + 1) % ring.length]!];
      for (const t of [0.25, 0.5, 0.75]) {
        const p: Vec2 = [a[0] + t * (b[0] - a[0]), a[1] + t * (b[1] - a[1])];
        const near = Math.min(...thick.map((q) => Math.hypot(q[0] - p[0], q[1] - p[1])));
        expect(near, `the outline at ${p}`).toBeLessThan(0.35);
      }
    }
  });
});
