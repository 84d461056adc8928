// Outlines against shapes worked by hand, and properties on random panels.
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { buildRandom, drawInteger, type Random } from "../../../src/core/numeric/random.ts";
import { FAIRING_MM, offsetOutline } from "../../../src/core/panels/outline/offsetOutline.ts";
import { outlinePanel } from "../../../src/core/panels/outline/outlinePanel.ts";
import type { PanelPlace } from "../../../src/core/panels/outline/panelPlace.ts";
import { subtractRings, unionPositive } from "../../../src/core/panels/outline/polygonBooleans.ts";
import { PlanError } from "../../../src/core/problem.ts";
import type { FlatPanel, PanelSide, Ring } from "../../../src/core/records/flatPanel.ts";
import type { Allowances } from "../../../src/core/records/job.ts";
import {
  isSimpleRing,
  pointSegmentSquared,
  ringArea,
  ringBox,
  ringDistance,
  ringHolds,
} from "../../../src/core/surface/ring.ts";
import { simplifyRing } from "../../../src/core/surface/simplifyRing.ts";
import { type Part, panelFrom } from "../panelFrom.ts";

const ALLOW: Allowances = { seam: 40, seamOn: "both", pocket: 60, pocketStrip: false, cover: 0, clamp: 50, hem: 30 };

const NOWHERE: PanelPlace = { seams: [], anchors: [] };
const close = (ring: Ring) => Array.from({ length: ring.length / 2 }, (_, i) => [ring[2 * i], ring[2 * i + 1]]);

/** Same corners, in any order of start. */
function expectCorners(ring: Ring, want: [number, number][]): void {
  const got = close(ring);
  expect(got.length).toBe(want.length);
  for (const w of want) {
    const near = Math.min(...got.map((g) => Math.hypot(g[0] - w[0], g[1] - w[1])));
    expect(near, `corner ${w} missing in ${JSON.stringify(got)}`).toBeLessThan(0.01);
  }
}

const OBLONG: Part[] = [
  { kind: "seam", id: "S1", points: [[0, 0]] },
  { kind: "cable", id: "E1", points: [[4000, 0]] },
  { kind: "seam", id: "S2", points: [[4000, 1500]] },
  { kind: "clamped", id: "E2", points: [[0, 1500]] },
];

