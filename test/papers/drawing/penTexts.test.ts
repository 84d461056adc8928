import { expect, test } from "vitest";
import { intersectRings } from "../../../src/core/panels/outline/polygonBooleans.ts";
import { textLength } from "../../../src/core/papers/drawing/drawing.ts";
import { penTexts } from "../../../src/core/papers/drawing/penTexts.ts";
import { panelDrawing, rollDrawing } from "../../../src/core/papers/drawing/rollDrawing.ts";
import { stripPlace } from "../../../src/core/papers/drawing/stripPlace.ts";
import type { Vec2 } from "../../../src/core/records/facts.ts";
import { ringArea } from "../../../src/core/surface/ring.ts";
import { crowded } from "../made/crowdedFacts.ts";
import { sampleFacts } from "../made/sampleFacts.ts";

/** The box of a text as a ring, by the estimate the drawing's extents stand on. */
function ringOf(t: { at: Vec2; height: number; angle: number; text: string }): Float64Array<ArrayBuffer> {
  const a = (t.angle * Math.PI) / 180;
  const [u, v] = [textLength(t.text, t.height) / 2, t.height / 2];
  const corners = [
    [-u, -v],
    [u, -v],
    [u, v],
    [-u, v],
  ].map(([p, q]) => [t.at[0] + p! * Math.cos(a) - q! * Math.sin(a), t.at[1] + p! * Math.sin(a) + q! * Math.cos(a)]);
  return Float64Array.from(corners.flat());
}

const areaOf = (rings: Float64Array<ArrayBuffer>[]) => rings.reduce((s, r) => s + Math.abs(ringArea(r)), 0);

test("texts that grew lie on the cloth, over no other text, and most are read at arm's length", () => {
  let large = 0;
  let all = 0;
  for (const panel of [...sampleFacts().panels!, ...crowded().panels!]) {
    const given = panel.marks.filter((m) => m.at && m.text !== undefined);
    const texts = penTexts(panel);
    expect(texts.map((t) => t.text)).toEqual(given.map((m) => m.text));
    const cut = Float64Array.from(panel.cut.flat());
    const rings = texts.map(ringOf);
    texts.forEach((t, i) => {
      const before = given[i]!.height ?? 10;
      expect(t.height).toBeGreaterThanOrEqual(before);
      all++;
      if (t.height >= 20) large++;
      if (t.height === before) return;
      expect(areaOf(intersectRings([rings[i]!], [cut])), t.text).toBeCloseTo(areaOf([rings[i]!]), 0);
      rings.forEach((other, k) => {
        if (k !== i)
          expect(areaOf(intersectRings([rings[i]!], [other])), `${t.text} over ${texts[k]!.text}`).toBeLessThan(1);
      });
    });
  }
  expect(large / all).toBeGreaterThan(0.6);
});

test("a grown text crosses no line of the panel", () => {
  for (const panel of sampleFacts().panels!) {
    const drawing = panelDrawing(sampleFacts(), panel);
    const before = panel.marks.filter((m) => m.at && m.text !== undefined);
    penTexts(panel).forEach((t, i) => {
      if (t.height === (before[i]!.height ?? 10)) return;
      const a = (t.angle * Math.PI) / 180;
      const half = textLength(t.text, t.height) / 2;
      for (const s of drawing.strokes.filter((q) => q.layer === "mark")) {
        for (let k = 1; k < s.points.length; k++) {
          for (let f = 0; f <= 20; f++) {
            const [p, q] = [s.points[k - 1]!, s.points[k]!];
            const d = [p[0] + (f / 20) * (q[0] - p[0]) - t.at[0], p[1] + (f / 20) * (q[1] - p[1]) - t.at[1]] as const;
            const inside =
              Math.abs(d[0] * Math.cos(a) + d[1] * Math.sin(a)) < half &&
              Math.abs(-d[0] * Math.sin(a) + d[1] * Math.cos(a)) < t.height / 2;
            expect(inside, `${t.text} on a line`).toBe(false);
          }
        }
      }
    });
  }
});

test("pocket strips say from where to where they lie, their length, and which end is counted from", () => {
  const facts = sampleFacts({ stop: false });
  const strip = (n: number, length: number) => ({
    ...facts.pieces![0]!,
    id: `E1-strip-${n}`,
    kind: "strip" as const,
    for: "E1",
    cut: [
      [0, 0],
      [length, 0],
      [length, 200],
      [0, 200],
    ] as Vec2[],
  });
  facts.pieces = [strip(1, 1025.4), facts.pieces![0]!, strip(2, 1025.4), strip(3, 900)];
  // E1 begins at vertex 0, where anchor A1 stands.
  expect(stripPlace(facts, facts.pieces[3]!)).toEqual({ part: 3, parts: 3, from: 2050.8, to: 2950.8, start: "A1" });
  expect(stripPlace(facts, facts.pieces[1]!)).toBeNull();
  facts.rolls = [
    {
      ...facts.rolls![0]!,
      used: 2000,
      flaws: [],
      placements: [{ panel: "E1-strip-3", rotation: 180, x: 1000, y: 300 }],
    },
  ];
  const drawing = rollDrawing(facts, facts.rolls[0]!);
  const [name, lies] = drawing.labels.filter((l) => l.layer === "text");
  expect(name!.text).toBe("E1-strip-3");
  expect(lies!.text).toBe("<- A1 END: 2051 to 2951 mm, LENGTH 900 mm, PART 3 OF 3");
  // Turned round, the words still begin at the counting end, which now lies at x = 1000.
  expect([lies!.rotation, lies!.anchor]).toEqual([180, "start"]);
  expect(lies!.at[0]).toBeCloseTo(980, 6);
  expect(lies!.height).toBeGreaterThan(15);
  // The fold runs along the middle.
  const fold = drawing.strokes.find((s) => s.layer === "mark")!;
  expect(fold.points.map((p) => p[1])).toEqual([200, 200]);
});
