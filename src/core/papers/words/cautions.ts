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

/** Ids of the cloths in use: those of the panels, before there are panels all of them. */
function clothsUsed(facts: Facts): string[] {
  const used = [...new Set((facts.panels ?? []).map((p) => p.fabric))];
  return used.length > 0 ? used : Object.keys(facts.fabrics);
}

/** Whether a caution concerns this job: one of a material stands where that is used, or where nobody said what the cloth is. */
function concerns(facts: Facts, caution: Caution): boolean {
  if (caution.cloth === undefined) return true;
  return clothsUsed(facts).some((id) => (facts.fabrics[id]?.material ?? caution.cloth) === caution.cloth);
}

/** What the job adds to the hazard. */
function computed(facts: Facts, caution: Caution): string {
  const { id } = caution;
  const { speed, mass } = paperUnits(facts.job);
  if (caution.cloth !== undefined) {
    const unknown = clothsUsed(facts).filter((cloth) => facts.fabrics[cloth]?.material === undefined);
    if (unknown.length > 0)
      return ` The job does not say what ${unknown.map(plainText).join(", ")} is made of: taken as ${caution.cloth}.`;
  }
  if (id === "wind-lift") {
    const speeds = clothsUsed(facts).flatMap((fabric) => {
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
  return `${caution.hazard}${computed(facts, caution)} ${caution.consequence} ${caution.avoid}`;
}

/** Cautions of a paper that concern this job, the gravest first. */
export function cautionsOf(facts: Facts, paper: CautionPaper): Caution[] {
  return CAUTIONS.filter((c) => c.papers.includes(paper) && concerns(facts, c));
}

/** Cautions by name that concern this job, in the order asked. */
export function cautionsNamed(facts: Facts, ...ids: string[]): Caution[] {
  return ids.flatMap((id) => CAUTIONS.filter((c) => c.id === id && concerns(facts, c)));
}
