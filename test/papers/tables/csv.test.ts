import { describe, expect, test } from "vitest";
import { numberCell, writeCsv } from "../../../src/core/papers/tables/csv.ts";
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
