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
  ["40 %", "% of its capacity", 40],
  ["3,125", "m", 3.125],
  ["0,125 mm", "mm", 0.125],
  // readings of a gauge
  ["12,5", "kN", 12.5],
  ["12.5 kN", "kN", 12.5],
  ["12.5 KN", "kN", 12.5],
  ["2500 N", "kN", 2.5],
  ["2 500 N", "kN", 2.5],
  ["250 daN", "kN", 2.5],
  // NIST SP 811, appendix B: 1 kgf = 9.80665 N, 1 lbf = 4.448 221 615 260 5 N, exactly
  ["1000 kgf", "kN", 9.80665],
  ["1000 lbf", "kN", 4.44822161526],
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
  ["1.200,5", "mm"],
  ["0x10", "mm"],
  ["250 kg", "kN"],
  ["2 t", "kN"],
  ["2 m", "kN"],
  ["2 mN", "kN"],
  ["2500 N", "kN/m"],
  ["59 F", "°C"],
  ["15 %", "°C"],
])("%s in a field of %s is none", (text, unit) => {
  expect(readEntry(text, unit)).toBeNull();
  expect(refuseEntry(text, unit)).toContain(text);
});

it("nothing is nothing", () => {
  expect(readEntry("  ", "mm")).toBeUndefined();
});

it.each([
  ["3,000", "mm", "3000 or 3.000 mm"],
  ["12.345 mm", "m", "12345 or 12.345 mm"],
  ["2,500 N", "kN", "2500 or 2.500 N"],
])("%s in a field of %s can be thousands or a fraction, and is not guessed", (text, unit, ways) => {
  expect(readEntry(text, unit)).toBeNull();
  expect(refuseEntry(text, unit)).toContain(ways);
});

it("a refusal names the units that are read", () => {
  expect(refuseEntry("250 kg", "kN")).toBe(
    "“250 kg” is no force: give it in kN, or with its unit behind it (N, daN, kN, kgf, lbf)",
  );
  expect(refuseEntry("x", "m")).toBe("“x” is no length: give it in m, or with its unit behind it (mm, cm, m, in, ft)");
  expect(refuseEntry("59 F", "°C")).toBe("“59 F” is no number in °C: type the number alone");
});
