// Nests worked by hand, and properties on random pieces with a brute-force judge of its own.
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { buildRandom } from "../../src/core/numeric/random.ts";
import type { PlanError } from "../../src/core/problem.ts";
import type { NestDecision } from "../../src/core/records/job.ts";
import type { NestPiece, StockRoll } from "../../src/core/records/roll.ts";
import { totalCloth } from "../../src/core/rolls/rollFigures.ts";
import { runRolls } from "../../src/core/rolls/runRolls.ts";
import { isSimpleRing } from "../../src/core/surface/ring.ts";
import { drawStock } from "../bench/stockCase.ts";
import { judge, oracleGap, placedPoints } from "./judge.ts";

const OPTIONS: NestDecision = { steps: 40, seconds: null, seed: 1, gap: 0, turn: true, bite: null, pins: [] };
const ROLL: StockRoll = {
  id: "A",
  fabric: "f",
  batch: null,
  width: 2000,
  selvedge: 0,
  length: 50_000,
  start: 0,
  flaws: [],
  assumed: false,
};

const piece = (id: string, points: number[], batch: string | null = null): NestPiece => ({
  id,
  fabric: "f",
  batch,
  cut: Float64Array.from(points),
});
const box = (id: string, length: number, width: number, batch: string | null = null) =>
  piece(id, [0, 0, length, 0, length, width, 0, width], batch);

describe("exact nests", () => {
  it("tiles rectangles without loss", () => {
    const pieces = ["a", "b", "c", "d", "e", "f"].map((id) => box(id, 1000, id < "d" ? 1200 : 800));
    const { output, findings } = runRolls(pieces, [ROLL], OPTIONS);
    expect(findings).toEqual([]);
    expect(output[0].used).toBeCloseTo(3000, 3);
    expect(output[0].utilisation).toBeCloseTo(1, 6);
    expect(output[0].lowerBound).toBeCloseTo(3000, 3);
    judge(output, pieces, 0);
  });

  it("fills a roll to its last millimetre", () => {
    const pieces = ["a", "b", "c"].map((id) => box(id, 1001.3, 2000));
    const { output, findings } = runRolls(pieces, [{ ...ROLL, length: 3003.9 }], OPTIONS);
    expect(findings).toEqual([]);
    expect(output[0].used).toBeCloseTo(3003.9, 6);
  });

  it("turns one triangle by 180 degrees against the other, only where it may", () => {
    const triangle = [0, 0, 3000, 0, 0, 1900];
    const pieces = [piece("a", triangle), piece("b", triangle)];
    const turned = runRolls(pieces, [{ ...ROLL, width: 1900 }], OPTIONS);
    expect(turned.output[0].used).toBeCloseTo(3000, 2);
    judge(turned.output, pieces, 0);
    const straight = runRolls(pieces, [{ ...ROLL, width: 1900 }], { ...OPTIONS, turn: false });
    expect(straight.output[0].placements.every((p) => p.rotation === 0)).toBe(true);
    expect(straight.output[0].used).toBeCloseTo(6000, 2);
  });

  it("keeps the gap and the trim, and no more", () => {
    const pieces = [box("a", 1000, 995), box("b", 1000, 995), box("c", 500, 2000)];
    const { output } = runRolls(pieces, [{ ...ROLL, start: 150 }], { ...OPTIONS, gap: 10 });
    expect(output[0].used).toBeCloseTo(150 + 1000 + 10 + 500, 3);
    expect(output[0].lowerBound).toBeCloseTo(150 + 1000 + 500 + 10 * (1500 / 2010) - 10 * (1500 / 2010), -2);
    judge(output, pieces, 10);
  });

  it("lets a round corner keep its true distance: a disc above two discs", () => {
    const disc = (r: number) =>
      Array.from({ length: 96 }, (_, k) => [r * Math.cos((k * Math.PI) / 48), r * Math.sin((k * Math.PI) / 48)]).flat();
    const pieces = [piece("a", disc(400)), piece("b", disc(400)), piece("c", disc(400))];
    const { output } = runRolls(pieces, [{ ...ROLL, width: 1620 }], { ...OPTIONS, gap: 20 });
    // Two abreast (800 + 20 + 800), the third between them: at best a regular triangle of side 820, and at the true gap.
    expect(output[0].used).toBeLessThan(800 + Math.sqrt(820 ** 2 - 410 ** 2) + 8);
    const [a, b, c] = output[0].placements.map((at, k) => placedPoints(pieces[k], at));
    expect(Math.min(oracleGap(a, b), oracleGap(a, c), oracleGap(b, c))).toBeLessThan(20.001);
    judge(output, pieces, 20);
  });
});

