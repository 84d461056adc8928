// How the form station words a finding, and how it names a place on the mesh.
import type { Finding, FindingLevel } from "../problem.ts";

/** A finding without the parts that are the same for the whole station; value, limit and basis have defaults. */
export interface FormWords {
  code: string;
  where: string | string[];
  value?: number | string;
  limit?: number | string;
  text: string;
  remedy: string;
  basis?: string;
}

/** A finding of the form station. */
export function buildFormFinding(level: FindingLevel, words: FormWords): Finding {
  return {
    code: words.code,
    level,
    station: "form",
    where: words.where,
    value: words.value ?? null,
    limit: words.limit ?? null,
    text: words.text,
    remedy: words.remedy,
    basis: words.basis ?? "own argument",
  };
}

/** "(1.250, -3.000, 4.500) m": where a vertex lies. @units m */
export function describePlace(xyz: ArrayLike<number>, v: number): string {
  return `(${[0, 1, 2].map((k) => xyz[3 * v + k].toFixed(3)).join(", ")}) m`;
}

/** "vertex 14 at (…) m": vertices are counted from 0 in the order of the mesh file. */
export function describeVertex(xyz: ArrayLike<number>, v: number): string {
  return `vertex ${v} at ${describePlace(xyz, v)}`;
}
