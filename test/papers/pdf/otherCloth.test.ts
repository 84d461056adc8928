import { describe, expect, test } from "vitest";
import { flowOtherCloth } from "../../../src/core/papers/pdf/cloth/otherCloth.ts";
import { flowPocketInPlace } from "../../../src/core/papers/pdf/cloth/pocketSection.ts";
import { closeBook, openBook } from "../../../src/core/papers/pdf/layout/book.ts";
import { openFlow } from "../../../src/core/papers/pdf/layout/table.ts";
import type { Facts, FactsPiece, Vec2 } from "../../../src/core/records/facts.ts";
import { fonts, missing, reason, textOf } from "../made/madePapers.ts";
import { sampleFacts } from "../made/sampleFacts.ts";

const rectangle = (length: number, width: number): Vec2[] => [
  [0, 0],
  [length, 0],
  [length, width],
  [0, width],
];

function withPieces(): Facts {
  const facts = sampleFacts({ stop: false });
  const piece = (id: string, kind: FactsPiece["kind"], at: string, cut: Vec2[]): FactsPiece => ({
    id,
    kind,
    for: at,
    fabric: "pvc-2",
    batch: "B07",
    cut,
  });
  facts.pieces = [
    ...[1, 2, 3].map((n) => piece(`E1-strip-${n}`, "strip", "E1", rectangle(1200, 190))),
    piece("E3-strip-1", "strip", "E3", rectangle(900, 190)),
    piece("A1-patch-P1", "patch", "A1", rectangle(400, 420)),
    piece("weld-test-1", "test", "pvc-2", rectangle(300, 450)),
  ];
  return facts;
}

async function sheet(facts: Facts): Promise<string> {
  const book = await openBook(facts, fonts, "panel cards", "cloth");
  flowOtherCloth(book);
  flowPocketInPlace(openFlow(book, "Section"));
  return textOf(await closeBook(book)).replace(/\s+/g, " ");
}

describe.skipIf(missing.length > 0)(`cloth that is no panel${reason}`, () => {
  test("parts of one strip take one row with their count, from where to where and the order; a patch its corner", async () => {
    const text = await sheet(withPieces());
    expect(text).toContain("E1-strip-1 to");
    expect(text).not.toContain("E1-strip-2");
    expect(text).toContain("0 to 3600 from A1, butted in");
    expect(text).toContain("0 to 900 from");
    expect(text).toContain("at C1 of P1");
    expect(text).toContain("for the weld trial, before the first");
    expect(text).toContain("Strip 190 mm wide, folded in the middle over the cable");
  });

  test("parts of a strip that lie on two rolls keep two rows, each with its own stretch of the edge", async () => {
    const facts = withPieces();
    facts.rolls![0]!.placements.push({ panel: "E1-strip-1", rotation: 0, x: 0, y: 0 });
    const text = await sheet(facts);
    expect(text).toContain("0 to 1200 from A1");
    expect(text).toContain("1200 to 3600 from A1, butted in");
  });

  test("without such cloth there is no sheet, without strips no section", async () => {
    const text = await sheet({ ...withPieces(), pieces: [] });
    expect(text).not.toContain("Patches");
    expect(text).not.toContain("folded");
  });
});