describe("stock", () => {
  it("goes round flaws", () => {
    const flaws = [{ x: 0, y: 500, length: 400, width: 1500 }];
    const pieces = [box("a", 1000, 1600), box("b", 300, 480)];
    const { output } = runRolls(pieces, [{ ...ROLL, flaws }], OPTIONS);
    judge(output, pieces, 0);
    expect(output[0].used).toBeCloseTo(1400, 3);
    const b = output[0].placements.find((p) => p.panel === "b")!;
    expect(placedPoints(pieces[1], b).every(([x]) => x <= 400 + 1e-6)).toBe(true);
  });

  it("keeps batches apart and uses several rolls in order", () => {
    const rolls = [
      { ...ROLL, id: "A", batch: "b1", length: 2100 },
      { ...ROLL, id: "B", batch: "b2", length: 2100 },
      { ...ROLL, id: "C", batch: null, length: 2100 },
    ];
    const pieces = [
      box("p", 1000, 1900, "b2"),
      box("q", 1000, 1900, "b1"),
      box("r", 1000, 1900),
      box("s", 1000, 1900),
      box("t", 1000, 1900),
    ];
    const { output, findings } = runRolls(pieces, rolls, OPTIONS);
    expect(findings).toEqual([]);
    const on = (id: string) => output.find((r) => r.placements.some((p) => p.panel === id))?.id;
    expect(on("q")).toBe("A");
    expect(on("p")).toBe("B");
    expect(output.map((r) => r.id)).toEqual(["A", "B", "C"]);
    judge(output, pieces, 0);
  });

  it("opens assumed rolls R1, R2, … as needed, one set a batch", () => {
    const assumed = { ...ROLL, id: "any", assumed: true, length: 2500 };
    const many = Array.from({ length: 5 }, (_, k) => box(`p${k}`, 1000, 1800));
    const { output, findings } = runRolls(many, [assumed], OPTIONS);
    expect(findings).toEqual([]);
    expect(output.map((r) => r.id)).toEqual(["R1", "R2", "R3"]);
    const mixed = runRolls([box("a", 100, 100, "b2"), box("b", 100, 100)], [assumed], OPTIONS).output;
    expect(mixed.map((r) => [r.id, r.batch])).toEqual([
      ["R1", "b2"],
      ["R2", null],
    ]);
  });

  it("says how many metres are missing and who is left over", () => {
    const many = Array.from({ length: 5 }, (_, k) => box(`p${k}`, 1000, 1800));
    const { output, findings, checks } = runRolls(many, [{ ...ROLL, length: 3500 }], OPTIONS);
    expect(output[0].placements.length).toBe(3);
    const stop = findings.find((f) => f.code === "roll-short")!;
    expect(stop.level).toBe("stop");
    expect(stop.value as number).toBeCloseTo(2, 3);
    expect((stop.where as string[]).length).toBe(2);
    expect(checks.some((c) => !c.holds)).toBe(true);
  });

  it("names pieces that are too wide, too long, past the bite, or without cloth", () => {
    const pieces = [
      box("wide", 100, 2100),
      box("long", 60_000, 100),
      box("bitten", 9000, 100),
      box("other", 100, 100, "b9"),
    ];
    const { output, findings } = runRolls(pieces, [ROLL], { ...OPTIONS, bite: 8000 });
    expect(findings.map((f) => [f.code, f.where, f.level])).toEqual([
      ["roll-width", "wide", "stop"],
      ["roll-length", "long", "stop"],
      ["roll-bite", "bitten", "stop"],
      ["roll-cloth", "other", "stop"],
    ]);
    expect(findings[0].text).toContain("2100 mm");
    expect(output[0].placements.map((p) => p.panel)).toEqual(["bitten"]);
  });
});

