// Standing words of the sheets: cautions before the work they belong to, and what this tool leaves to the engineer. The cautions
// stand in templates/cautions.json, the one source of page and papers, and are built in. All common practice, not taken from a
// code. Signal words after ANSI Z535.6 (check-values 7.3), graded by the worst credible outcome; each caution says hazard,
// consequence, how to avoid, in that order.

import file from "../../../../templates/cautions.json";
import type { Fabric } from "../../records/fabric.ts";

/** Papers a caution can stand on. */
export type CautionPaper = "schedule" | "cables" | "hardware" | "rolls" | "panels" | "seams" | "findings";

export interface Caution {
  id: string;
  signal: "DANGER" | "WARNING" | "CAUTION" | "NOTICE";
  papers: readonly CautionPaper[];
  hazard: string;
  consequence: string;
  avoid: string;
  /** Only where cloth of this material is used, or of one that is not known. */
  cloth?: Fabric["material"];
}

/** All of them, the gravest first. */
export const CAUTIONS = file.cautions as readonly Caution[];

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
