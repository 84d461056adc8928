import { describe, expect, test } from "vitest";
import { buildRandom, drawInteger } from "../../../src/core/numeric/random.ts";
import { numberCell, writeCsv } from "../../../src/core/papers/tables/csv.ts";
import { plainText } from "../../../src/core/papers/words/plainText.ts";
import { listCells } from "../../../src/core/plan/listCells.ts";
import { readCsv } from "./readCsv.ts";

describe("writeCsv", () => {
  test("quotes, commas, breaks and formulas come back safe; numbers stay numbers", () => {
    const text = writeCsv(
      ["a", "b"],
      [
        ['say "so", he said', "=SUM(A1)"],
        ["+1", "-1"],
        ["@x", "line\r\nbreak"],
        [numberCell(-1.5, 2), numberCell(-0.0001, 2)],
        [null, "\t=1"],
      ],
    );
    expect(readCsv(text)).toEqual([
      ["a", "b"],
      ['say "so", he said', "'=SUM(A1)"],
      ["'+1", "'-1"],
      ["'@x", "line break"],
      ["-1.50", "0.00"],
      ["", "'=1"],
    ]);
  });

  test("a number that is not finite is refused", () => {
    expect(() => writeCsv(["a"], [[numberCell(Number.NaN, 1)]])).toThrow(/finite/);
  });
});

describe("a list shown on the page", () => {
  test("has the cells that were written, 500 random tables", () => {
    const parts = ["P1", ",", '"', " ", "=SUM(A1)", "-", "+2", "@x", "é", "0.5", ""];
    const random = buildRandom(5);
    const cell = () =>
      Array.from({ length: drawInteger(random, 4) }, () => parts[drawInteger(random, parts.length)]).join("");
    for (let k = 0; k < 500; k++) {
      const head = ["id", "name", "note"];
      const rows = Array.from({ length: drawInteger(random, 4) }, () => [cell(), cell(), cell()]);
      const shown = listCells(new TextEncoder().encode(writeCsv(head, rows)), "list.csv");
      expect(shown).toEqual([head, ...rows.map((row) => row.map(plainText))]);
    }
  });
});
