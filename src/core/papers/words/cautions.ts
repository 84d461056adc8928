// Which cautions stand on a paper, with what can be computed for the job at hand: wind that lifts the cloth, weight of the whole.
import type { Facts } from "../../records/facts.ts";
import { CAUTIONS, type Caution, type CautionPaper } from "./cautionTexts.ts";
import { paperUnits } from "./paperUnits.ts";
import { plainText } from "./plainText.ts";

const GRAVITY = 9.81;
/** Dynamic pressure at 1 m/s, Pa: half of 1.25 kg/m3 (EN 1991-1-4 recommended value). */
const PRESSURE = 0.625;

/** Wind at which suction equal to its own weight lifts a loose cloth, m/s: 0.625 v² = m g (check-values 6.6). @units mass in kg/m2 */
export function liftOffSpeed(mass: number): number {
  return Math.sqrt((mass * GRAVITY) / PRESSURE);
}

/** What all panels weigh as cut, kg. */
export function clothMass(facts: Facts): number {
  return (facts.panels ?? []).reduce((s, p) => s + (facts.fabrics[p.fabric]?.mass ?? 0) * p.area.cut, 0);
}

/** What the job adds to the hazard. */
function computed(facts: Facts, id: string): string {
  const { speed, mass } = paperUnits(facts.job);
  if (id === "wind-lift") {
    const used = [...new Set((facts.panels ?? []).map((p) => p.fabric))];
    const speeds = used.flatMap((fabric) => {
      const weight = facts.fabrics[fabric]?.mass;
      return weight === undefined ? [] : [`${plainText(fabric)} at about ${speed.whole(liftOffSpeed(weight))}`];
    });
    return speeds.length > 0 ? ` Its own weight alone is lifted: ${speeds.join("; ")}, gusts included.` : "";
  }
  const total = clothMass(facts);
  if (id !== "heavy-pack" || total === 0) return "";
  return ` The panels together weigh about ${mass.whole(total)} without cables, fittings and patches.`;
}

/** Hazard, consequence, how to avoid, as one paragraph. */
export function cautionText(facts: Facts, caution: Caution): string {
  return `${caution.hazard}${computed(facts, caution.id)} ${caution.consequence} ${caution.avoid}`;
}

/** Cautions of a paper, the gravest first. */
export function cautionsOf(paper: CautionPaper): Caution[] {
  return CAUTIONS.filter((c) => c.papers.includes(paper));
}

/** Cautions by name, in the order asked. */
export function cautionsNamed(...ids: string[]): Caution[] {
  return ids.flatMap((id) => CAUTIONS.filter((c) => c.id === id));
}
