import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { readJson } from "../../src/core/job/readJson.ts";
import { PlanError } from "../../src/core/problem.ts";

function failure(text: string): PlanError {
  try {
    readJson(text);
  } catch (error) {
    if (error instanceof PlanError) return error;
    throw error;
  }
  throw new Error(`accepted: ${text.slice(0, 80)}`);
}

describe("reading JSON", () => {
  it.each([
    ['{\n  "a": 1,\n  "b": 2,\n}', 4, 1],
    ['{ "a": 1 "b": 2 }', 1, 10],
    ['{ "a" 1 }', 1, 7],
    ["{ a: 1 }", 1, 3],
    ["[1, 2", 1, 6],
    ["[1, NaN]", 1, 5],
    ["[01]", 1, 3],
    ["[1.]", 1, 3],
    ["", 1, 1],
    ['{"a": "x\ny"}', 1, 9],
    ['{"a": "C:\\work"}', 1, 10],
    ['{"a": "never closed', 1, 20],
    ["{} {}", 1, 4],
    ["[tru]", 1, 2],
    ["// no\n{}", 1, 1],
  ])("places the error of %j at line %i, column %i", (text, line, column) => {
    const error = failure(text);
    expect(error.code).toBe("job-json");
    expect(error.facts).toEqual({ line, column });
    expect(error.message).toContain(`line ${line}, column ${column}`);
  });

  it("stops at 200 levels instead of running out of stack", () => {
    expect(failure("[".repeat(100_000)).message).toContain("200 levels");
  });

  it("notes keys given twice, with their path, once each", () => {
    const { value, findings } = readJson(
      '{"a": {"b": 1, "b": 2, "b": 3}, "rolls": [{}, {"id": "x", "id": "y"}], "a\\u0062": 1, "ab": 2}',
    );
    expect(value).toEqual({ a: { b: 3 }, rolls: [{}, { id: "y" }], ab: 2 });
    expect(findings.map((f) => [f.code, f.where])).toEqual([
      ["job-key-twice", "a.b"],
      ["job-key-twice", "rolls[1].id"],
      ["job-key-twice", "ab"],
    ]);
  });

  it("takes a byte order mark off", () => {
    expect(readJson("\uFEFF{}").value).toEqual({});
  });

  it("accepts exactly what JSON.parse accepts (seed 7)", () => {
    // Sound JSON, then the same with one character replaced or taken out.
    const mutated = fc.tuple(
      fc.json({ maxDepth: 4 }),
      fc.nat(),
      fc.constantFrom("", '"', ",", "}", "\\", "1", "e", " ", "\t"),
    );
    fc.assert(
      fc.property(mutated, ([text, at, c]) => {
        const i = at % (text.length + 1);
        for (const t of [text, text.slice(0, i) + c + text.slice(i + 1)]) {
          let parsed: { value: unknown } | null = null;
          try {
            parsed = { value: JSON.parse(t) };
          } catch {
            expect(failure(t).code).toBe("job-json");
          }
          if (parsed !== null) expect(readJson(t).value).toEqual(parsed.value);
        }
      }),
      { seed: 7, numRuns: 1000 },
    );
  });
});
