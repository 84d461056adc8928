import { spawnSync } from "node:child_process";
import { mkdtempSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import DxfParser from "dxf-parser";
import { describe, expect, test } from "vitest";
import { writeDxf2000 } from "../../../src/core/papers/cutFiles/dxf2000.ts";
import { rollDrawing } from "../../../src/core/papers/drawing/rollDrawing.ts";
import type { Vec2 } from "../../../src/core/records/facts.ts";
import { HOSTILE, sampleFacts } from "../made/sampleFacts.ts";
import { apart, entitiesOf, hasEzdxf, PYTHON, placedCuts, readTags } from "./readDxf.ts";

const facts = sampleFacts({ names: HOSTILE });
const files = facts.rolls!.map((roll) => writeDxf2000(rollDrawing(facts, roll)));

describe("a roll as DXF 2000", () => {
  test("dxf-parser finds every placed cut, closed, on CUT, within 0.01 mm, in millimetres", () => {
    files.forEach((text, r) => {
      const dxf = new DxfParser().parseSync(text)!;
      expect(dxf.header).toMatchObject({ $ACADVER: "AC1015", $INSUNITS: 4 });
      const cuts = dxf.entities.filter((e) => e.layer === "CUT") as unknown as {
        type: string;
        shape: boolean;
        vertices: { x: number; y: number }[];
      }[];
      const wanted = placedCuts(facts, r);
      expect(cuts).toHaveLength(wanted.length);
      for (const w of wanted) {
        const off = cuts.map((c) => {
          expect([c.type, c.shape]).toEqual(["LWPOLYLINE", true]);
          return apart(
            c.vertices.map((v): Vec2 => [v.x, v.y]),
            w,
          );
        });
        expect(Math.min(...off)).toBeLessThan(0.01);
      }
    });
  });

  test("every handle is given once, lies below $HANDSEED, and every owner exists; layers are declared", () => {
    for (const text of files) {
      expect(text).toMatch(/^[\x20-\x7e\r\n]*$/);
      const tags = readTags(text);
      const seedAt = tags.findIndex((t) => t.value === "$HANDSEED");
      const seed = Number.parseInt(tags[seedAt + 1]!.value, 16);
      const handles = tags.filter((t, i) => (t.code === 5 && i !== seedAt + 1) || t.code === 105).map((t) => t.value);
      expect(new Set(handles).size).toBe(handles.length);
      for (const h of handles) expect(Number.parseInt(h, 16)).toBeLessThan(seed);
      for (const t of tags) if (t.code === 330 && t.value !== "0") expect(handles).toContain(t.value);
      const declared = tags.flatMap((t, i) =>
        t.code === 100 && t.value === "AcDbLayerTableRecord" ? [tags[i + 1]!.value] : [],
      );
      for (const t of tags) if (t.code === 8) expect(declared).toContain(t.value);
      for (const e of entitiesOf(tags).filter((q) => q[0]!.value === "LWPOLYLINE")) {
        const points = e.filter((t) => t.code === 10).length;
        expect(Number(e.find((t) => t.code === 90)!.value)).toBe(points);
      }
    }
  });

  const audit = hasEzdxf ? "" : " (skipped: this Python has no ezdxf)";
  test.skipIf(!hasEzdxf)(`ezdxf reads it, audits without error or fix, and reads names and unit back${audit}`, () => {
    const file = join(mkdtempSync(join(tmpdir(), "papers-")), "roll.dxf");
    writeFileSync(file, files[0]!);
    const script = [
      "import sys, ezdxf, json",
      "from ezdxf.lldxf.encoding import decode_dxf_unicode",
      "d = ezdxf.readfile(sys.argv[1]); a = d.audit(); m = d.modelspace()",
      "cut = [e for e in m if e.dxf.layer == 'CUT']",
      "print(json.dumps({'version': d.dxfversion, 'units': d.units, 'errors': len(a.errors), 'fixes': len(a.fixes),",
      "  'closed': [e.closed for e in cut], 'texts': [decode_dxf_unicode(e.dxf.text) for e in m if e.dxftype() == 'TEXT']}))",
    ].join("\n");
    const run = spawnSync(PYTHON, ["-c", script, file], { encoding: "utf8" });
    expect(run.stderr).toBe("");
    const { texts, ...seen } = JSON.parse(run.stdout);
    expect(seen).toEqual({ version: "AC1015", units: 4, errors: 0, fixes: 0, closed: [true, true] });
    expect(texts).toContain(HOSTILE.P1);
  });
});
