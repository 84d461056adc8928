// Entries as people type them: the number, in the unit of the field.
import { expect, it } from "vitest";
import { readEntry, refuseEntry } from "../../src/page/parts/readEntry.ts";

it.each([
  ["3000", "mm", 3000],
  ["3 000", "mm", 3000],
  ["3\u202f000 mm", "mm", 3000],
  ["3.2 m", "mm", 3200],
  ["3,2m", "mm", 3200],
  ["320 cm", "mm", 3200],
  // NIST SP 811, appendix B: 1 ft = 0.3048 m and 1 in = 25.4 mm, exactly
  ["3 ft", "mm", 914.4],
  ["118 in", "mm", 2997.2],
  ["3 ft", "m", 0.9144],
  ["60000 mm", "m", 60],
  ["-5", "mm", -5],
  ["−5 mm", "mm", -5],
  ["1e3", "mm", 1000],
  ["2 kN/m", "kN/m", 2],
  ["1.5 %", "%", 1.5],
  ["20 °C", "°C", 20],
])("%s in a field of %s is %d", (text, unit, value) => {
  expect(readEntry(text, unit)).toBe(value);
});

it.each([
  ["wide", "mm"],
  ["3 kg", "mm"],
  ["3 4", "mm"],
  ["1 2345", "mm"],
  ["2 m", "kN/m"],
  ["2 kN", "kN/m"],
  ["3 ft 2 in", "mm"],
  ["1,200.5", "mm"],
  ["1e999", "mm"],
  // no unit, though every record has it
  ["3 constructor", "mm"],
])("%s in a field of %s is none", (text, unit) => {
  expect(readEntry(text, unit)).toBeNull();
  expect(refuseEntry(text, unit)).toContain(text);
});

it("nothing is nothing", () => {
  expect(readEntry("  ", "mm")).toBeUndefined();
});
