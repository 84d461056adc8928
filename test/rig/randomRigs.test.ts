import { expect, test } from "vitest";
import { runRig } from "../../src/core/rig/runRig.ts";
import { makeRandomRig } from "./randomRigs.ts";

const seeds = Array.from({ length: 30 }, (_, i) => i + 1);

test("thirty random rigs: every state at rest, no limit passed, targets held, and the order no worse than the plain ways", () => {
  let ranked = 0;
  let strongMasts = 0;
  const kinds = new Map<string, number>();
  for (const seed of seeds) {
    const { input, kind, corners } = makeRandomRig(seed);
    kinds.set(kind, (kinds.get(kind) ?? 0) + 1);
    const { output, findings, checks } = runRig(input, {});
    const name = `rig ${seed}, ${corners} corners, ${kind}`;
    const rest = checks.find((c) => c.text.includes("come to rest"));
    expect(rest?.holds, name).toBe(true);
    expect(
      findings.filter((f) => f.level === "stop").map((f) => f.text),
      name,
    ).toEqual([]);
    for (const c of checks)
      if (c.text.includes("before moves are rounded") || c.text.includes("out-of-balance"))
        expect(c.holds, `${name}: ${c.text}`).toBe(true);
    const off = checks.find((c) => c.text.includes("as a hand sets them"));
    // a sixth of a turn is a millimetre here: where that is coarse, it is said
    expect(off?.holds || findings.some((f) => f.code === "turnbuckle-coarse"), name).toBe(true);
    for (const m of output.tensioning?.stages.flatMap((s) => s.moves) ?? [])
      expect(m.greatest.share, name).toBeLessThanOrEqual(1);
    const ways = output.tensioning?.ways;
    if (!ways) continue;
    ranked++;
    const [chosen, clockwise, byForce] = ways;
    expect(ways.map((w) => w.way)).toEqual(["chosen", "clockwise", "by-force"]);
    for (const plain of [clockwise, byForce]) {
      expect(chosen.peak.share, `${name} peak against ${plain.way}`).toBeLessThanOrEqual(plain.peak.share);
      expect(chosen.visits, `${name} visits against ${plain.way}`).toBeLessThanOrEqual(plain.visits);
    }
    expect(chosen.steps, name).toBeLessThanOrEqual(clockwise.steps);
    if (kind === "mast-ends") strongMasts++;
  }
  expect(Object.fromEntries(kinds)).toEqual({ corners: 20, "cable-ends": 5, mast: 2, "mast-ends": 3 });
  expect(ranked).toBe(8);
  expect(strongMasts).toBe(3);
}, 300_000);
