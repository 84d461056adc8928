// The drawing every writer of cut files reads: strokes and labels in millimetres, y up, on four layers that say
// what is to be done. Knows nothing of DXF, SVG or PDF; builders fill it, writers only read it.
import { PlanError } from "../../problem.ts";
import type { Vec2 } from "../../records/facts.ts";
import { plainText } from "../words/plainText.ts";
import { arcReaches } from "./bulge.ts";

/** bed: for orientation, never to be worked; mark and text: pen; cut: knife. */
export type Layer = "bed" | "mark" | "text" | "cut";

/** Layers in the order of work: what lies inside is drawn before the outline sets it free. */
export const LAYERS: readonly Layer[] = ["bed", "mark", "text", "cut"];

/** Layer names as they stand in the files. */
export const LAYER_NAMES: Readonly<Record<Layer, string>> = {
  bed: "BED-DO-NOT-CUT",
  mark: "MARK-PEN",
  text: "TEXT-PEN",
  cut: "CUT",
};

/** An open or closed run of straight pieces, or of arcs; a closed one does not repeat its first point. */
export interface Stroke {
  layer: Layer;
  points: Vec2[];
  closed: boolean;
  /** Where pieces are arcs: for each point the tangent of a quarter of the angle of the piece from it, 0 straight, above 0 counter-clockwise. */
  bulges?: number[];
}

/** Text around or from `at`, half its height above and below it. */
export interface Label {
  layer: Layer;
  at: Vec2;
  /** Capital height, mm. */
  height: number;
  /** Degrees, counter-clockwise. */
  rotation: number;
  anchor: "start" | "middle" | "end";
  text: string;
}

export interface Drawing {
  name: string;
  strokes: Stroke[];
  labels: Label[];
}

/** An empty drawing. */
export function emptyDrawing(name: string): Drawing {
  return { name: plainText(name), strokes: [], labels: [] };
}

/** Writers print thousandths; two points that print alike are one point to the machine. */
const STEP = 1000;

function rounded(point: readonly number[], where: string): Vec2 {
  const x = Math.round(point[0] * STEP) / STEP;
  const y = Math.round(point[1] * STEP) / STEP;
  if (!Number.isFinite(x) || !Number.isFinite(y)) {
    throw new PlanError(
      "papers-number",
      `${where}: the point (${point[0]}, ${point[1]}) cannot be drawn; coordinates must be finite. Plan the job again from the station that gave it.`,
      where,
    );
  }
  return [x, y];
}

/**
 * Adds a stroke with its points rounded to 0.001 mm and doubled points left out; an open run that shrinks to a point is dropped.
 * @throws PlanError "papers-number" for a point that is not finite, "papers-outline" for a closed run of fewer than three points
 */
export function addStrokeInPlace(drawing: Drawing, stroke: Stroke): void {
  const points: Vec2[] = [];
  for (const p of stroke.points) {
    const q = rounded(p, drawing.name);
    const last = points.at(-1);
    if (last === undefined || last[0] !== q[0] || last[1] !== q[1]) points.push(q);
  }
  if (stroke.closed) {
    while (points.length > 1 && points[0]?.[0] === points.at(-1)?.[0] && points[0]?.[1] === points.at(-1)?.[1])
      points.pop();
    if (points.length < 3) {
      throw new PlanError(
        "papers-outline",
        `${drawing.name}: an outline has ${points.length} distinct points; a piece of cloth needs at least 3. Check the panel's allowances and set-backs.`,
        drawing.name,
        { points: points.length, limit: 3 },
      );
    }
  }
  if (points.length > 1) drawing.strokes.push({ ...stroke, points });
}

/** Adds a label, its text made plain; an empty one is dropped. */
export function addLabelInPlace(drawing: Drawing, label: Label): void {
  const text = plainText(label.text);
  if (text !== "") drawing.labels.push({ ...label, text, at: rounded(label.at, drawing.name) });
}

function pieceKey(a: Vec2, b: Vec2): string {
  const forward = a[0] < b[0] || (a[0] === b[0] && a[1] < b[1]);
  return forward ? `${a[0]},${a[1]} ${b[0]},${b[1]}` : `${b[0]},${b[1]} ${a[0]},${a[1]}`;
}

/**
 * The drawing without any piece of line that is drawn before: a mark on the cut line, or on another mark, goes; cut lines all
 * stay. A stroke that loses a piece falls into open runs.
 */
export function withoutRepeats(drawing: Drawing): Drawing {
  const drawn = new Set<string>();
  for (const s of drawing.strokes) {
    if (s.layer !== "cut") continue;
    s.points.forEach((p, i) => {
      const q = s.points[i + 1] ?? (s.closed ? s.points[0] : undefined);
      if (q) drawn.add(pieceKey(p, q));
    });
  }
  const strokes = drawing.strokes.flatMap((s) => (s.layer === "mark" ? freshRuns(s, drawn) : [s]));
  return { ...drawing, strokes };
}

function freshRuns(stroke: Stroke, drawn: Set<string>): Stroke[] {
  const ring = stroke.closed ? [...stroke.points, stroke.points[0]] : stroke.points;
  const runs: Vec2[][] = [];
  let run: Vec2[] = [];
  for (let i = 0; i + 1 < ring.length; i++) {
    const a = ring[i];
    const b = ring[i + 1];
    const key = pieceKey(a, b);
    if (drawn.has(key)) {
      if (run.length > 1) runs.push(run);
      run = [];
    } else {
      drawn.add(key);
      if (run.length === 0) run.push(a);
      run.push(b);
    }
  }
  if (run.length > 1) runs.push(run);
  if (stroke.closed && runs.length === 1 && run.length === ring.length) return [stroke];
  return runs.map((points) => ({ layer: stroke.layer, points, closed: false }));
}

/** Share of the text height that one character takes on average; wide, so that a box is rather too large (own argument). */
const CHARACTER = 0.95;

/** Length of a text at a capital height, estimated from its characters. */
export function textLength(text: string, height: number): number {
  return text.length * height * CHARACTER;
}

function labelCorners(label: Label): Vec2[] {
  const length = textLength(label.text, label.height);
  const from = label.anchor === "start" ? 0 : label.anchor === "end" ? -length : -length / 2;
  const c = Math.cos((label.rotation * Math.PI) / 180);
  const s = Math.sin((label.rotation * Math.PI) / 180);
  return [from, from + length].flatMap((u) =>
    [-label.height, label.height].map((v): Vec2 => [label.at[0] + c * u - s * v, label.at[1] + s * u + c * v]),
  );
}

/** Lower left and upper right corner of everything drawn, texts included by estimate. */
export function extents(drawing: Drawing): { min: Vec2; max: Vec2 } {
  const min: Vec2 = [Infinity, Infinity];
  const max: Vec2 = [-Infinity, -Infinity];
  const take = (x: number, y: number) => {
    min[0] = Math.min(min[0], x);
    min[1] = Math.min(min[1], y);
    max[0] = Math.max(max[0], x);
    max[1] = Math.max(max[1], y);
  };
  for (const s of drawing.strokes) {
    s.points.forEach((p, i) => {
      take(p[0], p[1]);
      const next = s.points[(i + 1) % s.points.length];
      for (const q of arcReaches(p, next, s.bulges?.[i] ?? 0)) take(q[0], q[1]);
    });
  }
  for (const l of drawing.labels) for (const p of labelCorners(l)) take(p[0], p[1]);
  return min[0] <= max[0] ? { min, max } : { min: [0, 0], max: [0, 0] };
}
