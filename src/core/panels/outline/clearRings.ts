// Cloth that is taken away beside a panel's sides: set-backs, slots that free a line from a neighbour's flap, discs round anchors.
// mm. Does not: take it away (offsetOutline.ts). Source: own.
import type { Ring } from "../../records/flatPanel.ts";
import { ringArea, ringHolds } from "../../surface/ring.ts";
import type { Point } from "./sideLine.ts";
import { add, gap, type SideOffset, sidePoints, unit } from "./sideOffset.ts";

/** Width of a slot that frees a line from another side's flap, and the steps it is looked for in, mm. */
const SLOT = 10;
const SLOT_STEP = 10;

/** The cloth a set-back takes away, segment by segment, a hair less deep than the set-back so that its line stands. */
export function setBackRings(net: Ring, side: SideOffset): Ring[] {
  const line = sidePoints(net, side);
  const depth = side.distance + 0.01;
  const inward = line.slice(1).map((q, i) => {
    const t = unit(line[i], q);
    return (p: Point): Point => add(p, [t[1], -t[0]], depth);
  });
  const rings = inward.map((move, i) =>
    Float64Array.from([...line[i], ...move(line[i]), ...move(line[i + 1]), ...line[i + 1]]),
  );
  // Between two pieces of a hollow line there is a wedge.
  for (let i = 1; i < inward.length; i++)
    rings.push(Float64Array.from([...line[i], ...inward[i - 1](line[i]), ...inward[i](line[i])]));
  return windUp(rings);
}

/**
 * Slots along a side that bears no cloth beyond its line, where another side's flap has come to lie against it in a hollow:
 * the line must be free to be cut and clamped.
 */
export function slotRings(net: Ring, side: SideOffset, ring: Ring): Ring[] {
  const line = sidePoints(net, side);
  const slots: Ring[] = [];
  let before: Point | null = null;
  line.slice(1).forEach((q, i) => {
    const p = line[i];
    const t = unit(p, q);
    const out: Point = [t[1], -t[0]];
    const steps = Math.ceil(gap(p, q) / SLOT_STEP);
    for (let k = 0; k < steps; k++) {
      const [a, b] = [k, k + 1].map((m) => add(p, t, (m * gap(p, q)) / steps));
      const middle = add(add(a, t, gap(a, b) / 2), out, 2);
      const covered = ringHolds(ring, middle[0], middle[1]);
      if (covered) slots.push(Float64Array.from([...a, ...add(a, out, SLOT), ...add(b, out, SLOT), ...b]));
      // Round a corner of the line the slot is one.
      if (covered && k === 0 && before) slots.push(Float64Array.from([...p, ...before, ...add(p, out, SLOT)]));
      before = covered ? add(b, out, SLOT) : null;
    }
  });
  return windUp(slots);
}

/** These rings counter-clockwise, without those that have no area. */
function windUp(rings: Ring[]): Ring[] {
  return rings
    .filter((r) => ringArea(r) !== 0)
    .map((r) => (ringArea(r) > 0 ? r : r.map((_, i) => r[r.length - 2 - i + 2 * (i & 1)])));
}

/** A many-sided ring round a circle, its flats no more than 0.1 mm outside. */
export function discRing(x: number, y: number, radius: number): Ring {
  const n = Math.max(16, Math.ceil(Math.PI / Math.acos(1 / (1 + 0.1 / radius))));
  const r = radius / Math.cos(Math.PI / n);
  const ring = new Float64Array(2 * n);
  for (let k = 0; k < n; k++) {
    ring[2 * k] = x + r * Math.cos((2 * Math.PI * k) / n);
    ring[2 * k + 1] = y + r * Math.sin((2 * Math.PI * k) / n);
  }
  return ring;
}
