// A nest's shape as the relaxed search sees it: its convex parts, from a cover of fewer points where it has many. The search errs
// on the safe side by what the cover adds; exact slides take that back afterwards. Source: own.
import type { PlaneRing } from "../../surface/ring.ts";
import { hullRing, type NestShape } from "../nestShape.ts";
import { convexParts } from "./convexParts.ts";
import { coverRing } from "./coverRing.ts";
import type { StripShape } from "./strip.ts";

/** Shapes of more parts than this are covered, finely at first; these are shares of the lesser extent. */
const PARTS = 10;
const COVERS = [5e-4, 1e-3, 2e-3, 4e-3, 8e-3, 1.6e-2];
/** Corners of a cover that are left alone. */
const FEW = 24;

/** Rings of more points are not even taken apart before they are covered. */
const MANY = 48;

/** The shape with its convex parts. */
export function buildStripShape(shape: NestShape): StripShape {
  const { length, height, slack } = shape;
  let best = { ring: shape.ring, over: 0 };
  let parts: PlaneRing[] | null = null;
  for (const share of [0, ...COVERS]) {
    if (share > 0) best = coverRing(shape.ring, share * Math.min(length, height), FEW);
    if (best.ring.length / 2 > MANY) continue;
    parts = convexParts(best.ring);
    if (parts.length <= PARTS && parts.reduce((sum, p) => sum + p.length / 2, 0) <= 2 * FEW) break;
  }
  return { length, height, parts: parts ?? [hullRing(shape.ring)], slack, over: best.over };
}
