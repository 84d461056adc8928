// Cloth as the catalogue or the job gives it. Types only; the law stands in structure/cloth.ts.

/** Where a catalogue value comes from (check-list of the papers: nothing but "verified" is called so). */
export type ValueStatus = "verified" | "from memory" | "common practice" | "job";

/** A coated cloth. */
export interface Fabric {
  /** Catalogue id, or "job" for an inline fabric without id. */
  id: string;
  /** kN/m */
  Ew: number;
  Ef: number;
  /** Weft strain caused by unit warp strain; nuFw = nuWf·Ef/Ew. */
  nuWf: number;
  /** kN/m */
  G: number;
  /** 1/K */
  alpha: number;
  /** mm, over all */
  rollWidth: number;
  /** mm, each side */
  selvedge: number;
  /** mm, length of a full roll */
  rollLength: number;
  /** kg/m2 */
  mass: number;
  /** Strip tensile strength, kN/m, or null where not given. */
  strength: { warp: number; weft: number } | null;
  /** Status of each value, by field name. */
  status: Record<string, ValueStatus>;
  /** What its yarns are, where known: glass breaks where it is folded. */
  material?: "polyester" | "glass" | "other";
}