describe("cut outline by hand", () => {
  it("moves each side of a rectangle by its own allowance", () => {
    const { output, findings, checks } = outlinePanel(panelFrom(OBLONG), NOWHERE, ALLOW);
    expectCorners(output.cut, [
      [50, -20],
      [4060, -20],
      [4060, 1520],
      [50, 1520],
    ]);
    expect(output.outlines.map((o) => o.allowance)).toEqual([20, 60, 20, -50]);
    expect(output.size.length).toBeCloseTo(4010, 6);
    expect(output.size.width).toBeCloseTo(1540, 6);
    expect(output.area.net).toBeCloseTo(6, 9);
    expect(output.area.cut).toBeCloseTo(4.01 * 1.54, 9);
    expect(findings).toEqual([]);
    expect(checks.every((c) => c.holds)).toBe(true);
  });

  it("tells where each side lies in the net outline, counter-clockwise over the start", () => {
    const { output } = outlinePanel(panelFrom(OBLONG), NOWHERE, ALLOW);
    expect(output.outlines.map((o) => [o.netFrom, o.netTo])).toEqual([
      [0, 1],
      [1, 2],
      [2, 3],
      [3, 0],
    ]);
    expect(ringArea(output.net)).toBeGreaterThan(0);
  });

  it("puts a one-sided lap on the lower panel only", () => {
    const seams = [
      { id: "S1", vertices: [0, 1], strips: ["P1", "P2"] as [string, string], upper: "P1" },
      { id: "S2", vertices: [2, 3], strips: ["P0", "P1"] as [string, string], upper: "P0" },
    ];
    const { output } = outlinePanel(panelFrom(OBLONG), { seams, anchors: [] }, { ...ALLOW, seamOn: "one" });
    expect(output.outlines.map((o) => o.allowance)).toEqual([0, 60, 40, -50]);
    const box = ringBox(output.cut);
    expect(box.y0).toBeCloseTo(0, 9);
    expect(box.y1).toBeCloseTo(1540, 9);
  });

  it("narrows a pocket at an acute corner so that it folds inside: 60 degrees, worked by hand", () => {
    // Fold line y = 0 from 0 to 3000; left side leans at 60 degrees inward, right side square.
    const t = Math.tan(Math.PI / 3);
    const panel = panelFrom([
      { kind: "cable", id: "E1", points: [[0, 0]] },
      { kind: "seam", id: "S1", points: [[3000, 0]] },
      { kind: "seam", id: "S2", points: [[3000, 1000]] },
      { kind: "seam", id: "S3", points: [[1000 / t, 1000]] },
    ]);
    const { output } = outlinePanel(panel, NOWHERE, { ...ALLOW, seam: 0 });
    expectCorners(output.cut, [
      [0, 0],
      [60 / t, -60],
      [3000, -60],
      [3000, 1000],
      [1000 / t, 1000],
    ]);
  });

  it("cuts a long tip square", () => {
    const panel = panelFrom([
      { kind: "seam", id: "S1", points: [[0, 0]] },
      { kind: "seam", id: "S2", points: [[5000, 0]] },
      { kind: "seam", id: "S3", points: [[5000, 500]] },
    ]);
    const { output } = outlinePanel(panel, NOWHERE, ALLOW);
    expect(isSimpleRing(output.cut)).toBe(true);
    expect(ringBox(output.cut).x0).toBeGreaterThan(-2.6 * 20);
    expect(output.cut.length / 2).toBe(4);
  });

  it("keeps the cloth a stated distance from an anchor", () => {
    const place: PanelPlace = { seams: [], anchors: [{ id: "A1", vertex: 1, cutBack: 300 }] };
    const { output } = outlinePanel(panelFrom(OBLONG), place, ALLOW);
    const near = ringDistance(output.cut, 4000, 0);
    expect(near).toBeGreaterThan(299.9);
    expect(near).toBeLessThan(300.3);
    expect(ringHolds(output.cut, 4000, 0)).toBe(false);
  });

  it("goes round a single closed side", () => {
    const n = 64;
    const points = Array.from({ length: n }, (_, k): [number, number] => [
      2000 * Math.cos((2 * Math.PI * k) / n),
      2000 * Math.sin((2 * Math.PI * k) / n),
    ]);
    const { output } = outlinePanel(panelFrom([{ kind: "free", id: "E1", points }]), NOWHERE, ALLOW);
    const apothem = 2000 * Math.cos(Math.PI / n) + 30;
    for (let k = 0; k < n; k++) {
      const a = (2 * Math.PI * (k + 0.5)) / n;
      expect(ringDistance(output.cut, apothem * Math.cos(a), apothem * Math.sin(a))).toBeLessThan(FAIRING_MM + 1e-6);
    }
    expect(output.outlines[0]).toEqual({ netFrom: 0, netTo: 0, allowance: 30 });
  });

  it("steps where two sides run on in one line with different allowances", () => {
    const panel = panelFrom([
      { kind: "free", id: "E1", points: [[0, 0]] },
      { kind: "cable", id: "E2", points: [[1000, 0]] },
      { kind: "seam", id: "S1", points: [[2000, 0]] },
      { kind: "seam", id: "S2", points: [[2000, 800]] },
      { kind: "seam", id: "S3", points: [[0, 800]] },
    ]);
    const { output, checks } = outlinePanel(panel, NOWHERE, ALLOW);
    expect(isSimpleRing(output.cut)).toBe(true);
    expect(checks.every((c) => c.holds)).toBe(true);
    expect(output.area.cut * 1e6).toBeCloseTo(2040 * 820 + 1020 * 30 + 1020 * 60, 3);
  });

  it("makes the pocket of a side that is too short to fold it a separate strip, and a hem there narrower", () => {
    const short = (kind: "cable" | "free") =>
      outlinePanel(
        panelFrom([
          { kind: "clamped", id: "E1", points: [[0, 0]] },
          { kind, id: "E2", points: [[5000, 400]] },
          { kind: "clamped", id: "E3", points: [[5000, 600]] },
          { kind: "seam", id: "S1", points: [[0, 1000]] },
        ]),
        NOWHERE,
        { ...ALLOW, clamp: 0, pocket: 100, hem: 100 },
      );
    const pocket = short("cable");
    expect(pocket.findings.map((f) => [f.code, f.level, f.value])).toEqual([["flap-short", "note", 200]]);
    expect(pocket.output.outlines[1].allowance).toBe(0);
    expect(ringBox(pocket.output.cut).x1).toBeCloseTo(5000, 6);
    const hem = short("free");
    expect(hem.checks.every((c) => c.holds)).toBe(true);
    const { allowance } = hem.output.outlines[1];
    // A point in the middle is 100 mm from either end, and at 30 % of the side 60 mm: no hem of 100 mm folds there.
    expect(allowance).toBeGreaterThan(40);
    expect(allowance).toBeLessThan(60);
    expect(ringBox(hem.output.cut).x1).toBeCloseTo(5000 + allowance, 6);
  });

  it("refuses open, clockwise and swallowed outlines by name", () => {
    const open = panelFrom(OBLONG);
    open.sides[1].vertices = [1, 3];
    expect(() => outlinePanel(open, NOWHERE, ALLOW)).toThrow(/E1.*P1.*open/);
    const turned = panelFrom(
      [...OBLONG].map((p) => ({ ...p, points: p.points.map(([x, y]): [number, number] => [x, -y]) })),
    );
    expect(() => outlinePanel(turned, NOWHERE, ALLOW)).toThrow(/P1 runs clockwise/);
    const clamps = panelFrom(OBLONG.map((p) => ({ ...p, kind: "clamped" as const })));
    expect(() => outlinePanel(clamps, NOWHERE, { ...ALLOW, clamp: 800 })).toThrow(/leave no cloth of panel P1/);
    expect(() => outlinePanel(panelFrom(OBLONG), NOWHERE, { ...ALLOW, seamOn: "one" })).toThrow(/S1/);
  });
});

