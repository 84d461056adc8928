// Findings that say the same of several places become one row: a reader who has seen it once need not read it forty times. Nothing is
// lost: every place stands in the row, with its value where it has one, and the words are those of the worst.
import type { Finding } from "../../problem.ts";

/** Findings alike but for places and numbers, the worst first. */
export interface LikeFindings {
  worst: Finding;
  all: Finding[];
}

/** What a text says when places and numbers are left out of it. */
function patternOf(text: string, where: readonly string[]): string {
  const bare = [...where]
    .sort((a, b) => b.length - a.length)
    .reduce((t, w) => (w === "" ? t : t.replaceAll(w, "@")), text);
  return bare.replace(/\d+(?:\.\d+)?/g, "#");
}

function keyOf(f: Finding): string {
  const where = [f.where].flat();
  const value = typeof f.value === "string" ? patternOf(f.value, where) : typeof f.value;
  const said = [patternOf(f.text, where), patternOf(f.remedy, where)];
  return JSON.stringify([f.level, f.code, f.station, f.basis, value, f.limit, ...said]);
}

/** How far a value lies beyond its limit, or how great it is where there is none. */
function gravity(f: Finding): number {
  if (typeof f.value !== "number") return 0;
  return typeof f.limit === "number" ? Math.abs(f.value - f.limit) : Math.abs(f.value);
}

/** The findings in groups of alike ones, in the order in which each kind was first found. */
export function likeFindings(findings: readonly Finding[]): LikeFindings[] {
  const groups = new Map<string, Finding[]>();
  for (const f of findings) groups.set(keyOf(f), [...(groups.get(keyOf(f)) ?? []), f]);
  return [...groups.values()].map((all) => ({
    worst: all.reduce((worst, f) => (gravity(f) > gravity(worst) ? f : worst)),
    all,
  }));
}
