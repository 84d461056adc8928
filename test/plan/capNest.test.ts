import { expect, it } from "vitest";
import { capNest } from "../../src/core/plan/capNest.ts";

it("lets the nesting run its seconds from its own first step, and stops nothing else", () => {
  let clock = 0;
  const cap = capNest(2, () => clock);
  cap.onStation("panels");
  clock = 10_000;
  expect(cap.cancelled()).toBe(false);
  cap.onStation("rolls");
  clock = 20_000;
  expect(cap.cancelled()).toBe(false);
  clock = 21_999;
  expect(cap.cancelled()).toBe(false);
  clock = 22_001;
  expect(cap.cancelled()).toBe(true);
});

it("never stops a job without the cap", () => {
  let clock = 0;
  const cap = capNest(null, () => clock);
  cap.onStation("rolls");
  cap.cancelled();
  clock = 1e9;
  expect(cap.cancelled()).toBe(false);
});
