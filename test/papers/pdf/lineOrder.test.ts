// Names from right to left on sheets: a number in them must be read as it was typed, and be no other panel's.
import fontkit from "@pdf-lib/fontkit";
import fc from "fast-check";
import { PDFDocument } from "pdf-lib";
import { describe, expect, test } from "vitest";
import { lineAdvance, lineGlyphs, tellNames } from "../../../src/core/papers/pdf/layout/glyphs.ts";
import { lineRuns } from "../../../src/core/papers/pdf/layout/lineOrder.ts";
import { drawText } from "../../../src/core/papers/pdf/layout/pen.ts";
import { rasterOf } from "../made/ink.ts";
import { fonts, MM, missing, reason } from "../made/madePapers.ts";

/** As the eye meets it from left to right. */
function seen(line: string, names: readonly string[] = []): string {
  return lineRuns(line, names)
    .map(({ text, turned }) => (turned ? [...text].reverse().join("") : text))
    .join("");
}

/** Capitals stand for letters that run from right to left, as the examples of the standard have it. */
const hebrew = (text: string) =>
  text.replace(/[A-Z]/g, (c) => String.fromCodePoint(0x5d0 + c.charCodeAt(0) - "A".charCodeAt(0)));

describe("a line from left to right", () => {
  test.each([
    // UAX #9, Unicode Bidirectional Algorithm, examples to rule L2; from memory.
    ["car means CAR.", "car means RAC."],
    ["car is THE CAR in arabic", "car is RAC EHT in arabic"],
    // Own, by its rules N0 to N2 and W1 to W7: a number keeps its digits, brackets turn with their run.
    ["CAR 12", "12 RAC"],
    ["p1 CAR", "p1 RAC"],
    ["CAR (ROOF) x", "(FOOR) RAC x"],
    ["plain 12 (a) only", "plain 12 (a) only"],
  ])("%s is seen as %s", (line, wanted) => {
    expect(seen(hebrew(line))).toBe(hebrew(wanted));
  });

  test("a number after a name is not drawn into it, names in a list keep their order", () => {
    const names = ["CAR 12", "CAR 13", "CAR"].map(hebrew);
    expect(seen(hebrew("CAR 12 3400 mm"), names)).toBe(hebrew("12 RAC 3400 mm"));
    expect(seen(hebrew("at CAR 12, CAR 13, CAR"), names)).toBe(hebrew("at 12 RAC, 13 RAC, RAC"));
    // Without the names nobody could know where the one ends.
    expect(seen(hebrew("CAR 12 3400 mm"))).toBe(hebrew("3400 12 RAC mm"));
  });

  test("whatever the line, every letter stands in it once", () => {
    const letter = fc.constantFrom(..."aB1 2(-.,)אבשم٤5/é");
    fc.assert(
      fc.property(
        fc.array(letter, { maxLength: 30 }),
        fc.array(letter, { minLength: 1, maxLength: 3 }),
        (line, name) => {
          const open = (text: string) => text.replaceAll(")", "(");
          const sorted = (text: string) => [...open(text)].sort().join("");
          expect(sorted(seen(line.join(""), [name.join("")]))).toBe(sorted(line.join("")));
        },
      ),
      { seed: 5, numRuns: 500 },
    );
  });
});

async function faceOf() {
  const doc = await PDFDocument.create({ updateMetadata: false });
  doc.registerFontkit(fontkit);
  const font = await doc.embedFont(fonts.regular, { subset: true, features: { liga: false, kern: false } });
  return { doc, font };
}

test("letter by letter a line has the glyphs and the length that the face lays out as a whole", async () => {
  const { font } = await faceOf();
  const range = (from: number, to: number) =>
    Array.from({ length: to - from + 1 }, (_, k) => String.fromCodePoint(from + k)).filter((c) =>
      /[^\p{M}\p{C}]/u.test(c),
    );
  const letters = [...range(0x20, 0x7e), ...range(0xa0, 0x24f), ...range(0x384, 0x3ff), ...range(0x400, 0x481)].filter(
    (c) => font.getCharacterSet().includes(c.codePointAt(0)!),
  );
  fc.assert(
    fc.property(fc.array(fc.constantFrom(...letters, ..."–…→≤±·°⁻"), { minLength: 1, maxLength: 40 }), (line) => {
      const text = line.join("");
      expect(lineGlyphs(text, font)).toBe(font.encodeText(text).asString());
      expect(lineAdvance(text, font)).toBeCloseTo(font.widthOfTextAtSize(text, 1), 6);
    }),
    { seed: 3, numRuns: 400 },
  );
});

describe.skipIf(missing.length > 0)(`sheets as another program draws them${reason}`, () => {
  test("a name from right to left looks as when each part of it is set by hand at its place", async () => {
    const { doc, font } = await faceOf();
    tellNames(font, ["לוח 12", "قماش"]);
    const lines: [string, string[]][] = [
      // Number first, then the word from its last letter to its first.
      ["לוח 12", ["1", "2", " ", "ח", "ו", "ל"]],
      ["לוח 12 3400 mm", ["1", "2", " ", "ח", "ו", "ל", " ", "3400 mm"]],
      // Joined letters are one part: their shapes are the face's.
      ["A قماش 7", ["A ", "قماش", " 7"]],
    ];
    for (const [line, parts] of lines) {
      const [ours, hand] = [doc.addPage([300, 40]), doc.addPage([300, 40])];
      drawText(ours, line, { x: 5, y: 5, size: 16, font });
      let x = 5 * MM;
      for (const part of parts) {
        hand.drawText(part, { x, y: 5 * MM, size: 16, font });
        x += font.widthOfTextAtSize(part, 16);
      }
      expect(lineAdvance(line, font) * 16).toBeCloseTo(x - 5 * MM, 6);
    }
    const pages = rasterOf(await doc.save());
    for (let k = 0; k < pages.length; k += 2) {
      const [a, b] = [pages[k]!.grey, pages[k + 1]!.grey];
      expect(a.filter((v) => v < 128).length, lines[k / 2]![0]).toBeGreaterThan(100);
      expect(a.filter((v, i) => Math.abs(v - b[i]!) > 60).length, lines[k / 2]![0]).toBe(0);
    }
  });
});
