import fontkit from "@pdf-lib/fontkit";
import { PDFDocument } from "pdf-lib";
import { expect, test } from "vitest";
import { textWidth, wrapText } from "../../../src/core/papers/pdf/layout/pen.ts";
import { fonts } from "../made/madePapers.ts";

test("a number keeps its unit and a sign its number at whatever width a line ends; words are parted as before", async () => {
  const doc = await PDFDocument.create();
  doc.registerFontkit(fontkit);
  const font = await doc.embedFont(fonts.regular, { subset: true });
  const text =
    "rule is 10 °C (50 °F), off by 25 % (rms) in a panel, 45 kN to 1.2 kN/m, south 24.00 ± 0.00 kN, 8.5 m long in 3 masts";
  const bound = ["10 °C", "50 °F", "25 %", "45 kN", "1.2 kN/m", "± 0.00 kN", "8.5 m"];
  for (let width = 30; width < 120; width += 3) {
    const lines = wrapText(text, font, 9, width);
    for (const line of lines) expect(textWidth(line, font, 9)).toBeLessThanOrEqual(width);
    const plain = lines.map((l) => l.replaceAll("\u00a0", " "));
    expect(plain.join(" ")).toBe(text);
    for (const b of bound) expect(plain.some((l) => l.includes(b))).toBe(true);
  }
  // "3 masts" is no quantity in metres.
  expect(wrapText("in 3 masts", font, 9, textWidth("in 3 ", font, 9))).toEqual(
    ["in 3", "masts"].flatMap((w) => wrapText(w, font, 9, textWidth("in 3 ", font, 9))),
  );
});
