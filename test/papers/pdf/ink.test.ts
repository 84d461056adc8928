import { PDFDocument, rgb } from "pdf-lib";
import { describe, expect, test } from "vitest";
import { unseenLetters } from "../made/ink.ts";
import { missing, papersOf, reason, type Word, wordsOf } from "../made/madePapers.ts";
import { HOSTILE, sampleFacts } from "../made/sampleFacts.ts";
import { withRig } from "../made/sampleRig.ts";

/** Words as they stand in the text, without the names of characters in it. */
function plainWords(bytes: Uint8Array): Word[] {
  const named: Record<string, string> = { "&amp;": "&", "&lt;": "<", "&gt;": ">", "&quot;": '"', "&apos;": "'" };
  return wordsOf(bytes).words.map((w) => ({
    ...w,
    text: w.text.replace(/&(?:amp|lt|gt|quot|apos);/g, (m) => named[m]!).replaceAll("\u00a0", " "),
  }));
}

describe.skipIf(missing.length > 0)(`ink of all papers of a job${reason}`, () => {
  test("every letter that the text holds is to be seen on the rendered sheet, on every sheet of every paper", {
    timeout: 240_000,
  }, async () => {
    for (const facts of [
      withRig(sampleFacts()),
      withRig(sampleFacts({ names: HOSTILE, sheet: "Letter", units: "imperial" }), { names: HOSTILE, issuable: true }),
    ]) {
      let letters = 0;
      for (const [path, bytes] of await papersOf(facts)) {
        if (!path.endsWith(".pdf")) continue;
        const words = plainWords(bytes);
        letters += words.reduce((s, w) => s + w.text.length, 0);
        expect(await unseenLetters(bytes, words), path).toEqual([]);
      }
      expect(letters).toBeGreaterThan(20_000);
    }
  });

  test("a letter hidden under white, and one that the text has but the sheet not, are found", async () => {
    const facts = sampleFacts();
    const bytes = (await papersOf(facts)).get("index.pdf")!;
    const words = plainWords(bytes);
    const word = words.find((w) => w.text === "findings.pdf")!;
    const doc = await PDFDocument.load(bytes, { updateMetadata: false });
    const page = doc.getPage(0);
    const MM = 72 / 25.4;
    const width = (word.x1 - word.x0) / word.text.length;
    page.drawRectangle({
      x: (word.x0 + 2 * width) * MM,
      y: page.getHeight() - word.y1 * MM,
      width: width * MM,
      height: (word.y1 - word.y0) * MM,
      color: rgb(1, 1, 1),
    });
    const unseen = await unseenLetters(await doc.save(), words);
    expect(unseen.length).toBeGreaterThan(0);
    for (const u of unseen) expect(u).toContain('of "findings.pdf"');
  });
});
