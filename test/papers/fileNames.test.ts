import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { fileNames } from "../../src/core/papers/fileNames.ts";

describe("fileNames", () => {
  test("plain ids keep their name; the rest is made plain and unique ignoring case", () => {
    expect(fileNames(["R1", "r1", "../R1", "Ø/é", "", "CON", "nul.txt", "R1-2", "..", "a\u0000b"])).toEqual([
      "R1",
      "r1-3",
      "R1-4",
      "e",
      "unnamed",
      "CON_",
      "nul_txt_",
      "R1-2",
      "unnamed-2",
      "a_b",
    ]);
  });

  test("any ids: safe characters, unique ignoring case, plain unique names untouched", () => {
    fc.assert(
      fc.property(
        fc.array(fc.oneof(fc.string({ unit: "binary" }), fc.constantFrom("R1", "r1", "con", "..", "R/1"))),
        (ids) => {
          const names = fileNames(ids);
          expect(names).toHaveLength(ids.length);
          expect(new Set(names.map((n) => n.toLowerCase())).size).toBe(names.length);
          for (const n of names) {
            expect(n).toMatch(/^[A-Za-z0-9][A-Za-z0-9._-]*$/);
            expect(n.length).toBeLessThanOrEqual(70);
            expect(n).not.toMatch(/^(con|nul|aux|prn|com\d|lpt\d)(\.|$)/i);
          }
        },
      ),
      { seed: 7 },
    );
  });
});
