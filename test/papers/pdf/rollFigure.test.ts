import { describe, expect, test } from "vitest";
import { insidePoint } from "../../../src/core/papers/drawing/flatGeometry.ts";
import { placedInOrder } from "../../../src/core/papers/drawing/placedCloth.ts";
import { writeRollSheets } from "../../../src/core/papers/pdf/cloth/rollSheets.ts";
import type { Facts, Vec2 } from "../../../src/core/records/facts.ts";
import { ringHolds } from "../../../src/core/surface/ring.ts";
import { fonts, missing, reason, type Word, wordsOf } from "../made/madePapers.ts";
import { sampleFacts } from "../made/sampleFacts.ts";

/** The sample's first roll, long, with two rows of small strips between large ones: so many that figures get small. */
function manyStrips(bite: number | null): Facts {
  const facts = sampleFacts({ stop: false });
  const box = (w: number, h: number): Vec2[] => [
    [0, 0],
    [w, 0],
    [w, h],
    [0, h],
  ];
  const made = Array.from({ length: 60 }, (_, i) => ({ id: `south-strip-${i + 1}`, cut: box(1000, 190) }));
  const large = Array.from({ length: 20 }, (_, i) => ({ id: `cover-${i + 1}`, cut: box(1400, 1500) }));
  facts.pieces = [...made, ...large].map((p) => ({ ...facts.pieces![0]!, ...p, kind: "strip", for: "E1" }));
  const placements = [
    ...made.map((p, i) => ({
      panel: p.id,
      rotation: 0 as const,
      x: 1010 * Math.floor(i / 2),
      y: 200 * (i % 2),
    })),
    ...large.map((p, i) => ({ panel: p.id, rotation: 0 as const, x: 1510 * i, y: 420 })),
  ];
  const [roll] = facts.rolls!;
  const feeds = bite === null ? undefined : [0, 9000, 18000, 27000];
  facts.rolls = [
    {
      ...roll!,
      width: 2500,
      usableWidth: 2450,
      used: 30290,
      length: 50000,
      flaws: [],
      placements,
      bite,
      feeds,
    } as never,
  ];
  return facts;
}

/** Rows of a figure: from the words below each that say where it begins and ends, alone on their line but for feeds. */
function rowsOf(words: Word[]) {
  const lines = new Map<string, Word[]>();
  for (const w of words) {
    const key = `${w.page} ${w.y0.toFixed(1)}`;
    lines.set(key, [...(lines.get(key) ?? []), w]);
  }
  return [...lines.values()].flatMap((line) => {
    const own = line.filter((w) => w.text !== "feed").sort((a, b) => a.x0 - b.x0);
    const [a, b, c, d] = [own[0]!, own[1], own.at(-2), own.at(-1)!];
    const ends = b?.text === "mm" && d.text === "mm" && own.length < 8;
    if (!ends || !/^\d+$/.test(a.text) || !/^\d+$/.test(c!.text)) return [];
    return [{ from: Number(a.text), to: Number(c!.text), x0: a.x0, x1: d.x1, y: a.y0, page: a.page }];
  });
}

describe.skipIf(missing.length > 0)(`rolls as another reader finds them${reason}`, () => {
  test("every piece is numbered once, and a number on cloth lies on its own piece", async () => {
    const facts = manyStrips(null);
    const roll = facts.rolls![0]!;
    const cloth = placedInOrder(facts, roll);
    const { words } = wordsOf(await writeRollSheets(facts, fonts));
    const rows = rowsOf(words);
    expect(rows.length).toBeGreaterThan(2);
    expect(rows[0]!.from).toBe(0);
    expect(rows.at(-1)!.to).toBe(Math.round(roll.used));
    let inside = 0;
    cloth.forEach((c, n) => {
      const middle = insidePoint(c.cut).at;
      const row = rows.find((r) => middle[0] >= r.from && middle[0] < r.to)!;
      const scale = (row.x1 - row.x0) / (row.to - row.from);
      // Words below a row stand 4 mm under its base; their boxes begin 2.95 mm above their base line (9 pt, ascent 0.928).
      const base = row.y + 2.95 - 4;
      const top = base - scale * roll.width - 0.5;
      const labels = words.filter(
        (w) =>
          w.page === row.page && w.y0 > top && w.y1 < row.y + 1 && (w.text === `${n + 1}` || w.text === `${n + 1}:`),
      );
      expect(
        labels.map((w) => w.text),
        `piece ${n + 1}`,
      ).toHaveLength(1);
      const label = labels[0]!;
      const x = row.from + ((label.x0 + label.x1) / 2 - row.x0) / scale;
      const y = (base - (label.y0 + label.y1) / 2) / scale - (roll.width - roll.usableWidth) / 2;
      const owner = cloth.findIndex((q) => ringHolds(Float64Array.from(q.cut.flat()), x, y));
      if (owner >= 0) expect(owner + 1, `number ${n + 1} stands on another piece`).toBe(n + 1);
      if (owner === n) inside++;
    });
    expect(inside).toBe(cloth.length);
  });

  test("where the table is fed on to is drawn and named on the figure", async () => {
    const text = wordsOf(await writeRollSheets(manyStrips(9000), fonts))
      .words.map((w) => w.text)
      .join(" ");
    for (const n of [2, 3, 4]) expect(text).toContain(`feed ${n}`);
  });
});