describe("which rolls", () => {
  it("opens the roll that spends least cloth, and leaves a remnant that is of use", () => {
    // 4 boxes of 1000 × 900: on the wide roll (2000) 2 abreast, 4 m²; on the narrow one (950) 3.8 m², and less waste.
    const rolls = [
      { ...ROLL, id: "wide", length: 30_000 },
      { ...ROLL, id: "narrow", width: 950, length: 30_000 },
    ];
    const pieces = ["a", "b", "c", "d"].map((id) => box(id, 1000, 900));
    const { output } = runRolls(pieces, rolls, OPTIONS);
    expect(output.map((r) => [r.id, Math.round(r.used), Math.round(r.remnant!)])).toEqual([["narrow", 4000, 26_000]]);
    // A roll of 5.5 m would be left with 1.5 m × 2 m of scrap; the roll of 4 m is used up.
    const short = [
      { ...ROLL, id: "long", length: 5500 },
      { ...ROLL, id: "short", length: 4000 },
    ];
    const wide = ["a", "b", "c", "d"].map((id) => box(id, 1000, 1900));
    expect(runRolls(wide, short, OPTIONS).output.map((r) => [r.id, r.remnant])).toEqual([["short", 0]]);
  });

  it("proposes another split between batches where that saves cloth, and keeps the job's own", () => {
    const rolls = ["b1", "b2"].map((batch) => ({ ...ROLL, id: batch, batch, length: 20_000 }));
    const pieces = [box("a", 3000, 1000, "b1"), box("b", 3000, 1000, "b2")];
    const { output, findings } = runRolls(pieces, rolls, OPTIONS);
    expect(output.map((r) => r.placements.map((p) => p.panel))).toEqual([["a"], ["b"]]);
    expect(findings.map((f) => [f.code, f.level])).toEqual([["batch-split", "note"]]);
    expect(findings[0].value).toBeCloseTo(6, 6);
    // A strip goes with its panel: it is not named, and alone it is no proposal.
    const strips = [{ ...box("b-strip", 3000, 900, "b2"), follows: true }];
    const named = runRolls([...pieces.map((p) => ({ ...p, cut: box("", 3000, 500).cut })), ...strips], rolls, OPTIONS);
    expect(named.findings.flatMap((f) => f.where)).not.toContain("b-strip");
    expect(runRolls([pieces[0], ...strips], rolls, OPTIONS).findings).toEqual([]);
    const alike = pieces.map((p) => ({ ...p, batch: "b1" }));
    expect(runRolls(alike, rolls, OPTIONS).findings).toEqual([]);
  });

  it("lays 200 panels on 12 rolls of three batches with six flaws, none on a flaw or a foreign batch", () => {
    const { pieces, stock } = drawStock(200, 11);
    const { output, findings, checks } = runRolls(pieces, stock, { ...OPTIONS, steps: 3, gap: 10 });
    expect(findings.filter((f) => f.level === "stop")).toEqual([]);
    expect(checks.filter((c) => !c.holds)).toEqual([]);
    expect(output.reduce((sum, r) => sum + r.placements.length, 0)).toBe(200);
    for (const roll of output)
      for (const p of roll.placements) expect(`b${Number(p.panel.slice(1)) % 3}`).toBe(roll.batch);
  });
});

