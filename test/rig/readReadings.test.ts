import { expect, test } from "vitest";
import { measureVibrationForce, readingColumns, readReadings } from "../../src/core/rig/correct/readReadings.ts";

const head = readingColumns.join(",");

test("a force, a frequency with its span and mass, a place: one each", () => {
  const text = `${head}\r\n08:10,AB,T1,41.2,,,,12,,,\r\n08:15,AB,stay-1,,3.9528,20,4,,,,\r\n08:20,CD,corner-sw,,,,,,-5.001,-4.002,2.6\r\n`;
  const [a, b, c] = readReadings(text);
  expect(a).toEqual({
    row: 2,
    time: "08:10",
    by: "AB",
    id: "T1",
    temperature: 12,
    force: 41.2,
    vibration: null,
    at: null,
  });
  expect(b.vibration).toEqual({ frequency: 3.9528, length: 20, mass: 4 });
  expect(c.at).toEqual([-5.001, -4.002, 2.6]);
});

test("columns in any order, quotes, semicolons with decimal commas", () => {
  expect(readReadings('id,by,force_kN\nT1,"A, B",4')[0]).toMatchObject({ id: "T1", by: "A, B", force: 4 });
  expect(readReadings("id;force_kN\nT1;4,25")[0].force).toBe(4.25);
});

test("what is wrong is said with its row", () => {
  expect(() => readReadings("id,kN\nT1,4")).toThrow(/row 1.*"kN".*force_kN/);
  expect(() => readReadings(`${head}\n`)).toThrow(/no reading/);
  expect(() => readReadings("id,force_kN\nT1,four")).toThrow(/row 2.*force_kN is "four"/);
  expect(() => readReadings("id,force_kN\nT1,-4")).toThrow(/row 2.*0 or more/);
  expect(() => readReadings("id,force_kN\n,4")).toThrow(/row 2.*the id is missing/);
  expect(() => readReadings("id,force_kN,x,y,z\nT1,4,1,2,3")).toThrow(/row 2 \(T1\).*more than one/);
  expect(() => readReadings("id,x,y,z\nT1,1,2,")).toThrow(/row 2 \(T1\)/);
  expect(() => readReadings("id,frequency_Hz,free_length_m\nT1,3,12")).toThrow(/T1.*without its mass/);
  expect(() => readReadings("id,force_kN\nT1,4,5")).toThrow(/row 2: 3 cells/);
});

test("taut string, closed form T = 4 m L² f²: 20, 50 and 100 kN", () => {
  for (const [frequency, length, mass, kN] of [
    [7.043, 12, 0.7, 20],
    [6.6667, 15, 1.25, 50],
    [3.9528, 20, 4, 100],
  ])
    expect(measureVibrationForce({ frequency, length, mass }) / kN).toBeCloseTo(1, 4);
});
