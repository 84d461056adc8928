// Names in letters that the face of the sheets has not: found before any paper is written, so that the papers, the facts and the page
// tell it alike.
import type { PDFFont } from "pdf-lib";
import type { Finding } from "../../problem.ts";
import type { Facts } from "../../records/facts.ts";
import { namesOf } from "../words/names.ts";
import { type FontFiles, openBook } from "./layout/book.ts";
import { lettersMissing } from "./layout/glyphs.ts";

/** What the sheets cannot show of the names: said once, with the names it concerns. */
function lettersNote(facts: Facts, font: PDFFont): Finding[] {
  const where = namesOf(facts).filter((name) => lettersMissing(name, font).length > 0);
  if (where.length === 0) return [];
  return [
    {
      code: "papers-letters",
      level: "note",
      station: "papers",
      where,
      value: where.length,
      limit: null,
      text: "Names hold letters that the face of the sheets has not: each stands as ? on the sheets. Cut files and lists hold the names as typed (DXF: ? for letters beyond U+FFFF).",
      remedy:
        "Give names in letters the face has (Latin, Greek, Cyrillic, Hebrew, Arabic and others), so that no two look alike.",
      basis: "own argument",
    },
  ];
}

/** The note on letters, or nothing: none is missing, or the facts tell it already. */
export async function tellLetters(facts: Facts, fonts: FontFiles): Promise<Finding[]> {
  if (facts.findings.some((f) => f.code === "papers-letters")) return [];
  const { regular } = await openBook(facts, fonts, "findings", "findings");
  return lettersNote(facts, regular);
}