describe("cloth and money", () => {
  it("are counted a roll and in all, over the width that is paid for", () => {
    const rolls = [
      { ...ROLL, id: "A", selvedge: 50, length: 1000, price: 20 },
      { ...ROLL, id: "B", length: 2200, start: 200 },
    ];
    const pieces = ["a", "b", "c"].map((id) => box(id, 900, 1900));
    const { output } = runRolls(pieces, rolls, { ...OPTIONS, price: 10, currency: "EUR" });
    // 0.9 m × 2 m × 20 on A; 200 of trim and 2 × 900 on B, at the price of the nest.
    expect(output.map((r) => [r.id, r.cost, r.currency])).toEqual([
      ["A", 36, "EUR"],
      ["B", 40, "EUR"],
    ]);
    const total = totalCloth(output, pieces, rolls, 0);
    expect(total.cost).toBeCloseTo(76, 9);
    expect(total.used).toBeCloseTo(2.9, 9);
    expect(total.taken).toBeCloseTo(5.8, 9);
    expect(total.utilisation).toBeCloseTo((3 * 0.9 * 1.9) / 5.8, 9);
    // No two chords of 1900 lie abreast on 2000: 2.7 m, whatever the rolls.
    expect(total.bound).toBeCloseTo(2.7, 6);
    expect(runRolls(pieces, [ROLL], OPTIONS).output[0].cost).toBeUndefined();
  });

  it("a piece longer than the table is refused, or fed on with a note, as the job says", () => {
    const list = [box("long", 5000, 400), box("short", 900, 400)];
    const run = (pastBite?: "refuse" | "feed") =>
      runRolls(list, [ROLL], { ...OPTIONS, bite: 2000, ...(pastBite ? { pastBite } : {}) });
    for (const way of [undefined, "refuse"] as const)
      expect(run(way).findings.map((f) => [f.code, f.level])).toEqual([["roll-bite", "stop"]]);
    const fed = run("feed");
    expect(fed.findings.map((f) => [f.code, f.level])).toEqual([["roll-feed", "note"]]);
    expect(fed.findings[0].text).toMatch(/3 feeds/);
    expect(fed.output[0].feeds).toEqual([0, 2000, 4000]);
  });

  it("small pieces go into what the large ones leave", () => {
    const large = Array.from({ length: 3 }, (_, k) => box(`p${k}`, 3000, 1500));
    const small = Array.from({ length: 12 }, (_, k) => box(`s${k}`, 400, 240));
    const used = (list: NestPiece[]) => runRolls(list, [ROLL], { ...OPTIONS, gap: 10 }).output[0].used;
    expect(used([...small, ...large])).toBeCloseTo(used(large), 6);
  });
});

describe("pins", () => {
  it("are kept exactly, the rest goes round them", () => {
    const pieces = [box("a", 1000, 900), box("b", 1000, 900), box("c", 700, 2000)];
    const pins = [{ panel: "b", roll: "A", x: 2345.678, y: 1950, rotation: 180 as const }];
    const { output } = runRolls(pieces, [ROLL], { ...OPTIONS, gap: 5, pins });
    expect(output[0].placements.find((p) => p.panel === "b")).toEqual({
      panel: "b",
      x: 2345.678,
      y: 1950,
      rotation: 180,
      order: 3,
    });
    judge(output, pieces, 5);
  });

  it("are refused with names where they overlap, leave the cloth, lie on a flaw, turn or name nothing", () => {
    const pieces = [box("a", 1000, 900), box("b", 1000, 900)];
    const pin = (panel: string, x: number, y: number, rotation: 0 | 180 = 0, roll = "A") => ({
      panel,
      roll,
      x,
      y,
      rotation,
    });
    const run = (pins: NestDecision["pins"], more: Partial<NestDecision> = {}, roll: Partial<StockRoll> = {}) => {
      try {
        runRolls(pieces, [{ ...ROLL, ...roll }], { ...OPTIONS, pins, ...more });
      } catch (error) {
        return error as PlanError;
      }
      return null;
    };
    const overlap = run([pin("a", 0, 0), pin("b", 500, 500)]);
    expect(overlap?.code).toBe("pin-overlap");
    expect(overlap?.where).toEqual(["a", "b"]);
    expect(run([pin("a", 0, 0), pin("b", 1000, 0)])).toBe(null);
    expect(run([pin("a", 0, 0), pin("b", 1005, 0)], { gap: 10 })?.message).toMatch(/5.00 mm apart/);
    expect(run([pin("a", 0, 1200)])?.code).toBe("pin-place");
    expect(run([pin("a", 0, 0)], {}, { start: 100 })?.code).toBe("pin-place");
    expect(run([pin("a", 0, 0)], {}, { flaws: [{ x: 500, y: 500, length: 10, width: 10 }] })?.code).toBe("pin-flaw");
    expect(run([pin("a", 1000, 900, 180)], { turn: false })?.code).toBe("pin-turn");
    expect(run([pin("z", 0, 0)])?.code).toBe("pin-piece");
    expect(run([pin("a", 0, 0), pin("a", 2000, 0)])?.code).toBe("pin-piece");
    expect(run([pin("a", 0, 0, 0, "Z")])?.code).toBe("pin-roll");
  });

  it("may miss the gap by the rounding of what is typed (bug: taken, then called a fault of the program)", () => {
    const pieces = [box("a", 1000, 900), box("b", 1000, 900), box("c", 700, 700)];
    const pin = (panel: string, x: number) => ({ panel, roll: "A", x, y: 0, rotation: 0 as const });
    const run = (x: number) => runRolls(pieces, [ROLL], { ...OPTIONS, gap: 10, pins: [pin("a", 0), pin("b", x)] });
    const { findings, checks } = run(1009.96);
    expect(findings).toEqual([]);
    expect(checks.filter((c) => !c.holds)).toEqual([]);
    expect(() => run(1009.9)).toThrow(/9.90 mm apart/);
  });

  it("may name a roll that is taken for granted", () => {
    const assumed = { ...ROLL, id: "any", assumed: true };
    const pins = [{ panel: "a", roll: "R2", x: 10, y: 20, rotation: 0 as const }];
    const { output } = runRolls([box("a", 100, 100), box("b", 100, 100)], [assumed], { ...OPTIONS, pins });
    expect(output.find((r) => r.id === "R2")?.placements[0].panel).toBe("a");
  });
});

