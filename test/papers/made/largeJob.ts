// A large roof with everything a job can have on paper: panels, rolls, a rig of many adjusters, findings and checks of every panel, and
// every name of sixty letters.
import type { Facts } from "../../../src/core/records/facts.ts";
import { longName, manyPanels } from "./manyPanels.ts";
import { withRig } from "./sampleRig.ts";

const ADJUSTERS = 16;

/** So many panels, with sixteen adjusters, two findings and a check a panel. */
export function largeJob(count: number): Facts {
  const given = ["E1", "E2", "E3", "E4", "A1", "A2", "stay-1", "mast-1"];
  const long = new Map(given.map((id, n) => [id, longName(id.slice(0, 1), 900 + n)]));
  const text = JSON.stringify(manyPanels(count)).replace(/"(E[1-4]|A[12])"/g, (_, id) => JSON.stringify(long.get(id)));
  const turned = Array.from({ length: ADJUSTERS }, (_, i): [string, string] => [`T${i + 1}`, longName("T", 10 + i)]);
  const names = Object.fromEntries([...long, ...turned, ["S1", longName("S", 1)], ["S2", longName("S", 2)]]);
  const facts = withRig(JSON.parse(text), { names, more: ADJUSTERS - 4 });
  // The rig's own names that its maker gives no say in.
  const all = JSON.parse(
    JSON.stringify(facts).replace(/"(E3|stay-1|mast-1)"/g, (_, id) => JSON.stringify(long.get(id))),
  ) as Facts;
  for (const [i, panel] of all.panels!.entries()) {
    all.findings.push({
      code: "allowance-missed",
      level: i % 5 === 0 ? "stop" : "caution",
      station: "panels",
      where: [panel.id, all.seams![i % all.seams!.length]!.id],
      value: 12.5 + i,
      limit: 10,
      text: `Side ${(i % 4) + 1} of ${panel.id} misses its allowance by ${12.5 + i} mm beside ${panel.sides[0]!.id}.`,
      remedy: `Move ${panel.sides[0]!.id}, or let ${panel.id} be wider.`,
      basis: "common practice",
    });
    // Each of these says something else, so none of them share a row.
    all.findings.push({
      code: "built-stress",
      level: "note",
      station: "rig",
      where: panel.id,
      value: `${"x".repeat(1 + (i % 20))} kN/m`,
      limit: "as intended",
      text: `Assembled, ${panel.id} differs ${"very ".repeat(i % 30)}much.`,
      remedy: "Look at it.",
      basis: "own argument",
    });
    all.checks.push({
      station: "panels",
      text: `Panel ${panel.id}: both sides of its seams equally long, mm`,
      value: i / 100,
      limit: 0.5,
      holds: i % 7 > 0,
    });
  }
  return all;
}
