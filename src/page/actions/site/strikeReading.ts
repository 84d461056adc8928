// Strikes a reading: a slip of the finger. It stays in the log, legible, and counts no more; struck again it counts again.
import type { Project } from "../../store/project.ts";

/** The act; `index`: its place in the log. */
export function strikeReading(project: Project, args: { index: number }): Project {
  const log = project.log.map((reading, i) => {
    if (i !== args.index) return reading;
    const { struck, ...rest } = reading;
    return struck ? rest : { ...rest, struck: true as const };
  });
  return { ...project, log };
}
