import { describe, expect, test } from "vitest";
import { writeSvg } from "../../../src/core/papers/cutFiles/svg.ts";
import { extents } from "../../../src/core/papers/drawing/drawing.ts";
import { rollDrawing } from "../../../src/core/papers/drawing/rollDrawing.ts";
import { HOSTILE, sampleFacts } from "../made/sampleFacts.ts";

const MARGIN = 20;

/** Groups of the file with their paths and texts; entities resolved. Throws on anything that is not well nested. */
function readSvg(text: string) {
  const open: string[] = [];
  const groups = new Map<string, { paths: { points: [number, number][]; closed: boolean }[]; texts: string[] }>();
  let group = "";
  for (const m of text.matchAll(/<(\/?)([a-z?]+)([^>]*?)(\/?)>([^<]*)/g)) {
    const [, end, name, attributes, empty, content] = m as unknown as string[];
    if (name === "?xml") continue;
    if (end) {
      if (open.pop() !== name) throw new Error(`</${name}> closes nothing`);
      continue;
    }
    if (!empty) open.push(name!);
    if (name === "g") {
      group = /id="([^"]*)"/.exec(attributes!)![1]!;
      groups.set(group, { paths: [], texts: [] });
    }
    if (name === "path") {
      const d = /d="([^"]*)"/.exec(attributes!)![1]!;
      const points = [...d.matchAll(/(-?[\d.]+) (-?[\d.]+)/g)].map((p): [number, number] => [
        Number(p[1]),
        Number(p[2]),
      ]);
      groups.get(group)!.paths.push({ points, closed: d.endsWith("Z") });
    }
    if (name === "text") {
      groups.get(group)!.texts.push(content!.replace(/&#(\d+);/g, (_, c) => String.fromCharCode(Number(c))));
    }
  }
  if (open.length > 0) throw new Error(`<${open.at(-1)}> stays open`);
  return groups;
}

describe("a roll as SVG", () => {
  test("width and height are mm and the viewBox holds the same numbers", () => {
    const facts = sampleFacts();
    const text = writeSvg(rollDrawing(facts, facts.rolls![0]!));
    const m = /width="([\d.]+)mm" height="([\d.]+)mm" viewBox="0 0 ([\d.]+) ([\d.]+)"/.exec(text)!;
    expect(m[1]).toBe(m[3]);
    expect(m[2]).toBe(m[4]);
    const { min, max } = extents(rollDrawing(facts, facts.rolls![0]!));
    expect(Number(m[1])).toBeCloseTo(max[0] - min[0] + 2 * MARGIN, 3);
    expect(Number(m[2])).toBeCloseTo(max[1] - min[1] + 2 * MARGIN, 3);
  });

  test("hostile names: every cut comes back closed and true, y flipped, and every name as it was typed", () => {
    const facts = sampleFacts({ names: HOSTILE });
    facts.rolls!.forEach((roll) => {
      const drawing = rollDrawing(facts, roll);
      const { min, max } = extents(drawing);
      const groups = readSvg(writeSvg(drawing));
      expect([...groups.keys()]).toEqual(["BED-DO-NOT-CUT", "MARK-PEN", "TEXT-PEN", "CUT"]);
      const cuts = groups.get("CUT")!.paths;
      const wanted = drawing.strokes.filter((s) => s.layer === "cut");
      expect(cuts).toHaveLength(roll.placements.length);
      cuts.forEach((cut, i) => {
        expect(cut.closed).toBe(true);
        expect(cut.points).toHaveLength(wanted[i]!.points.length);
        cut.points.forEach(([x, y], k) => {
          const [wx, wy] = wanted[i]!.points[k]!;
          expect(Math.abs(x + min[0] - MARGIN - wx)).toBeLessThan(0.002);
          expect(Math.abs(max[1] + MARGIN - y - wy)).toBeLessThan(0.002);
        });
      });
      for (const p of roll.placements.filter((q) => q.panel !== "C1")) {
        expect(groups.get("TEXT-PEN")!.texts).toContain(p.panel);
      }
    });
  });
});