describe("hard input", () => {
  it("answers lines, points, crossings and missing numbers with a finding", () => {
    const bad = [
      piece("line", [0, 0, 10, 0, 20, 0]),
      piece("bow", [0, 0, 10, 10, 10, 0, 0, 10]),
      piece("two", [0, 0, 1, 1]),
      piece("nan", [0, 0, Number.NaN, 0, 5, 5]),
      piece("spike", [0, 0, 10, 0, 20, 0, 10, 0, 10, 10]),
    ];
    const { output, findings } = runRolls(bad, [ROLL], OPTIONS);
    expect(output).toEqual([]);
    expect(findings.map((f) => f.code)).toEqual(bad.map(() => "piece-outline"));
    expect(runRolls([], [ROLL], OPTIONS).output).toEqual([]);
    expect(runRolls([box("a", 10, 10)], [], OPTIONS).findings[0].code).toBe("roll-cloth");
  });

  it("takes an outline of 10 000 points, smooth or ragged", () => {
    const round = (ragged: number) =>
      Array.from({ length: 10_000 }, (_, k) => {
        const r = 500 + ragged * (k % 2);
        return [r * Math.cos((k * Math.PI) / 5000), r * Math.sin((k * Math.PI) / 5000)];
      }).flat();
    const pieces = [piece("a", round(0)), piece("b", round(30)), piece("c", round(0))];
    const { output, checks } = runRolls(pieces, [ROLL], { ...OPTIONS, gap: 8, steps: 6 });
    expect(output[0].placements.length).toBe(3);
    expect(checks.every((c) => c.holds)).toBe(true);
  });

  it("ends on slivers, comets and pieces of every wrong size with a result or a finding for each", () => {
    const pieces = [
      piece("sliver", [0, 0, 3000, 0, 3000, 2, 0, 2]),
      piece("needle", [0, 0, 2000, 1, 0, 2]),
      piece("dust", [0, 0, 0.5, 0, 0.5, 0.5]),
      piece(
        "run",
        Array.from({ length: 200 }, (_, k) => [10 * k, 0])
          .flat()
          .concat([1990, 300, 0, 300]),
      ),
      box("wide", 100, 2000.1),
      box("long", 50_000.1, 100),
      box("just", 50_000, 60),
    ];
    const { output, findings, checks } = runRolls(pieces, [ROLL], { ...OPTIONS, gap: 5, steps: 10 });
    expect(findings.map((f) => [f.code, f.where])).toEqual([
      ["roll-width", "wide"],
      ["roll-length", "long"],
    ]);
    expect(output[0].placements.map((p) => p.panel)).toEqual(["dust", "just", "needle", "run", "sliver"]);
    for (const c of checks.slice(0, -1)) expect(c.holds, c.text).toBe(true);
  });

  it("takes a clockwise outline", () => {
    const { output } = runRolls([piece("a", [0, 0, 0, 500, 700, 500, 700, 0])], [ROLL], OPTIONS);
    expect(output[0].used).toBeCloseTo(700, 6);
  });
});

