// Pieces shuffled, renamed, moved and scaled: valid whatever was done to them, and as dense within noise.
import { describe, expect, it } from "vitest";
import { buildRandom } from "../../src/core/numeric/random.ts";
import type { NestPiece, StockRoll } from "../../src/core/records/roll.ts";
import { runRolls } from "../../src/core/rolls/runRolls.ts";
import { judge } from "./judge.ts";

const OPTIONS = { steps: 60, seconds: null, turn: true, bite: null, pins: [] };

/** Triangles and bowed strips of two batches, drawn by a seed. */
function drawPieces(seed: number): NestPiece[] {
  const draw = buildRandom(seed);
  return Array.from({ length: 12 }, (_, k) => {
    const [l, w, bow] = [400 + 1400 * draw(), 150 + 500 * draw(), 200 * draw()];
    const side = (y: number, s: number) => [0, 0.3, 0.7, 1].map((t) => [t * l, y + s * bow * 4 * t * (1 - t)]);
    const strip = [...side(0, 1), ...side(w, 1).reverse()].flat();
    const cut = k % 3 === 0 ? [0, 0, l, 50 * draw(), 300 * draw(), 2 * w] : strip;
    return { id: `p${k}`, fabric: "f", batch: ["b1", "b2", null][k % 3], cut: Float64Array.from(cut) };
  });
}

function drawStock(scale: number): StockRoll[] {
  const roll = { fabric: "f", width: 1500 * scale, selvedge: 20 * scale, length: 30_000 * scale, assumed: false };
  const flaws = [{ x: 700 * scale, y: 300 * scale, length: 200 * scale, width: 350 * scale }];
  return [
    { ...roll, id: "A", batch: "b1", start: 90 * scale, flaws },
    { ...roll, id: "B", batch: "b2", start: 0, flaws: [] },
  ];
}

/** Length used in all, judged; in the lengths of the pieces as they were drawn. */
function used(pieces: NestPiece[], seed: number, scale = 1): number {
  const gap = 8 * scale;
  const { output, findings, checks } = runRolls(pieces, drawStock(scale), { ...OPTIONS, gap, seed });
  expect(findings.filter((f) => f.level === "stop")).toEqual([]);
  expect(checks.filter((c) => !c.holds)).toEqual([]);
  const laid = output.flatMap((r) => r.placements.map((p) => p.panel)).sort();
  expect(laid).toEqual(pieces.map((p) => p.id).sort());
  judge(output, pieces, gap);
  return output.reduce((sum, r) => sum + r.used, 0) / scale;
}

const change = (pieces: NestPiece[], cut: (p: NestPiece, k: number) => Float64Array<ArrayBuffer>) =>
  pieces.map((p, k) => ({ ...p, cut: cut(p, k) }));

const WAYS: Record<string, (pieces: NestPiece[], seed: number) => { pieces: NestPiece[]; scale?: number }> = {
  shuffled: (pieces, seed) => {
    const draw = buildRandom(seed + 100);
    const keyed = pieces.map((p) => ({ p, key: draw() }));
    return { pieces: keyed.sort((a, b) => a.key - b.key).map(({ p }) => p) };
  },
  renamed: (pieces) => ({ pieces: pieces.map((p, k) => ({ ...p, id: `q${99 - k}` })) }),
  moved: (pieces) => ({
    pieces: change(pieces, ({ cut }, k) => cut.map((v, i) => v + (i % 2 === 0 ? 4000 - 700 * k : 333 * k - 2500))),
  }),
  "scaled down": (pieces) => ({ pieces: change(pieces, ({ cut }) => cut.map((v) => v * 0.125)), scale: 0.125 }),
  "scaled up": (pieces) => ({ pieces: change(pieces, ({ cut }) => cut.map((v) => v * 7.3)), scale: 7.3 }),
};

describe("pieces shuffled, renamed, moved, scaled", () => {
  const sets = Array.from({ length: 8 }, (_, k) => ({ seed: k + 1, pieces: drawPieces(k + 1) }));
  const plain = sets.map(({ pieces, seed }) => used(pieces, seed));

  for (const [way, of] of Object.entries(WAYS))
    it(`${way}: valid, and as dense within noise`, () => {
      const ratios = sets.map(({ pieces, seed }, k) => {
        const other = of(pieces, seed);
        return used(other.pieces, seed, other.scale) / plain[k];
      });
      // One nest alone is luck; the mean of them is not.
      for (const ratio of ratios) expect(Math.abs(ratio - 1)).toBeLessThan(0.1);
      const mean = ratios.reduce((sum, r) => sum + r, 0) / ratios.length;
      expect(Math.abs(mean - 1)).toBeLessThan(0.02);
    });
});
