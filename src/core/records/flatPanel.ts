// What the panels station works out: flat cloth with its proof, then the outlines to cut. Types only.

/** Least, area-weighted mean, greatest and rms error against the target of one stress component, kN/m. */
export interface StressFigures {
  min: number;
  mean: number;
  max: number;
  rmsError: number;
}

/** A side of a panel in the panel's own vertex numbers. */
export interface PanelSide {
  kind: "seam" | "cable" | "clamped" | "free";
  id: string;
  /** Local vertices, counter-clockwise around the panel. */
  vertices: number[];
  /** m, on the form. */
  lengthErected: number;
  /** mm, in the cut cloth. */
  lengthFlat: number;
}

/** A flattened strip, before outlines. */
export interface FlatPanel {
  id: string;
  fabric: string;
  batch: string | null;
  /** Vertex of the cut surface for each local vertex. @shape n */
  surfaceVertex: Uint32Array<ArrayBuffer>;
  /** @shape 3*n @units m */
  erected: Float64Array<ArrayBuffer>;
  /** @shape 2*n @units mm; warp along x, outer face up, compensated */
  flat: Float64Array<ArrayBuffer>;
  /** Local, counter-clockwise in the flat. @shape 3*nT */
  tri: Uint32Array<ArrayBuffer>;
  axis: { from: number[]; to: number[]; turn: number };
  sides: PanelSide[];
  target: { warp: number; weft: number };
  compensation: { warp: number; weft: number };
  permanent: { warp: number; weft: number };
  decompensated: { side: number; fade: number }[];
  stress: { warp: StressFigures; weft: StressFigures; compressedShare: number; warpDeviation: number };
}

/** A closed ring of points, mm, counter-clockwise, first not repeated. @shape 2*n */
export type Ring = Float64Array<ArrayBuffer>;

/** Something to draw on the cloth. Points in mm in the panel's own axes. */
export interface PanelMark {
  /** seam-line, fold-line, slit, match, warp, name, face, side-name, station, corner */
  kind: string;
  points?: [number, number][];
  /** Middle of the text. */
  at?: [number, number];
  text?: string;
  /** Height of the text, mm; the drawing's own where absent. */
  height?: number;
  /** Direction the text reads in, degrees from +x, within (-90, 90]; 0 where absent. */
  angle?: number;
}

/** Lengths to check with a tape, mm. */
export interface ControlLengths {
  /** One for each side: along its net line (the weld or fold), and straight between its corners. */
  sides: { net: number; chord: number }[];
  /** Between net corners; corner k is where side k begins. None at a pointed end. */
  diagonals: { from: number; to: number; length: number }[];
  /** Square to the axis, `at` mm from the middle of its first end: between the net lines, and between the cut lines. */
  widths: { share: number; at: number; net: number; cut: number }[];
}

/** Cloth that is no panel of the form: its outline in its own axes, warp along x. */
export interface CutPiece {
  id: string;
  kind: "patch" | "strip" | "cover" | "test";
  /** Edge, anchor or batch it belongs to. */
  for: string;
  fabric: string;
  batch: string | null;
  cut: Ring;
}

/** A panel ready to be cut. */
export interface CutPanel extends FlatPanel {
  net: Ring;
  cut: Ring;
  /** One for each side: where it lies in net, and its allowance in mm (a set-back is negative). */
  outlines: { netFrom: number; netTo: number; allowance: number }[];
  marks: PanelMark[];
  area: { net: number; cut: number };
  size: { length: number; width: number };
  control: ControlLengths;
}
