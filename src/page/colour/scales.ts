// Colour scales that people with colour-blindness can read, as data from the open literature, and which field takes which.
// Sources: viridis by S. van der Walt and N. Smith (matplotlib, CC0), ten samples; cividis by J. Nuñez, C. Anderton and
// R. Renslow, "Optimizing colormaps with consideration for color vision deficiency", PLoS ONE 13(7), 2018, ten samples;
// purple-orange of M. Harrower and C. Brewer, "ColorBrewer.org", The Cartographic Journal 40(1), 2003, eleven classes.
import type { FieldName } from "../store/bookStore.ts";

const VIRIDIS = ["440154", "482878", "3e4989", "31688e", "26828e", "1f9e89", "35b779", "6ece58", "b5de2b", "fde725"];
const CIVIDIS = ["00224e", "123570", "3b496c", "575d6d", "707173", "8a8678", "a59c74", "c3b369", "e1cc55", "fee838"];
const PURPLE_ORANGE = [
  "2d004b",
  "542788",
  "8073ac",
  "b2abd2",
  "d8daeb",
  "f7f7f7",
  "fee0b6",
  "fdb863",
  "e08214",
  "b35806",
  "7f3b08",
];

/** A scale laid over values. */
export interface Scale {
  /** Hex colours, evenly spaced from min to max. */
  stops: readonly string[];
  min: number;
  max: number;
  unit: string;
  title: string;
  /** What the values are held against, in words. */
  against: string;
}

/** Least and greatest of what is a number. */
function span(values: Float32Array): [number, number] {
  let [min, max] = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
  for (const v of values) {
    if (v < min) min = v;
    if (v > max) max = v;
  }
  return min <= max ? [min, max] : [0, 1];
}

/** The scale of a field. @param target wanted stress, kN/m: the middle of the stress scales */
export function scaleOf(field: FieldName, values: Float32Array, target: { warp: number; weft: number }): Scale | null {
  const [min, max] = span(values);
  switch (field) {
    case "none":
      return null;
    case "residual":
      return {
        stops: VIRIDIS,
        min: 0,
        max: Math.max(max, 1e-12),
        unit: "",
        title: "Out of balance",
        against: "share of the mean force of the cloth at a point; 0 is balance",
      };
    case "curvature": {
      const reach = Math.max(Math.abs(min), Math.abs(max), 1e-9);
      return {
        stops: CIVIDIS,
        min: Math.min(min, 0),
        max: Math.max(max, min + 1e-9 * reach),
        unit: "1/m²",
        title: "Curvature (Gauss)",
        against: "below 0 a saddle, above 0 a dome, 0 flat or one-way",
      };
    }
    default: {
      const weft = field === "weft" || field === "builtWeft";
      const middle = weft ? target.weft : target.warp;
      const reach = Math.max(max - middle, middle - min, 0.05 * middle);
      const built = field === "builtWarp" || field === "builtWeft";
      return {
        stops: PURPLE_ORANGE,
        min: middle - reach,
        max: middle + reach,
        unit: "kN/m",
        title: `${weft ? "Weft" : "Warp"} stress ${built ? "as built" : "as patterned"}`,
        against: `middle: the wanted ${middle.toFixed(2)} kN/m`,
      };
    }
  }
}

function channel(hex: string, k: number): number {
  return Number.parseInt(hex.slice(2 * k, 2 * k + 2), 16) / 255;
}

/** Colour of a value, red, green, blue 0…1 as they stand on a screen (sRGB); grey where there is no value. */
export function colourOf(scale: Scale, value: number): [number, number, number] {
  if (Number.isNaN(value)) return [0.62, 0.62, 0.62];
  const last = scale.stops.length - 1;
  const at = Math.min(Math.max(((value - scale.min) / (scale.max - scale.min)) * last, 0), last);
  const i = Math.min(Math.floor(at), last - 1);
  const mix = (k: number) =>
    channel(scale.stops[i] ?? "0", k) * (1 - at + i) + channel(scale.stops[i + 1] ?? "0", k) * (at - i);
  return [mix(0), mix(1), mix(2)];
}