/** A strip with curved long sides and slanted ends, from seeded numbers. */
const strips = fc
  .record({
    length: fc.double({ min: 1500, max: 20_000, noNaN: true }),
    width: fc.double({ min: 500, max: 2500, noNaN: true }),
    bow: fc.tuple(fc.double({ min: -0.06, max: 0.06, noNaN: true }), fc.double({ min: -0.06, max: 0.06, noNaN: true })),
    slant: fc.tuple(fc.double({ min: -0.8, max: 0.8, noNaN: true }), fc.double({ min: -0.8, max: 0.8, noNaN: true })),
    kinds: fc.array(fc.constantFrom("seam", "cable", "clamped", "free"), { minLength: 4, maxLength: 4 }),
    n: fc.integer({ min: 3, max: 60 }),
  })
  .map(({ length, width, bow, slant, kinds, n }) => {
    const at = (s: number, top: number): [number, number] => {
      const x = s * length + (top - 0.5) * width * (slant[0] * (1 - s) + slant[1] * s);
      return [x, top * width + 4 * s * (1 - s) * bow[top] * length * 0.5];
    };
    const run = (f: (t: number) => [number, number]) => Array.from({ length: n }, (_, k) => f(k / n));
    const kind = (k: number) => kinds[k] as PanelSide["kind"];
    return [
      { kind: kind(0), id: "a", points: run((t) => at(t, 0)) },
      { kind: kind(1), id: "b", points: [at(1, 0)] },
      { kind: kind(2), id: "c", points: run((t) => at(1 - t, 1)) },
      { kind: kind(3), id: "d", points: [at(0, 1)] },
    ] as Part[];
  });

