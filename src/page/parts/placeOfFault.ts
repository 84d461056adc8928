// Which place of the job a fault speaks of, so that the page can lead there. Pure.
import type { JobFile } from "../../core/job/jobSchema.ts";
import type { PlanFault } from "../worker/messages.ts";
import { leafOfPath } from "./jump.ts";

/** Path of a thing the job itself names; undefined for what it does not. */
function pathOfName(job: JobFile, name: string): string | undefined {
  for (const list of ["struts", "stays"] as const) {
    const index = job.rig?.[list]?.findIndex((one) => one.name === name) ?? -1;
    if (index >= 0) return `rig.${list}[${index}]`;
  }
  if (job.rig?.adjusters?.some((a) => a.name === name)) return `rig.adjusters.${name}`;
  const roll = job.rolls?.findIndex((r) => r.id === name) ?? -1;
  if (roll >= 0) return `rolls[${roll}]`;
  const pin = job.nest?.pins?.findIndex((p) => p.panel === name) ?? -1;
  return pin < 0 ? undefined : `nest.pins[${pin}]`;
}

/** The path; undefined where no field of the page decides it, as in the mesh itself. */
export function placeOfFault({ code, where }: Pick<PlanFault, "code" | "where">, job: JobFile): string | undefined {
  const paths = where.filter((w) => leafOfPath(w) !== undefined);
  if (code.startsWith("pin-")) {
    const pin = job.nest?.pins?.findLastIndex((p) => where.includes(p.panel)) ?? -1;
    if (pin >= 0) return `nest.pins[${pin}]`;
  }
  return paths[0] ?? where.map((name) => pathOfName(job, name)).find((path) => path !== undefined);
}
