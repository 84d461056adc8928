// What a filled roll comes to, and all of them together: record, cost, bounds, and the figures told on the way.
// Does not: nest.
import type { NestDecision } from "../records/job.ts";
import type { ClothTotal, NestedRoll, NestPiece, Placement, StockRoll } from "../records/roll.ts";
import { type Bed, bedReach } from "./bed.ts";
import { cutOrder } from "./cutOrder.ts";
import type { Layout } from "./layPieces.ts";
import { boundLength } from "./lowerBound.ts";
import { clothArea, placementOf } from "./nestShape.ts";
import { usableWidth } from "./sortPieces.ts";

/** A perfect tiling meets its bound to the last bits; only those are taken back, a false bound shows. */
function notPast(used: number, bound: number): number {
  return bound > used && bound < used * (1 + 1e-6) ? used : bound;
}

/** A filled bed as the record of its roll. */
export function recordRoll(bed: Bed, roll: StockRoll, pieces: NestPiece[], options: NestDecision): NestedRoll {
  const { bite } = options;
  const { order, feeds } = cutOrder(
    bed.laid.map((p) => ({ id: pieces[p.piece].id, x0: p.x, x1: p.x + p.shape.length, y0: p.y })),
    bite,
  );
  const place = new Map(order.map((id, k) => [id, k + 1]));
  const placements = bed.laid.map(
    (p): Placement => ({
      panel: pieces[p.piece].id,
      rotation: p.shape.rotation === 180 ? 180 : 0,
      ...placementOf(p.shape, p.x, p.y),
      order: place.get(pieces[p.piece].id) ?? 0,
    }),
  );
  const cuts = bed.laid.map((p) => pieces[p.piece].cut);
  const used = bedReach(bed);
  const area = cuts.reduce((sum, c) => sum + clothArea(c), 0);
  const price = roll.price ?? options.price ?? null;
  return {
    id: roll.id,
    fabric: roll.fabric,
    batch: roll.batch,
    width: roll.width,
    usableWidth: usableWidth(roll),
    length: roll.length,
    used,
    gap: bed.gap,
    flaws: roll.flaws,
    placements: placements.sort((a, b) => (a.panel < b.panel ? -1 : a.panel > b.panel ? 1 : 0)),
    utilisation: area / (used * roll.width),
    lowerBound: notPast(used, boundLength(cuts, usableWidth(roll), bed.gap, roll.start)),
    remnant: Math.max(0, roll.length - used),
    start: roll.start,
    ...(roll.outerFace === "down" ? { outerFace: roll.outerFace } : {}),
    bite,
    feeds,
    ...(price === null ? {} : { cost: (price * used * roll.width) / 1e6, currency: options.currency ?? null }),
  };
}

/** Length in all, m, below which no nest of these pieces on any rolls of this stock can come: each cloth on its widest roll. */
export function boundAll(pieces: NestPiece[], stock: StockRoll[], gap: number): number {
  let sum = 0;
  for (const fabric of new Set(pieces.map((p) => p.fabric))) {
    const own = stock.filter((r) => r.fabric === fabric);
    if (own.length === 0) continue;
    const cuts = pieces.filter((p) => p.fabric === fabric).map((p) => p.cut);
    const rolls = own.some((r) => r.assumed) ? cuts.length : own.length;
    sum += boundLength(cuts, Math.max(...own.map(usableWidth)), gap, Math.min(...own.map((r) => r.start)), rolls);
  }
  return sum / 1000;
}

/** All rolls together. */
export function totalCloth(rolls: NestedRoll[], pieces: NestPiece[], stock: StockRoll[], gap: number): ClothTotal {
  const laid = new Set(rolls.flatMap((r) => r.placements.map((p) => p.panel)));
  const own = pieces.filter((p) => laid.has(p.id));
  const taken = rolls.reduce((sum, r) => sum + r.used * r.width, 0) / 1e6;
  const area = own.reduce((sum, p) => sum + clothArea(p.cut), 0) / 1e6;
  const priced = rolls.length > 0 && rolls.every((r) => typeof r.cost === "number");
  const used = rolls.reduce((sum, r) => sum + r.used, 0) / 1000;
  return {
    used,
    bound: notPast(used, boundAll(own, stock, gap)),
    taken,
    area,
    utilisation: taken > 0 ? area / taken : 0,
    cost: priced ? rolls.reduce((sum, r) => sum + (r.cost as number), 0) : null,
    currency: rolls[0]?.currency ?? null,
  };
}

/** Length, m, and density of a layout on the usable cloth. */
export function measureDensity(layout: Layout): { length: number; density: number } {
  const filled = layout.beds.filter((b) => b.laid.length > 0);
  const cloth = filled.reduce((sum, b) => sum + bedReach(b) * b.width, 0);
  const area = filled.flatMap((b) => b.laid).reduce((sum, p) => sum + clothArea(p.shape.ring), 0);
  return { length: filled.reduce((sum, b) => sum + bedReach(b), 0) / 1000, density: cloth > 0 ? area / cloth : 0 };
}