describe("cut outline, random panels", () => {
  it("is simple, counter-clockwise and at its allowance beside the middle of every side", () => {
    fc.assert(
      fc.property(strips, (parts) => {
        const panel = panelFrom(parts);
        fc.pre(isSimpleRing(panel.flat) && ringArea(panel.flat) > 1e5);
        const { output } = outlinePanel(panel, NOWHERE, ALLOW);
        expect(isSimpleRing(output.cut)).toBe(true);
        expect(ringArea(output.cut)).toBeGreaterThan(0);
        output.sides.forEach((side, k) => {
          const want = output.outlines[k].allowance;
          if (want < 0 || side.lengthFlat < 900) return;
          const off: number[] = [];
          const line = side.vertices.map((v) => [panel.flat[2 * v], panel.flat[2 * v + 1]]);
          for (let i = 1; i < line.length; i++)
            for (let t = 0.05; t < 1; t += 0.1)
              off.push(
                ringDistance(
                  output.cut,
                  line[i - 1][0] + t * (line[i][0] - line[i - 1][0]),
                  line[i - 1][1] + t * (line[i][1] - line[i - 1][1]),
                ),
              );
          off.sort((a, b) => a - b);
          expect(Math.abs(off[off.length >> 1] - want)).toBeLessThan(1);
        });
      }),
      { seed: 20261201, numRuns: 300 },
    );
  });

  it("folds every pocket back inside the cut outline where its fold line is straight", () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.5, max: 2.6, noNaN: true }),
        fc.double({ min: 0.5, max: 2.6, noNaN: true }),
        fc.constantFrom("seam", "clamped", "cable"),
        (left, right, kind) => {
          const H = 400;
          const panel = panelFrom([
            { kind: "cable", id: "E1", points: [[0, 0]] },
            { kind: kind as PanelSide["kind"], id: "r", points: [[4000, 0]] },
            { kind: "seam", id: "t", points: [[4000 - H / Math.tan(right), H]] },
            { kind: kind as PanelSide["kind"], id: "l", points: [[H / Math.tan(left), H]] },
          ]);
          const { output } = outlinePanel(panel, NOWHERE, ALLOW);
          for (let i = 0; i < output.cut.length; i += 2) {
            const [x, y] = [output.cut[i], output.cut[i + 1]];
            if (y >= -1e-6) continue;
            const inside = ringHolds(output.cut, x, -y) || ringDistance(output.cut, x, -y) < 0.1;
            expect(inside, `flap point ${x}, ${y} folds outside`).toBe(true);
          }
        },
      ),
      { seed: 7, numRuns: 200 },
    );
  });

  it("does not depend on where the sheet lies or how it is turned", () => {
    const base = outlinePanel(panelFrom(OBLONG), NOWHERE, ALLOW).output;
    const c = Math.cos(0.4);
    const s = Math.sin(0.4);
    const moved = panelFrom(
      OBLONG.map((p) => ({
        ...p,
        points: p.points.map(([x, y]): [number, number] => [c * x - s * y + 31_000, s * x + c * y - 5000]),
      })),
    );
    const other = outlinePanel(moved, NOWHERE, ALLOW).output;
    expect(other.area.cut).toBeCloseTo(base.area.cut, 6);
    expect(other.cut.length).toBe(base.cut.length);
  });
});

/** Panels no office would draw: stars with bowed sides of any kind, small against their allowances too. */
function wildPanel(random: Random): { panel: FlatPanel; allow: Allowances; cutBack: number } | null {
  const m = 3 + drawInteger(random, 5);
  const size = 10 ** (2 + 2 * random());
  const corners = Array.from({ length: m }, (_, k): [number, number] => {
    const r = size * (0.15 + 0.85 * random());
    return [r * Math.cos((2 * Math.PI * k) / m), r * Math.sin((2 * Math.PI * k) / m)];
  });
  const parts = corners.map((a, k): Part => {
    const b = corners[(k + 1) % m];
    const n = 1 + drawInteger(random, 6);
    const bow = (random() - 0.5) * 0.3;
    const kind = (["seam", "cable", "clamped", "free"] as const)[drawInteger(random, 4)];
    const points = Array.from({ length: n }, (_, i): [number, number] => {
      const s = i / n;
      const w = 4 * s * (1 - s) * bow;
      return [a[0] + s * (b[0] - a[0]) - w * (b[1] - a[1]), a[1] + s * (b[1] - a[1]) + w * (b[0] - a[0])];
    });
    return { kind, id: `s${k}`, points };
  });
  const allow = {
    ...ALLOW,
    seam: 10 + 60 * random(),
    pocket: 20 + 100 * random(),
    clamp: 100 * random(),
    hem: 60 * random(),
  };
  const cutBack = random() < 0.5 ? 200 * random() : 0;
  const panel = panelFrom(parts);
  return isSimpleRing(panel.flat) && ringArea(panel.flat) > 0 ? { panel, allow, cutBack } : null;
}

