// Where a panel that was moved by hand may lie: on the usable cloth, to a tenth of a millimetre. Pure numbers.
import type { Vec2 } from "../../core/records/facts.ts";
import type { NestedRoll, Placement } from "../../core/records/roll.ts";

/** The nearest tenth to a value that keeps lo + value and hi + value within 0 and room; the value where nothing fits. */
function keepWithin(value: number, lo: number, hi: number, room: number): number {
  const least = Math.ceil(-10 * lo) / 10;
  const most = Math.floor(10 * (room - hi)) / 10;
  return least > most ? value : Math.min(Math.max(Math.round(10 * value) / 10, least), most);
}

/** Place of a pin for a placed cut moved by dx, dy mm. */
export function pinPlace(
  roll: Pick<NestedRoll, "id" | "length" | "usableWidth">,
  placed: Placement,
  cut: readonly Vec2[],
  by: { dx: number; dy: number },
): { roll: string; x: number; y: number; rotation: 0 | 180 } {
  const turn = placed.rotation === 180 ? -1 : 1;
  const xs = cut.map((p) => turn * p[0]);
  const ys = cut.map((p) => turn * p[1]);
  return {
    roll: roll.id,
    x: keepWithin(placed.x + by.dx, Math.min(...xs), Math.max(...xs), roll.length),
    y: keepWithin(placed.y + by.dy, Math.min(...ys), Math.max(...ys), roll.usableWidth),
    rotation: placed.rotation,
  };
}
