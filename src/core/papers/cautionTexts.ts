// Standing words of the findings sheets: cautions before the work they belong to, and what this tool leaves to the engineer.
// Signal words after ANSI Z535.6 (check-values 7.3), graded by the worst credible outcome; order: hazard, consequence, how to
// avoid. The lift-off speed is computed from the cloth's own weight, 0.625 v² = m g (check-values 6.6).
import type { Facts } from "../records/facts.ts";
import { decimal } from "./decimal.ts";

export interface Caution {
  word: "DANGER" | "WARNING" | "CAUTION" | "NOTICE";
  text: string;
}

const GRAVITY = 9.81;
/** Dynamic pressure at 1 m/s, Pa: half of 1.25 kg/m3 (EN 1991-1-4 recommended value). */
const PRESSURE = 0.625;

/** Wind at which suction equal to its own weight lifts a loose cloth, m/s. @units mass in kg/m2 */
export function liftOffSpeed(mass: number): number {
  return Math.sqrt((mass * GRAVITY) / PRESSURE);
}

/** Cautions for whoever handles the cloth, the gravest first. */
export function cautions(facts: Facts): Caution[] {
  const used = [...new Set((facts.panels ?? []).map((p) => p.fabric))];
  const speeds = used.flatMap((id) => {
    const mass = facts.fabrics[id]?.mass;
    return mass === undefined
      ? []
      : [`${id} (${decimal(mass, 2)} kg/m²) at about ${decimal(liftOffSpeed(mass), 1)} m/s`];
  });
  const lift = speeds.length > 0 ? ` By its own weight alone it lifts: ${speeds.join("; ")}, gusts included.` : "";
  const total = (facts.panels ?? []).reduce((s, p) => s + (facts.fabrics[p.fabric]?.mass ?? 0) * p.area.cut, 0);
  const weight =
    total > 0 ? ` The panels together weigh about ${decimal(total, 0)} kg without cables, fittings and patches.` : "";
  return [
    {
      word: "WARNING",
      text: `A loose or half-tensioned membrane is a sail.${lift} It can throw people from platforms and pull them from the ground. Do not unfold it when the mean wind or the forecast gust is above the limit the engineer has set for this site; hold every corner before the cloth is let go; agree a storm state that can be reached within the hour.`,
    },
    {
      word: "WARNING",
      text: "Tensioned cables, straps and fittings can break or slip. They strike with deadly force along their line and below it. Keep everybody out of the line of pull and out from under the membrane while it is lifted or tensioned; close off the ground below; work from platforms, never on the cloth.",
    },
    {
      word: "CAUTION",
      text: `Folded cloth is heavy and slides.${weight} It can crush hands and feet and strain backs. Lift packs with slings and a spreader sized for the weight; wear gloves and shoes with caps; do not stand on folded cloth.`,
    },
    {
      word: "CAUTION",
      text: "Hot-air and high-frequency welders burn, and fumes of coated cloth irritate. Draw off fumes, keep hands off the nozzle and the electrode, follow the maker's instructions of machine and cloth.",
    },
    {
      word: "NOTICE",
      text: "Sharp folds, dragging and walking on the cloth damage coating and yarn; glass cloth must not be folded sharply at all. Roll it on tubes, keep the floor clean, mark only with the pen the cloth's maker allows.",
    },
    {
      word: "NOTICE",
      text: "A panel cut from another batch, turned over, or laid across the warp does not fit and cannot be mended. Check batch, face and warp arrow before the first cut of every roll, and the 1000 mm bar in every cut file.",
    },
  ];
}

/** What the plan does not hold and the engineer must supply or decide. */
export const ENGINEER_SUPPLIES: readonly string[] = [
  "Design for wind, snow, ponding, seismic and accidental loads to the code in force where the roof stands. This plan is made for prestress only and checks none of them.",
  "Design forces, and from them the size of every cable, fitting, turnbuckle, clamp, mast, anchor and foundation. No size is chosen here from prestress.",
  "The strength of the cloth and of every weld at the design temperature, with the factors of the code in force; a weld trial each day of welding.",
  "Biaxial tests of the batches in use and the compensation drawn from them, where the findings say that stiffness values or defaults were taken.",
  "Drainage: the slope everywhere under load, and what happens when an outlet is blocked.",
  "Limits of wind, temperature and force for lifting and tensioning, the storm state, and who may stop the work.",
  "Measured positions of the anchors before cloth is cut.",
  "Whether this plan may be built. Local law, codes and the licensed engineer decide; a sheet without a stamp only means that no stop was found here.",
];