describe("cut outline, wild panels", () => {
  it("is simple and holds its marks, or is refused by name: 3000 of them", () => {
    const random = buildRandom(4);
    let cut = 0;
    let empty = 0;
    for (let t = 0; t < 3000; t++) {
      const wild = wildPanel(random);
      if (!wild) continue;
      const place = { seams: [], anchors: [{ id: "A", vertex: 0, cutBack: wild.cutBack }] };
      try {
        const { output } = outlinePanel(wild.panel, place, wild.allow);
        cut++;
        expect(isSimpleRing(output.cut) && ringArea(output.cut) > 0, `panel ${t}`).toBe(true);
        for (const mark of output.marks)
          for (const q of mark.points ?? [])
            expect(ringHolds(output.cut, ...q) || ringDistance(output.cut, ...q) < 0.1, `${mark.kind} of ${t}`).toBe(
              true,
            );
      } catch (error) {
        if (!(error instanceof PlanError)) throw error;
        expect(error.code).toBe("outline-empty");
        empty++;
      }
    }
    expect(cut).toBeGreaterThan(2500);
    expect(empty).toBeGreaterThan(0);
  });

  it("frees a clamped line where the flap of its neighbour lies against it in a hollow corner", () => {
    const { output, checks } = outlinePanel(
      panelFrom([
        { kind: "clamped", id: "E1", points: [[0, 0]] },
        { kind: "cable", id: "E2", points: [[2000, 0]] },
        { kind: "seam", id: "S1", points: [[3000, -1000]] },
        { kind: "seam", id: "S2", points: [[4000, 2000]] },
        { kind: "clamped", id: "E3", points: [[0, 2000]] },
      ]),
      NOWHERE,
      { ...ALLOW, clamp: 0, pocket: 100 },
    );
    expect(checks.every((c) => c.holds)).toBe(true);
    expect(isSimpleRing(output.cut)).toBe(true);
    // By hand: the flap reaches back over the clamped line to x = 2000 - 100·√2; its line is free all the way to the corner.
    for (let x = 1700; x < 1999; x += 10) expect(ringDistance(output.cut, x, 0), `at ${x}`).toBeLessThan(1e-6);
    expect(ringHolds(output.cut, 1990, -20)).toBe(true);
    expect(ringHolds(output.cut, 1950, -5)).toBe(false);
  });

  it("ends a set-back at its own corner where the next side runs nearly straight on", () => {
    const turn = 0.25;
    const far: [number, number] = [2000 + 2000 * Math.cos(turn), 2000 * Math.sin(turn)];
    const panel = panelFrom([
      { kind: "clamped", id: "E1", points: [[0, 0]] },
      { kind: "seam", id: "S1", points: [[2000, 0]] },
      { kind: "seam", id: "S2", points: [far] },
      { kind: "seam", id: "S3", points: [[0, 3000]] },
    ]);
    const { output, checks } = outlinePanel(panel, NOWHERE, ALLOW);
    expect(checks.every((c) => c.holds)).toBe(true);
    // The seam keeps its allowance right from the corner: 20 mm outside, 60 mm along.
    const [x, y] = [2000 + 60 * Math.cos(turn) + 19 * Math.sin(turn), 60 * Math.sin(turn) - 19 * Math.cos(turn)];
    expect(ringHolds(output.cut, x, y)).toBe(true);
    expect(ringHolds(output.cut, 1900, 45)).toBe(false);
  });
});

