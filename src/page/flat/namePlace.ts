// Where the name of a piece of cloth stands within its outline: on the upright line through its middle, clear of what is drawn there.
import { chordAcross } from "../../core/papers/drawing/flatGeometry.ts";
import type { Vec2 } from "../../core/records/facts.ts";

/** Places tried along the upright line, as shares of it from below, the middle first. */
const SHARES = [0.5, 0.35, 0.65, 0.22, 0.78];

/** A letter is about so wide for its height. */
const LETTER = 0.7;

/** Whether runs of points keep out of the box of a name of this width and height. */
function isClear([x, y]: Vec2, wide: number, high: number, runs: readonly (readonly Vec2[])[]): boolean {
  return runs.every((run) => {
    const xs = run.map((p) => p[0]);
    const ys = run.map((p) => p[1]);
    return (
      Math.max(...xs) < x - wide / 2 ||
      Math.min(...xs) > x + wide / 2 ||
      Math.max(...ys) < y - high / 2 ||
      Math.min(...ys) > y + high / 2
    );
  });
}

/**
 * Middle of the name, and how much cloth there is above and below together, both in the outline's units. `avoid`: runs the name of
 * this height must not lie over, where that can be.
 */
export function namePlace(
  outline: readonly Vec2[],
  avoid: { runs: readonly (readonly Vec2[])[]; name: string; height: number } = { runs: [], name: "", height: 0 },
): { at: Vec2; room: number } {
  const xs = outline.map((p) => p[0]);
  const x = (Math.min(...xs) + Math.max(...xs)) / 2;
  const chord = chordAcross(outline, [x, 0], [0, 1]);
  if (chord === null) return { at: outline[0] ?? [0, 0], room: 0 };
  const [[, low], [, high]] = chord;
  const wide = LETTER * avoid.height * avoid.name.length;
  const places = SHARES.map((share): Vec2 => [x, low + share * (high - low)]);
  const at = places.find((p) => isClear(p, wide, 1.2 * avoid.height, avoid.runs)) ?? places[0];
  return { at, room: high - low };
}
