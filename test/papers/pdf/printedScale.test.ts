// A card printed without scaling: what a ruler finds on the rendered sheet, times the scale it states, is the panel.
import { describe, expect, test } from "vitest";
import { writePanelCards } from "../../../src/core/papers/pdf/cloth/panelCards.ts";
import type { Facts, Vec2 } from "../../../src/core/records/facts.ts";
import { rasterOf } from "../made/ink.ts";
import { fonts, missing, reason, textOf } from "../made/madePapers.ts";
import { sampleFacts } from "../made/sampleFacts.ts";
import { starterFacts } from "../made/starterFacts.ts";

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

/** Points of the cut line on a rendered sheet, mm from its upper left: the thickest line of the figure, and the largest that hangs together. */
function thickestLine({ width, height, grey }: ReturnType<typeof rasterOf>[number]): Vec2[] {
  const px = DPI / 25.4;
  // The cut line is 0.5 mm: dark pixels in whose neighbourhood of 0.4 mm all is dark.
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
  return thick;
}

/** Farthest the outline at this scale lies from the line found, mm of paper; where on the sheet it lies is found by moving it, never by turning or stretching. */
function farthest(thick: readonly Vec2[], cut: readonly Vec2[], scale: number): number {
  const ring = cut.map(([x, y]): Vec2 => [x / scale, -y / scale]);
  const samples = ring.flatMap((a, i) => {
    const b = ring[(i + 1) % ring.length]!;
    return [0.25, 0.5, 0.75].map((t): Vec2 => [a[0] + t * (b[0] - a[0]), a[1] + t * (b[1] - a[1])]);
  });
  const middle = (points: readonly Vec2[], k: 0 | 1) =>
    (points.reduce((m, p) => Math.min(m, p[k]), Infinity) + points.reduce((m, p) => Math.max(m, p[k]), -Infinity)) / 2;
  const shift: Vec2 = [middle(thick, 0) - middle(ring, 0), middle(thick, 1) - middle(ring, 1)];
  let worst = Infinity;
  for (let round = 0; round < 6; round++) {
    worst = 0;
    const sum: Vec2 = [0, 0];
    for (const [x, y] of samples) {
      const p: Vec2 = [x + shift[0], y + shift[1]];
      const [least, near] = thick.reduce(
        ([d, q], t): [number, Vec2] => {
          const e = (t[0] - p[0]) ** 2 + (t[1] - p[1]) ** 2;
          return e < d ? [e, t] : [d, q];
        },
        [Infinity, p] as [number, Vec2],
      );
      worst = Math.max(worst, Math.sqrt(least));
      for (const k of [0, 1] as const) sum[k] += (near[k] - p[k]) / samples.length;
    }
    for (const k of [0, 1] as const) shift[k] += sum[k];
  }
  return worst;
}

describe.skipIf(missing.length > 0)(`a card under a ruler${reason}`, () => {
  test("a panel at 1:10 measures right on the rendered page: its outline lies where the facts have it, within 0.35 mm of paper", async () => {
    const facts = smallPanel();
    const bytes = await writePanelCards(facts, fonts);
    expect(textOf(bytes, 1)).toContain("Scale 1:10,");
    const thick = thickestLine(rasterOf(bytes, DPI)[0]!);
    expect(thick.length).toBeGreaterThan(500);
    expect(farthest(thick, facts.panels![0]!.cut, 10)).toBeLessThan(0.35);
    // A sheet printed one per cent too small is found.
    expect(farthest(thick, facts.panels![0]!.cut, 10.1)).toBeGreaterThan(0.5);
  });

  test("so does every card of a starter job, at the scale it states", async () => {
    const facts = starterFacts("market-hall", { papers: { sheet: "A3" } }, "panels");
    const bytes = await writePanelCards(facts, fonts);
    const pages = rasterOf(bytes, DPI);
    let cards = 0;
    pages.forEach((page, k) => {
      const text = textOf(bytes, k + 1);
      const panel = facts.panels!.find((p) => text.includes(`Panel card ${p.id} `));
      const scale = /Scale 1:(\d+),/.exec(text)?.[1];
      if (!panel || scale === undefined) return;
      expect(farthest(thickestLine(page), panel.cut, Number(scale)), panel.id).toBeLessThan(0.35);
      cards++;
    });
    expect(cards).toBe(facts.panels!.length);
  });
});