describe("booleans and rings", () => {
  it("drop loops that are turned inside out, and take rings away", () => {
    const loops = unionPositive([Float64Array.from([0, 0, 10, 0, 10, 10, 4, -2, 0, 10])]);
    expect(loops.reduce((sum, r) => sum + ringArea(r), 0)).toBeCloseTo(25 + 50 / 3, 2);
    const [rest] = subtractRings(
      [Float64Array.from([0, 0, 10, 0, 10, 10, 0, 10])],
      [Float64Array.from([-1, -1, 1, -1, 1, 1, -1, 1])],
    );
    expect(ringArea(rest)).toBeCloseTo(99, 9);
    expect(() => unionPositive([Float64Array.from([0, 0, 70_000, 0, 0, 10])])).toThrow(/67108/);
  });

  it("agree with the other boolean library on random star differences", async () => {
    const other = await import("clipper2-ts");
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 200, max: 1000 }), { minLength: 10, maxLength: 24 }), (radii) => {
        const star = (turn: number, cx: number) =>
          Float64Array.from(
            radii.flatMap((r, k) => {
              const a = turn + (2 * Math.PI * k) / radii.length;
              return [Math.round(cx + r * Math.cos(a)), Math.round(r * Math.sin(a))];
            }),
          );
        const [a, b] = [star(0, 0), star(0.3, 300)];
        const mine = subtractRings([a], [b]).reduce((sum, r) => sum + ringArea(r), 0);
        const path = (r: Ring) => close(r).map(([x, y]) => ({ x: 1000 * x, y: 1000 * y }));
        const theirs = other.difference([path(a)], [path(b)], other.FillRule.NonZero);
        // Crossings are rounded to 1 µm along some 10 m of line: 10 mm2 at the very most, 2 in practice.
        expect(Math.abs(mine - other.areaPaths(theirs) / 1e6)).toBeLessThan(2);
      }),
      { seed: 3, numRuns: 100 },
    );
  });

  it("simplify stays within its distance and keeps corners", () => {
    const ring = Float64Array.from(
      Array.from({ length: 400 }, (_, k) => [1000 * Math.cos(k / 63.7), 800 * Math.sin(k / 63.7)]).flat(),
    );
    const fair = simplifyRing(ring, 0.5);
    expect(fair.length).toBeLessThan(ring.length / 2);
    for (let i = 0; i < ring.length; i += 2) expect(ringDistance(fair, ring[i], ring[i + 1])).toBeLessThan(0.5 + 1e-9);
  });

  it("simple means simple: against brute force on random rings", () => {
    const brute = (r: Ring) => {
      const n = r.length / 2;
      for (let i = 0; i < n; i++)
        for (let j = i + 2; j < n; j++) {
          if (i === 0 && j === n - 1) continue;
          const p = (k: number): [number, number] => [r[2 * (k % n)], r[2 * (k % n) + 1]];
          const [a, b, c, d] = [p(i), p(i + 1), p(j), p(j + 1)];
          const s = (o: [number, number], u: [number, number], v: [number, number]) =>
            Math.sign((u[0] - o[0]) * (v[1] - o[1]) - (u[1] - o[1]) * (v[0] - o[0]));
          if (s(a, b, c) * s(a, b, d) < 0 && s(c, d, a) * s(c, d, b) < 0) return false;
          for (const [q, e, f] of [
            [a, c, d],
            [b, c, d],
            [c, a, b],
            [d, a, b],
          ] as [[number, number], [number, number], [number, number]][])
            if (pointSegmentSquared(q[0], q[1], e[0], e[1], f) === 0) return false;
        }
      return true;
    };
    let simple = 0;
    fc.assert(
      fc.property(
        fc.array(
          fc.tuple(fc.double({ min: 0.1, max: 100, noNaN: true }), fc.double({ min: 0.1, max: 100, noNaN: true })),
          {
            minLength: 4,
            maxLength: 7,
          },
        ),
        (points) => {
          const ring = Float64Array.from(points.flat());
          const is = isSimpleRing(ring);
          if (is) simple++;
          expect(is).toBe(brute(ring));
        },
      ),
      { seed: 11, numRuns: 1000 },
    );
    expect(simple).toBeGreaterThan(20);
  });

  it("an offset whose loops turn inside out comes back simple", () => {
    const zigzag: number[] = [];
    for (let k = 0; k <= 20; k++) zigzag.push(k * 40, k % 2 === 0 ? 0 : 90);
    const net = Float64Array.from([...zigzag, 800, 900, 0, 900]);
    const ring = offsetOutline(net, [
      { from: 0, to: 20, distance: 30, fold: false },
      { from: 20, to: 0, distance: -40, fold: false },
    ]);
    expect(isSimpleRing(ring)).toBe(true);
    expect(ringHolds(ring, 400, 500)).toBe(true);
  });
});
