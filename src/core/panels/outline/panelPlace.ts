// What an outlined panel must know of the roof round it. Types only.
import type { Seam } from "../../records/stripLayout.ts";

/** The roof round a panel. */
export interface PanelPlace {
  seams: Pick<Seam, "id" | "vertices" | "strips" | "upper">[];
  /** Anchors by vertex of the cut surface; cutBack in mm keeps the cloth that far from the system point. */
  anchors: { id: string; vertex: number; cutBack: number }[];
  /** Vertices of the cut surface that a seam's net line runs through on both sides (keepSeamPoints); left out: each panel fairs alone. */
  keep?: ReadonlyMap<string, ReadonlySet<number>>;
}
