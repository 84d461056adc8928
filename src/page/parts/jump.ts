// From a finding to what it speaks of: the leaf, the thing on it, the field that decides it.
import type { Finding, Station } from "../../core/problem.ts";
import { bookStore, type Leaf } from "../store/bookStore.ts";

const OF_STATION: Record<Exclude<Station, "job">, Leaf> = {
  form: "form",
  seams: "seams",
  panels: "panels",
  rolls: "rolls",
  rig: "rig",
  papers: "papers",
};
const OF_KEY: Record<string, Leaf> = {
  mesh: "form",
  prestress: "form",
  settle: "form",
  edges: "form",
  anchors: "form",
  warp: "form",
  survey: "site",
  clothCut: "site",
  seams: "seams",
  panels: "panels",
  fabric: "panels",
  compensation: "panels",
  decompensation: "panels",
  allowances: "panels",
  rolls: "rolls",
  nest: "rolls",
  rig: "rig",
  proof: "rig",
  papers: "papers",
  title: "papers",
  issue: "papers",
};

/** Leaf that decides a place of the job. */
export function leafOfPath(path: string): Leaf | undefined {
  return OF_KEY[path.split(/[.[]/, 1)[0] ?? ""];
}

/** Leaf a finding belongs to. */
export function leafOfFinding(finding: Pick<Finding, "station" | "where">): Leaf {
  if (finding.station !== "job") return OF_STATION[finding.station];
  return leafOfPath([finding.where].flat()[0] ?? "") ?? "form";
}

/** The paths from a place outwards, down to one thing of the job: edges.north.force, edges.north, but not all edges. */
function listOutwards(where: string): string[] {
  const outer = where.replace(/(\.[^.[]*|\[[^[]*)$/, "");
  return /[.[]/.test(outer) ? [where, ...listOutwards(outer)] : [where];
}

/** The field of a path, or the first within it; where it has none, that of what it lies in. */
function findField(where: string): HTMLElement | undefined {
  const fields = [...document.querySelectorAll<HTMLElement>("[data-path]")];
  for (const path of where === "" ? [] : listOutwards(where)) {
    const field =
      fields.find((f) => f.dataset.path === path) ?? fields.find((f) => f.dataset.path?.startsWith(`${path}.`));
    if (field !== undefined) return field;
  }
  return undefined;
}

/** Opens the leaf, lights the thing, puts the cursor into its field where there is one, all of it chosen. */
export function jumpTo(leaf: Leaf, where: string): void {
  bookStore.setState({ leaf, chosen: where === "" ? null : where, sheet: "none" });
  requestAnimationFrame(() => {
    const entry = findField(where)?.querySelector<HTMLElement>("input, select, button");
    const goal = entry ?? document.querySelector<HTMLElement>("main h1");
    // what is folded away can take no focus
    for (let fold = goal?.closest("details"); fold; fold = fold.parentElement?.closest("details")) fold.open = true;
    goal?.scrollIntoView({ block: "center" });
    goal?.focus();
    // what is typed next takes the place of what stands there
    if (goal instanceof HTMLInputElement) goal.select();
  });
}
