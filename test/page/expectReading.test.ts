// What a reading says against the schedule, where it is held against a window, a limit, or nothing but what is expected.
import { expect, it } from "vitest";
import { judgeReading } from "../../src/page/leaves/site/expectReading.ts";

const open = { planned: 2.4, low: null, high: null, limit: null };
const held = { planned: 2.4, low: 2, high: 3, limit: 5 };

it.each([
  [held, 1.9, /^low by 0\.1 kN/],
  [held, 2.5, /^inside the window/],
  [held, 3.5, /^high by 0\.5 kN/],
  [held, 2500, /^above the limit by 2.?495.?0 kN: stop/],
  // typed without its unit, where there is neither window nor limit to tell
  [open, 2500, /ten times what is expected.*give its unit/],
  [{ ...open, planned: 0 }, 1, null],
  [open, 20, null],
])("%o, read %d", (expected, kN, words) => {
  const said = judgeReading(expected, kN)?.words ?? null;
  if (words === null) expect(said).toBeNull();
  else expect(said).toMatch(words);
});
