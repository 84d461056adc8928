// Colours of the points of a surface by their values.
import { Color } from "three";
import { colourOf, type Scale } from "../colour/scales.ts";
import type { Colours } from "./stageOrders.ts";

/** Steps of a scale that colours are worked out for. */
const STEPS = 1024;

/** A shade 0…1 of a screen (sRGB) as a share of light. */
const lightOf = (shade: number) => new Color().setRGB(shade, 0, 0, "srgb").r;

/** Null: there are no values, or no scale for them. @param value of each point; NaN: none */
export function paintPoints(value: Float32Array, scale: Scale | null): Colours | null {
  if (scale === null || value.length === 0) return null;
  const { min, max } = scale;
  const none = STEPS + 1;
  const steps = Array.from({ length: none }, (_, i) => colourOf(scale, min + (i / STEPS) * (max - min)));
  const table = Float32Array.from([...steps, colourOf(scale, Number.NaN)].flat(), lightOf);
  const out = new Float32Array(3 * value.length);
  for (let i = 0; i < value.length; i++) {
    const at = Math.round((STEPS * (value[i] - min)) / (max - min));
    const row = 3 * (Number.isNaN(at) ? none : Math.min(Math.max(at, 0), STEPS));
    for (let k = 0; k < 3; k++) out[3 * i + k] = table[row + k];
  }
  return out;
}
