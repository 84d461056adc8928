// The starter jobs that come with the program: the same files the command line copies. The mesh is fetched when it is asked for.

import starters from "../../../templates/starters.json";
import type { JobFile } from "../../core/job/jobSchema.ts";
import type { Project } from "../store/project.ts";
import { newId } from "./keepBook.ts";

const jobs = import.meta.glob<JobFile>("../../../templates/*/job.json", { import: "default" });
const meshes = import.meta.glob<string>("../../../templates/*/form.obj", {
  query: "?url",
  import: "default",
  eager: true,
});

/** Names and lines of the starters, in order. */
export const STARTERS: readonly { name: string; line: string }[] = starters.starters;

/** A starter as a new project. */
export async function openStarter(name: string): Promise<Project> {
  const folder = `../../../templates/${name}`;
  const job = await jobs[`${folder}/job.json`]?.();
  const url = meshes[`${folder}/form.obj`];
  if (job === undefined || url === undefined) throw new Error(`the starter ${name} is not built in`);
  const response = await fetch(url);
  if (!response.ok) throw new Error(`the mesh of ${name} cannot be read (${response.status})`);
  const bytes = new Uint8Array(await response.arrayBuffer());
  return { id: newId(), job, mesh: { name: "form.obj", bytes }, log: [] };
}
