// Puts one value at a path of the job, or takes it out. The job before stays as it was.
import type { Project } from "../store/project.ts";

type Step = string | number;

function place(node: unknown, path: readonly Step[], value: unknown): unknown {
  const [step, ...rest] = path;
  if (step === undefined) return value;
  const list = Array.isArray(node);
  const inner = (node as Record<Step, unknown> | null | undefined)?.[step];
  const next = place(inner, rest, value);
  if (next === inner) return node;
  if (list || typeof step === "number") {
    const copy = list ? [...node] : [];
    if (next === undefined) copy.splice(Number(step), 1);
    else copy[Number(step)] = next;
    return copy.length === 0 && next === undefined ? undefined : copy;
  }
  const copy: Record<string, unknown> = { ...(node as object | undefined) };
  if (next === undefined) delete copy[step];
  else copy[step] = next;
  // An object that was emptied says nothing: it goes too.
  return next === undefined && Object.keys(copy).length === 0 ? undefined : copy;
}

/** The project with another value at `path`; undefined takes the key out, and the default holds again. */
export function placeInJob(project: Project, path: readonly Step[], value: unknown): Project {
  const job = place(project.job, path, value) as Project["job"] | undefined;
  return job === undefined || job === project.job ? project : { ...project, job };
}
