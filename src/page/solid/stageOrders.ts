// What the view tells the stage that draws, and what it hears from it.
import type { Model, ModelLine } from "./buildModel.ts";

/** Colours of a theme, as CSS writes them. */
export interface SceneInk {
  cloth: string;
  clothOther: string;
  lit: string;
  lines: Record<ModelLine["kind"], string>;
}

/** How the surface is looked at. @shape both 16, columns one after another: from the camera to the world, from the camera to the canvas */
export interface Sight {
  camera: number[];
  projection: number[];
  /** Counts up with whatever moves things by itself: another model, another size of the canvas. */
  frame: number;
}

/** A line as it is drawn. @shape segments 6 for each: both ends, m */
export interface DrawnLine extends Pick<ModelLine, "id" | "kind"> {
  segments: Float32Array<ArrayBuffer>;
}

/** What of a model makes its surface. */
export type Surface = Pick<Model, "position" | "normal" | "triangles" | "owner" | "owners">;

/** Dots of the canvas, and how many of them lie on a CSS pixel. */
export interface StageSize {
  wide: number;
  high: number;
  density: number;
}

/** Of the points of a surface. @shape 3*nP red, green, blue as shares of light */
export type Colours = Float32Array<ArrayBuffer>;

/** What a stage begins with; then come orders. */
export interface StageBegin {
  canvas: OffscreenCanvas;
  ink: SceneInk;
  size: StageSize;
}

export type StageOrder =
  /** A surface or lines that are null stay as they are. Colours 3*nP, shares of light; null: plain cloth. */
  | { kind: "show"; surface: Surface | null; lines: DrawnLine[] | null; colours: Colours | null; sight: Sight }
  | { kind: "light"; ids: string[] }
  | { kind: "ink"; ink: SceneInk }
  /** `turned`: by a person, who may turn on. */
  | { kind: "sight"; sight: Sight; turned: boolean }
  | { kind: "size"; size: StageSize };

export type StageWord =
  /** What was drawn with, and whether with fewer triangles than there are. */
  | { kind: "drawn"; sight: Sight; less: boolean }
  /** Nothing can be drawn here. */
  | { kind: "broken" };
