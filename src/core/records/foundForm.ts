// What the form station hands on: the sound surface, its named edges and anchors, its balance. Types only.
import type { Surface, Vec3 } from "../surface/surface.ts";

/** cable, clamped, free: on the boundary; ridge, valley, belt: cables inside the surface. */
export type EdgeKind = "cable" | "clamped" | "free" | "ridge" | "valley" | "belt";

/** One named edge of the form. */
export interface FormEdge {
  /** The name in the mesh where it has one, else E1, E2, … (boundary) or K1, K2, … (inner). */
  id: string;
  kind: EdgeKind;
  /** Surface vertices along it. Boundary edges run counter-clockwise seen from above; a closed edge repeats its first. */
  vertices: number[];
  /** Boundary loop it belongs to (0 the longest), -1 for inner cables. */
  loop: number;
  /** Cable force, kN, tension positive; null for clamped and free edges. */
  force: number | null;
  /** Where the force comes from; sag: the usual sag, where a form was settled without any word on it. */
  forceFrom: "job" | "balance" | "sag" | "none";
  /** Standard spread of a force from best balance, kN. */
  spread?: number;
  /** Pull of the structure on a clamped edge: resultant (kN) and greatest per metre (kN/m); null otherwise. */
  reaction: { resultant: Vec3; greatest: number } | null;
}

/** A named fixed point. */
export interface FormAnchor {
  id: string;
  vertex: number;
  /** True where no clamped edge ends: an adjuster may stand there. */
  isolated: boolean;
}

/** Out-of-balance force at free vertices over the mean summed membrane force (facts.md, form.residual). */
export interface Residual {
  max: number;
  rms: number;
  normalMax: number;
  /** Greatest part within the surface; along cables left out. */
  tangentialMax?: number;
}

/** How curved and how steep the form is. */
export interface FormRelief {
  /** Gaussian curvature where cloth alone is curved, 1/m², and the vertices; null where there is no such vertex. */
  curvature: { least: number; leastAt: number; greatest: number; greatestAt: number } | null;
  /** Least slope against level, rad, and a vertex there. */
  flattest: number;
  flattestAt: number;
  /** Share of the area that slopes less than 2 degrees. */
  flatShare: number;
  /** Places lower than the cloth all round. */
  pits: number;
}

/** Output of the form station. */
export interface FoundForm {
  surface: Surface;
  /** 1 where a vertex is held in space. @shape nV */
  fixed: Uint8Array<ArrayBuffer>;
  /** Boundary loops, vertices not repeated, counter-clockwise from above, longest first. */
  loops: number[][];
  /** Intended prestress, kN/m. */
  stress: { warp: number; weft: number };
  /** Standard spread of the stress where it was found from best balance (prestress.from), kN/m. */
  stressSpread?: { warp: number; weft: number };
  /** Boundary edges loop by loop, then inner cables. Together the boundary edges cover every loop exactly once. */
  edges: FormEdge[];
  anchors: FormAnchor[];
  residual: Residual;
  /** m2 */
  area: number;
  /** Pull of the structure on each anchor, kN. */
  reactions: { anchor: string; force: Vec3 }[];
  /** The form station gives it; forms made up for a test need not. */
  relief?: FormRelief;
}
