import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { feetAndInches, paperUnits, unitsInText } from "../../../src/core/papers/words/paperUnits.ts";
import { sampleFacts } from "../made/sampleFacts.ts";

const us = paperUnits(sampleFacts({ units: "imperial" }).job);
const si = paperUnits(sampleFacts().job);

describe("imperial measures against NIST SP 811 (2008), B.8", () => {
  // "To convert from … to …, multiply by": the factors as printed there, inverted; from memory, seven figures.
  test.each([
    ["kip to kN 4.448222", us.force, 100 * 4.448222, "100.00"],
    ["lbf/ft to N/m 14.59390", us.lineForce, (1000 * 14.5939) / 1000, "1000"],
    ["lb to kg 0.4535924", us.mass, 1000 * 0.4535924, "1000.0"],
    ["ft² to m² 0.09290304", us.area, 1000 * 0.09290304, "1000.0"],
    ["lbf·ft to N·m 1.355818", us.torque, (1000 * 1.355818) / 1000, "1000"],
    ["mph to m/s 0.44704", us.speed, 50 * 0.44704, "50"],
    ["in to mm 25.4", us.travel, 10 * 25.4, "10.00"],
    ["in to mm 25.4, finely", us.fine, 2.54, "0.100"],
    ["ft and in to mm on flat cloth", us.flat, 3 * 304.8 + 4.5 * 25.4, `3' 4 1/2"`],
    ["°F to °C (t − 32)/1.8", us.temperature, (59 - 32) / 1.8, "59"],
    ["ft to m 0.3048", us.span, 10 * 0.3048, `10' 0"`],
  ] as const)("%s", (_, measure, value, text) => {
    expect(measure.of(value).replaceAll("\u00a0", " ")).toBe(text);
  });
});

describe("feet and inches", () => {
  test.each([
    [0, `0"`],
    [1.5875, `1/16"`],
    [25.4, `1"`],
    [304.8, `1' 0"`],
    [304.7, `1' 0"`],
    [1014, `3' 3 15/16"`],
    [-50.8, `-2"`],
    [-0.1, `0"`],
  ])("%f mm is %s", (mm, text) => {
    expect(feetAndInches(mm).replaceAll("\u00a0", " ")).toBe(text);
  });

  test("read back, a length is off by no more than half a sixteenth", () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 60000, noNaN: true }), (mm) => {
        const [, feet, rest] = /^(?:(\d+)' )?(.*)"$/.exec(feetAndInches(mm).replaceAll("\u00a0", " "))!;
        const inches = rest!.split(" ").reduce((sum, part) => {
          const [a, b] = part.split("/").map(Number);
          return sum + (b === undefined ? a! : a! / b);
        }, 0);
        expect(inches).toBeLessThan(12);
        expect(Math.abs((12 * Number(feet ?? 0) + inches) * 25.4 - mm)).toBeLessThanOrEqual(25.4 / 32 + 1e-9);
      }),
      { seed: 7, numRuns: 300 },
    );
  });
});

test("metric pins are given to half a millimetre, as an eye takes them off a tape", () => {
  expect(si.pins.of(1.01141)).toBe("1011.5");
  expect(si.pins.of(1.00011)).toBe("1000.0");
});

describe("sentences of the stations on imperial sheets", () => {
  const { job } = sampleFacts({ units: "imperial" });
  const said = (text: string) => unitsInText(job, text).replaceAll("\u00a0", " ");
  // Factors as above; lb/ft² to kg/m² 4.882428.
  test.each([
    ["differ by 3.2 mm in the flat", "differ by 3.2 mm [0.126 in] in the flat"],
    ["150 to 400 mm at a plate", "150 to 400 mm [5.91 to 15.7 in] at a plate"],
    ["parts of 1025 x 200 mm", "parts of 1025 x 200 mm [40.35 x 7.87 in]"],
    ["stress 2.00 kN/m; 0.3 kN/m is usual", "stress 2.00 kN/m [137 lbf/ft]; 0.3 kN/m [20.6 lbf/ft] is usual"],
    ["62.0 kN of 100 kN", "62.0 kN [13.9 kip] of 100 kN [22.5 kip]"],
    ["at 15 °C, below 10 degC", "at 15 °C [59 °F], below 10 degC [50 °F]"],
    ["area 38.2 m², 1.05 kg/m2, 12 m/s", "area 38.2 m² [411 ft²], 1.05 kg/m2 [0.215 lb/ft²], 12 m/s [26.8 mph]"],
    ["curved 0.0100 to 0.0200 1/m²", "curved 0.0100 to 0.0200 1/m² [0.000929 to 0.00186 1/ft²]"],
    ["3 metres, M24, P3 mm2, 5 %", "3 metres, M24, P3 mm2, 5 %"],
  ])("%s", (text, wanted) => {
    expect(said(text)).toBe(wanted);
    expect(unitsInText(sampleFacts().job, text)).toBe(text);
  });
});
