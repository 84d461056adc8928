import { spawnSync } from "node:child_process";
import { mkdtempSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import DxfParser from "dxf-parser";
import { describe, expect, test } from "vitest";
import { writeDxfR12 } from "../../../src/core/papers/cutFiles/dxfR12.ts";
import { addLabelInPlace, addStrokeInPlace, emptyDrawing } from "../../../src/core/papers/drawing/drawing.ts";
import { rollDrawing } from "../../../src/core/papers/drawing/rollDrawing.ts";
import type { Vec2 } from "../../../src/core/records/facts.ts";
import { HOSTILE, sampleFacts } from "../made/sampleFacts.ts";
import { apart, entitiesOf, hasEzdxf, PYTHON, placedCuts, readTags } from "./readDxf.ts";

describe("a roll as DXF R12", () => {
  for (const [title, options] of [
    ["plain names", {}],
    ["hostile names", { names: HOSTILE }],
  ] as const) {
    const facts = sampleFacts(options);
    test(`${title}: dxf-parser finds every placed cut, closed, on CUT, within 0.01 mm, and no other cut`, () => {
      facts.rolls!.forEach((roll, r) => {
        const dxf = new DxfParser().parseSync(writeDxfR12(rollDrawing(facts, roll)))!;
        expect(dxf.header.$ACADVER).toBe("AC1009");
        const cuts = dxf.entities.filter((e) => e.layer === "CUT") as unknown as {
          type: string;
          shape: boolean;
          vertices: { x: number; y: number }[];
        }[];
        const wanted = placedCuts(facts, r);
        expect(cuts).toHaveLength(wanted.length);
        for (const cut of cuts) {
          expect(cut.type).toBe("POLYLINE");
          expect(cut.shape).toBe(true);
          const points = cut.vertices.map((v): Vec2 => [v.x, v.y]);
          expect(Math.min(...wanted.map((w) => apart(points, w)))).toBeLessThan(0.01);
        }
        for (const w of wanted) {
          expect(
            Math.min(
              ...cuts.map((c) =>
                apart(
                  c.vertices.map((v): Vec2 => [v.x, v.y]),
                  w,
                ),
              ),
            ),
          ).toBeLessThan(0.01);
        }
      });
    });

    test(`${title}: ASCII only, fixed decimals, no handle, no exponent, no doubled point, every layer declared`, () => {
      for (const roll of facts.rolls!) {
        const text = writeDxfR12(rollDrawing(facts, roll));
        expect(text).toMatch(/^[\x20-\x7e\r\n]*$/);
        const tags = readTags(text);
        const declared = tags.flatMap((t, i) =>
          t.value === "LAYER" && t.code === 0 && tags[i + 1]?.code === 2 ? [tags[i + 1]!.value] : [],
        );
        for (const t of tags) {
          expect(t.code).not.toBe(5);
          if (t.code >= 10 && t.code <= 59) expect(t.value).toMatch(/^-?\d+\.\d+$/);
          if (t.code === 8) expect(declared).toContain(t.value);
        }
        let last = "";
        for (const e of entitiesOf(tags)) {
          const at =
            e[0]!.value === "VERTEX"
              ? `${e.find((t) => t.code === 10)!.value} ${e.find((t) => t.code === 20)!.value}`
              : "";
          if (at !== "") expect(at).not.toBe(last);
          last = at;
        }
      }
    });
  }

  test("bed, marks and texts come before the first cut", () => {
    const facts = sampleFacts();
    const layers = entitiesOf(readTags(writeDxfR12(rollDrawing(facts, facts.rolls![0]!))))
      .map((e) => e.find((t) => t.code === 8)?.value)
      .filter((l) => l !== undefined);
    const order = ["BED-DO-NOT-CUT", "MARK-PEN", "TEXT-PEN", "CUT"].map(
      (l) => [layers.indexOf(l), layers.lastIndexOf(l)] as const,
    );
    for (let i = 1; i < order.length; i++) expect(order[i]![0]).toBeGreaterThan(order[i - 1]![1]);
  });

  test("a bar 1000 mm long, the unit in words, and the stamp while a stop is open", () => {
    for (const stop of [true, false]) {
      const facts = sampleFacts({ stop });
      const dxf = new DxfParser().parseSync(writeDxfR12(rollDrawing(facts, facts.rolls![1]!)))!;
      const bed = dxf.entities.filter((e) => e.layer === "BED-DO-NOT-CUT") as unknown as {
        text?: string;
        vertices?: { x: number }[];
      }[];
      const lengths = bed
        .filter((e) => e.vertices)
        .map((e) => Math.max(...e.vertices!.map((v) => v.x)) - Math.min(...e.vertices!.map((v) => v.x)));
      expect(lengths.some((l) => Math.abs(l - 1000) < 1e-9)).toBe(true);
      const words = bed.map((e) => e.text ?? "").join("\n");
      expect(words).toContain("UNITS MM");
      expect(words.includes("NOT FOR ISSUE")).toBe(stop);
    }
  });

  test("no line is drawn twice", () => {
    const facts = sampleFacts();
    const drawing = rollDrawing(facts, facts.rolls![0]!);
    const seen = new Set<string>();
    for (const s of drawing.strokes.filter((q) => q.layer !== "bed")) {
      s.points.forEach((p, i) => {
        const q = s.points[i + 1] ?? (s.closed ? s.points[0] : undefined);
        if (!q) return;
        const key = [p.join(), q.join()].sort().join(" ");
        expect(seen.has(key), key).toBe(false);
        seen.add(key);
      });
    }
    // The free side has no allowance: its fold line is its cut line and must be the one that was left out.
    expect(seen.size).toBeGreaterThan(100);
  });

  test("text beyond ASCII is written as code points, commands of the text language are broken up", () => {
    const drawing = emptyDrawing("t");
    for (const text of ["Ø→", "%%c^J", "a\u0000b\nc", "😀", "Ø".repeat(60)]) {
      addLabelInPlace(drawing, { layer: "text", at: [0, 0], height: 10, rotation: 0, anchor: "start", text });
    }
    const texts = readTags(writeDxfR12(drawing))
      .filter((t) => t.code === 1)
      .map((t) => t.value);
    expect(texts.slice(1)).toEqual(["\\U+00D8\\U+2192", "% %c^ J", "a b c", "?", "\\U+00D8".repeat(35)]);
  });

  test("a point that is not finite and an outline without area are refused by name", () => {
    const drawing = emptyDrawing("Roll R9");
    expect(() =>
      addStrokeInPlace(drawing, {
        layer: "cut",
        points: [
          [0, 0],
          [1, Number.NaN],
          [1, 1],
        ],
        closed: true,
      }),
    ).toThrow(/Roll R9.*finite/);
    expect(() =>
      addStrokeInPlace(drawing, {
        layer: "cut",
        points: [
          [0, 0],
          [0.0001, 0],
          [1, 1],
        ],
        closed: true,
      }),
    ).toThrow(/2 distinct points/);
  });

  const audit = hasEzdxf ? "" : " (skipped: this Python has no ezdxf)";
  test.skipIf(!hasEzdxf)(`ezdxf reads it as R12, audits without error, and reads the names back${audit}`, () => {
    const facts = sampleFacts({ names: HOSTILE });
    const folder = mkdtempSync(join(tmpdir(), "papers-"));
    const file = join(folder, "roll.dxf");
    writeFileSync(file, writeDxfR12(rollDrawing(facts, facts.rolls![0]!)));
    const script = [
      "import sys, ezdxf, json",
      "from ezdxf.lldxf.encoding import decode_dxf_unicode",
      "d = ezdxf.readfile(sys.argv[1]); a = d.audit(); m = d.modelspace()",
      "cut = [e for e in m if e.dxf.layer == 'CUT']",
      "print(json.dumps({'version': d.dxfversion, 'errors': len(a.errors), 'fixes': len(a.fixes), 'closed': [e.is_closed for e in cut],",
      "  'texts': [decode_dxf_unicode(e.dxf.text) for e in m if e.dxftype() == 'TEXT']}))",
    ].join("\n");
    const run = spawnSync(PYTHON, ["-c", script, file], { encoding: "utf8" });
    expect(run.stderr).toBe("");
    const seen = JSON.parse(run.stdout);
    expect({ ...seen, texts: undefined }).toEqual({ version: "AC1009", errors: 0, fixes: 0, closed: [true, true] });
    expect(seen.texts).toContain(HOSTILE.P1);
    expect(seen.texts).toContain(HOSTILE.P3);
  });
});
