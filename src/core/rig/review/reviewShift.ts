// What cloth that was cut for edges as drawn carries on edges as surveyed.
import type { Finding } from "../../problem.ts";
import type { FactsAsBuilt } from "../../records/rig.ts";
import type { RigInput } from "../rigInput.ts";

/** Share of the intended prestress by which the mean stress may be off (site habit: 10 to 20 %). */
const stressWindow = 0.1;

/** Share of the cloth that may be slack. */
const slackLimit = 0.02;

/** One finding where clamped edges stand elsewhere than the cut cloth was made for; none where none does. */
export function reviewShift(input: RigInput, asBuilt: FactsAsBuilt): Finding[] {
  const where = Object.keys(input.shifts);
  if (where.length === 0) return [];
  const off = (["warp", "weft"] as const).map((way) => asBuilt.stress[way].mean / input.form.stress[way] - 1);
  const worst = off.reduce((a, b) => (Math.abs(b) > Math.abs(a) ? b : a));
  const within = Math.abs(worst) <= stressWindow && asBuilt.compressedShare <= slackLimit;
  const say = (way: "warp" | "weft") => {
    const { min, mean, max } = asBuilt.stress[way];
    return `${way} ${mean.toFixed(2)} kN/m in the mean (${min.toFixed(2)} to ${max.toFixed(2)}, intended ${input.form.stress[way].toFixed(2)})`;
  };
  return [
    {
      code: "survey-stress",
      level: within ? "note" : "caution",
      station: "rig",
      where,
      value: worst,
      limit: stressWindow,
      text: `on the clamped edges as surveyed the cloth as cut carries ${say("warp")} and ${say("weft")}; ${(100 * asBuilt.compressedShare).toFixed(1)} % of it is not taut`,
      remedy: within
        ? "nothing to do where the engineer agrees"
        : "set the edge right, or make up the way with packers at the clamp; the engineer judges stress and structure",
      basis: "equilibrium of the cut panels on the surveyed edges; the window is site habit",
    },
  ];
}