describe("stopping", () => {
  const pieces = Array.from({ length: 6 }, (_, k) => box(`p${k}`, 700 + 90 * k, 500 + 77 * k));

  it("hands back the best so far with a note, or nothing where there is none", () => {
    let done = 0;
    const result = runRolls(pieces, [ROLL], OPTIONS, { cancelled: () => done > 2, onProgress: () => done++ });
    expect(result.output[0].placements.length).toBe(6);
    expect(result.findings.map((f) => [f.code, f.level, f.value])).toEqual([["nest-cut-short", "note", 3]]);
    let asked = 0;
    const first = runRolls(pieces, [ROLL], OPTIONS, { cancelled: () => asked++ > 0 });
    expect(first.output[0].placements.length).toBe(6);
    expect(() => runRolls(pieces, [ROLL], OPTIONS, { cancelled: () => true })).toThrow(/before the first layout/);
  });

  it("reports progress, rising to 1", () => {
    const shares: number[] = [];
    runRolls(pieces, [ROLL], OPTIONS, { onProgress: (share) => shares.push(share) });
    expect(shares[shares.length - 1]).toBe(1);
    expect([...shares].sort((a, b) => a - b)).toEqual(shares);
  });

  it("leaves a valid layout at 200 moments, none of more cloth than the constructive nest", () => {
    const run = (cancelled?: () => boolean) =>
      runRolls(pieces, [ROLL], { ...OPTIONS, gap: 7, steps: 20 }, cancelled ? { cancelled } : {});
    const cloth = (r: ReturnType<typeof run>) => r.output.reduce((sum, o) => sum + o.used * o.width, 0);
    let polls = 0;
    const whole = run(() => ++polls < 0);
    const constructive = cloth(runRolls(pieces, [ROLL], { ...OPTIONS, gap: 7, steps: 1 }));
    expect(cloth(whole)).toBeLessThanOrEqual(constructive);
    const draw = buildRandom(9);
    for (let k = 0; k < 200; k++) {
      const end = 1 + Math.floor(polls * draw() ** 2);
      let asked = 0;
      const { output, checks } = run(() => asked++ >= end);
      expect(checks.filter((c) => !c.holds)).toEqual([]);
      expect(output[0].placements.length).toBe(6);
      expect(output.reduce((sum, o) => sum + o.used * o.width, 0)).toBeLessThanOrEqual(constructive);
    }
  });

  it("tells length, density, bound and the caller's seconds on the way", () => {
    const told: Record<string, number>[] = [];
    runRolls(pieces, [ROLL], OPTIONS, {
      elapsed: () => 12,
      onProgress: (_, words, figures) => {
        if (figures) told.push({ ...figures });
        expect(words).toMatch(/^nest \d+ of 80: [\d.]+ m, [\d.]+ % full, at least [\d.]+ m, 12 s$/);
      },
    });
    for (const f of told) {
      expect(f.length).toBeGreaterThanOrEqual(f.bound);
      expect(f.density).toBeLessThanOrEqual(1);
      expect(f.elapsed).toBe(12);
    }
    expect(told.length).toBeGreaterThan(40);
  });

  it("gives the same layout for the same seed, and never a worse one for more steps", () => {
    const run = (steps: number, seed = 1) => runRolls(pieces, [ROLL], { ...OPTIONS, gap: 7, steps, seed });
    expect(JSON.stringify(run(60))).toBe(JSON.stringify(run(60)));
    expect(run(200).output[0].used).toBeLessThanOrEqual(run(5).output[0].used + 1);
  });
});

