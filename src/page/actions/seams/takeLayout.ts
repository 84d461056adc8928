// Takes one of the layouts that were compared, with the reason.
import type { Project } from "../../store/project.ts";
import { placeInJob } from "../placeInJob.ts";

/** The act; null and "auto" leave a key out, and its default holds. */
export function takeLayout(
  project: Project,
  args: {
    layout: "auto" | "bands" | "gores";
    from: string | null;
    to: string | null;
    count: number | "auto";
    why: string;
  },
): Project {
  const { layout: _l, from: _f, to: _t, count: _c, pairs: _p, why: _w, ...rest } = project.job.seams ?? {};
  const { layout, from, to, count, why } = args;
  return placeInJob(project, ["seams"], {
    ...rest,
    layout,
    ...(from === null ? {} : { from }),
    ...(to === null ? {} : { to }),
    ...(count === "auto" ? {} : { count }),
    why,
  });
}
