// First flat points of a strip: unfolded, turned so that its axis lies along the warp, taken back by the intended strain.
// Knows no cloth; flattenSolve.ts does the rest.
import { PlanError } from "../../problem.ts";
import { unfoldSurface } from "../../surface/unfold.ts";
import type { LocalStrip } from "./localStrip.ts";

/**
 * Flat points of the relaxed cloth to start the flattening from: axis at `turn` degrees from x, sizes divided by 1 + elastic strain.
 * @shape 2*n, unfolded too: the strip laid flat without a fold, where it is known @units m
 * @throws PlanError strip-axis: the two ends have one mean point; panel-disc, panel-fold (unfoldSurface), the strip named
 */
export function buildFlattenStart(
  strip: LocalStrip,
  turn: number,
  elastic: { warp: number; weft: number },
  unfolded?: Float64Array<ArrayBuffer>,
): Float64Array<ArrayBuffer> {
  const xy = unfolded ?? unfold(strip);
  const a = meanOf(xy, strip.from);
  const b = meanOf(xy, strip.to);
  const length = Math.sqrt((b[0] - a[0]) ** 2 + (b[1] - a[1]) ** 2);
  let reach = 0;
  for (let i = 0; i < xy.length; i++) reach = Math.max(reach, Math.abs(xy[i] - a[i % 2]));
  if (!(length > 1e-9 * reach)) {
    throw new PlanError(
      "strip-axis",
      `the two ends of strip ${strip.id} have one mean point (${length} m apart): it has no axis to lay along the warp; give it other ends`,
      strip.id,
    );
  }
  const c = (b[0] - a[0]) / length;
  const s = (b[1] - a[1]) / length;
  const cosTurn = Math.cos((turn * Math.PI) / 180);
  const sinTurn = Math.sin((turn * Math.PI) / 180);
  const out = new Float64Array(xy.length);
  for (let i = 0; i < xy.length; i += 2) {
    const along = c * (xy[i] - a[0]) + s * (xy[i + 1] - a[1]);
    const across = c * (xy[i + 1] - a[1]) - s * (xy[i] - a[0]);
    out[i] = (cosTurn * along - sinTurn * across) / (1 + elastic.warp);
    out[i + 1] = (sinTurn * along + cosTurn * across) / (1 + elastic.weft);
  }
  return out;
}

function meanOf(xy: Float64Array<ArrayBuffer>, group: number[]): [number, number] {
  let x = 0;
  let y = 0;
  for (const v of group) {
    x += xy[2 * v] / group.length;
    y += xy[2 * v + 1] / group.length;
  }
  return [x, y];
}

/** unfoldSurface, its refusals under the strip's name. */
function unfold(strip: LocalStrip): Float64Array<ArrayBuffer> {
  try {
    return unfoldSurface(strip.erected, strip.tri);
  } catch (error) {
    if (!(error instanceof PlanError)) throw error;
    throw new PlanError(error.code, `strip ${strip.id}: ${error.message}`, strip.id, error.facts);
  }
}