/** Random stars and bent strips. */
const shape = fc.oneof(
  fc
    .record({
      n: fc.integer({ min: 3, max: 12 }),
      radii: fc.array(fc.double({ min: 80, max: 700, noNaN: true }), { minLength: 12, maxLength: 12 }),
    })
    .map(({ n, radii }) =>
      Array.from({ length: n }, (_, k) => [
        radii[k] * Math.cos((2 * Math.PI * k) / n),
        radii[k] * Math.sin((2 * Math.PI * k) / n),
      ]).flat(),
    ),
  fc
    .record({
      length: fc.double({ min: 800, max: 6000, noNaN: true }),
      width: fc.double({ min: 100, max: 900, noNaN: true }),
      bow: fc.double({ min: -0.1, max: 0.1, noNaN: true }),
      taper: fc.double({ min: 0.1, max: 1, noNaN: true }),
    })
    .map(({ length, width, bow, taper }) => {
      const at = (s: number, side: number) => [
        s * length,
        bow * length * 4 * s * (1 - s) + side * (width / 2) * (1 + (taper - 1) * s),
      ];
      const steps = Array.from({ length: 9 }, (_, k) => k / 8);
      return [...steps.flatMap((s) => at(s, -1)), ...steps.reverse().flatMap((s) => at(s, 1))];
    }),
);
const nests = fc.record({
  shapes: fc.array(shape, { minLength: 1, maxLength: 7 }),
  gap: fc.constantFrom(0, 3, 12),
  turn: fc.boolean(),
  seed: fc.integer({ min: 0, max: 1e6 }),
});

describe("random pieces", () => {
  it("never overlap, keep the gap, stay on the cloth, and beat no bound: brute-force judge", () => {
    let laid = 0;
    fc.assert(
      fc.property(nests, ({ shapes, gap, turn, seed }) => {
        const pieces = shapes.map((points, k) => piece(`p${k}`, points)).filter((p) => isSimpleRing(p.cut));
        const { output, findings, checks } = runRolls(pieces, [{ ...ROLL, selvedge: 40 }], {
          ...OPTIONS,
          steps: 8,
          gap,
          turn,
          seed,
        });
        judge(output, pieces, gap);
        // A selvedge off either side: 2000 − 2 · 40.
        for (const roll of output) expect(roll.usableWidth).toBe(1920);
        laid += output.reduce((sum, r) => sum + r.placements.length, 0);
        const fit = pieces.length - findings.length;
        expect(output.reduce((sum, r) => sum + r.placements.length, 0)).toBe(fit);
        for (const c of checks) if (!c.text.startsWith("every")) expect(c.holds, c.text).toBe(true);
      }),
      { seed: 20261201, numRuns: 60 },
    );
    expect(laid).toBeGreaterThan(150);
  });

  it("lie alike wherever their outlines were drawn", () => {
    fc.assert(
      fc.property(nests, fc.integer({ min: -9000, max: 9000 }), ({ shapes, gap }, shift) => {
        const whole = shapes.map((s) => s.map((v) => Math.round(v)));
        const pieces = whole.map((points, k) => piece(`p${k}`, points)).filter((p) => isSimpleRing(p.cut));
        const moved = pieces.map((p) => ({ ...p, cut: p.cut.map((v) => v + shift) }));
        const run = (list: NestPiece[]) => runRolls(list, [ROLL], { ...OPTIONS, steps: 4, gap }).output;
        const [a, b] = [run(pieces), run(moved)];
        a.forEach((roll, i) => {
          expect(b[i].used).toBeCloseTo(roll.used, 6);
          expect(b[i].placements.map((p) => [p.panel, p.rotation])).toEqual(
            roll.placements.map((p) => [p.panel, p.rotation]),
          );
        });
      }),
      { seed: 5, numRuns: 20 },
    );
  });
});
