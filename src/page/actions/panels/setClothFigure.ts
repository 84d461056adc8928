// One constant of a cloth of the job's own. The first such word takes over what the catalogue cloth has.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** Constants that are one number, in the units of the job file. */
export type ClothFigure = "Ew" | "Ef" | "nuWf" | "G" | "alpha" | "rollWidth" | "selvedge" | "rollLength" | "mass";

/** A cloth with every constant, as the plan has it. */
type Cloth = Record<ClothFigure, number> & { id: string; strength: { warp: number; weft: number } | null };

/** The act. @param standing the cloth as the plan has it, for what the job does not say itself */
export function setClothFigure(
  project: Project,
  args: { key: ClothFigure; value: number | undefined; standing: Cloth },
): Project {
  return placeInJob(ownCloth(project, { standing: args.standing }), ["fabric", args.key], args.value);
}

/** Makes the cloth of the catalogue the job's own, with the same constants under its own name. */
export function ownCloth(project: Project, args: { standing: Cloth }): Project {
  if (typeof project.job.fabric === "object") return project;
  const { id, Ew, Ef, nuWf, G, alpha, rollWidth, selvedge, rollLength, mass, strength } = args.standing;
  const own = { id: `${id} own`, Ew, Ef, nuWf, G, alpha, rollWidth, selvedge, rollLength, mass };
  return placeInJob(project, ["fabric"], strength === null ? own : { ...own, strength });
}
