// The rolls station: real outlines nested on rolls, 0 or 180 degrees along the warp, least cloth first.
// Limited by steps, so that one job gives one layout; a stop from outside ends it with the best layout so far.
// Does not: cut, draw, or know where pieces come from. Source: own (constructive nest with exact slides).
import { type Check, type Finding, PlanError, type StationContext, type StationResult } from "../problem.ts";
import type { NestDecision } from "../records/job.ts";
import type { NestedRoll, NestPiece, Placement, StockRoll } from "../records/roll.ts";
import { type Bed, type BedSize, bedReach, type LaidShape } from "./bed.ts";
import { checkComplete, checkRoll } from "./checkRolls.ts";
import { cutOrder } from "./cutOrder.ts";
import { type Layout, layPieces, type NestTask } from "./layPieces.ts";
import { layPins } from "./layPins.ts";
import { boundLength } from "./lowerBound.ts";
import { buildShape, clothArea, placementOf } from "./nestShape.ts";
import { type OfferedRoll, offerRolls } from "./offerRolls.ts";
import { searchOrders } from "./searchOrders.ts";
import { shortenLayout } from "./shortenLayout.ts";
import { sortPieces, stopFinding, suits, usableWidth } from "./sortPieces.ts";
import { proposeBatches } from "./splitBatches.ts";

/** Columns across which the raster resolves the roll's width, and the mean piece's length at least. */
const COLUMNS_A_WIDTH = 128;
const COLUMNS_A_PIECE = 48;

function bedSize(roll: StockRoll, gap: number, dx: number, slack: number): BedSize {
  return {
    start: roll.start,
    length: roll.length,
    width: usableWidth(roll),
    gap,
    dx,
    snap: 0,
    slack,
    flaws: roll.flaws,
  };
}

function buildTask(
  pieces: NestPiece[],
  offers: OfferedRoll[],
  pins: LaidShape[][],
  options: NestDecision,
): Omit<NestTask, "stop"> {
  const rotations = options.turn ? [0, 180] : [0];
  const keys = new Map<string, string>();
  const shapes = pieces.map((piece) => {
    const text = piece.cut.join(",");
    const key = keys.get(text) ?? piece.id;
    keys.set(text, key);
    return rotations.map((r) => buildShape(piece.cut, r, key));
  });
  const slack = Math.max(0, ...shapes.flat().map((s) => s.slack));
  const meanLength = shapes.reduce((sum, s) => sum + s[0].length, 0) / Math.max(1, shapes.length);
  const width = Math.min(...offers.map((o) => usableWidth(o.roll)));
  const dx = Math.min(width / COLUMNS_A_WIDTH, meanLength / COLUMNS_A_PIECE);
  const pinned = new Set(pins.flat().map((p) => p.piece));
  return {
    shapes,
    areas: pieces.map((p) => clothArea(p.cut)),
    offers: offers.map((o, i) => ({
      size: bedSize(o.roll, options.gap, dx, slack),
      takes: (piece) => o.takes.has(piece),
      pins: pins[i],
    })),
    loose: pieces.map((_, i) => i).filter((i) => !pinned.has(i)),
    store: new Map(),
  };
}

/** A filled bed as the record of its roll. */
function recordRoll(bed: Bed, roll: StockRoll, pieces: NestPiece[], bite: number | null): NestedRoll {
  const { order, feeds } = cutOrder(
    bed.laid.map((p) => ({ id: pieces[p.piece].id, x0: p.x, x1: p.x + p.shape.length, y0: p.y })),
    bite,
  );
  const placements = bed.laid.map(
    (p): Placement => ({
      panel: pieces[p.piece].id,
      rotation: p.shape.rotation === 180 ? 180 : 0,
      ...placementOf(p.shape, p.x, p.y),
      order: order.indexOf(pieces[p.piece].id) + 1,
    }),
  );
  const cuts = bed.laid.map((p) => pieces[p.piece].cut);
  const used = bedReach(bed);
  const area = cuts.reduce((sum, c) => sum + clothArea(c), 0);
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
    // A perfect tiling meets its bound to the last bits; only those are taken back here.
    lowerBound: Math.min(boundLength(cuts, usableWidth(roll), bed.gap, roll.start), used * (1 + 1e-9)),
    remnant: Math.max(0, roll.length - used),
    bite,
    feeds,
  };
}

/** How much more cloth is needed for what is left over, nested on an endless roll of its widest kind. */
function shortage(left: number[], pieces: NestPiece[], task: NestTask, stock: StockRoll[]): Finding[] {
  const kinds = new Map<string, number[]>();
  for (const p of left) {
    const key = JSON.stringify([pieces[p].fabric, pieces[p].batch]);
    kinds.set(key, [...(kinds.get(key) ?? []), p]);
  }
  return [...kinds.values()].map((group) => {
    const piece = pieces[group[0]];
    const rolls = stock.filter((r) => suits(piece, r));
    const roll = rolls.reduce((a, b) => (usableWidth(b) > usableWidth(a) ? b : a));
    const { gap, dx, slack } = task.offers[0].size;
    const size = { ...bedSize(roll, gap, dx, slack), length: Infinity, start: 0, flaws: [] };
    const one = { ...task, stop: () => false, offers: [{ size, takes: () => true, pins: [] }] };
    const order = [...group].sort((a, b) => task.areas[b] - task.areas[a] || a - b);
    const metres = bedReach((layPieces(one, order, "least x", null) as { beds: Bed[] }).beds[0]) / 1000;
    const names = group.map((p) => pieces[p].id);
    const cloth = `${piece.fabric}${piece.batch === null ? "" : `, batch ${piece.batch}`}`;
    return stopFinding("roll-short", names, metres, null, {
      text: `The rolls of ${cloth} end ${metres.toFixed(1)} m (at ${usableWidth(roll)} mm usable) too early: ${names.join(", ")} left over.`,
      remedy: "Add a roll, or a longer one, to the stock.",
    });
  });
}

/** Cloth and density of a layout, in words. */
function wordsOf(layout: Layout): string {
  const filled = layout.beds.filter((b) => b.laid.length > 0);
  const metres = filled.reduce((sum, b) => sum + bedReach(b), 0) / 1000;
  const cloth = filled.reduce((sum, b) => sum + bedReach(b) * b.width, 0);
  const area = filled.flatMap((b) => b.laid).reduce((sum, p) => sum + clothArea(p.shape.ring), 0);
  return `${metres.toFixed(2)} m, ${((100 * area) / cloth).toFixed(1)} % of the usable cloth`;
}

/** Ids of copies run on without a hole where no pin names one. */
function closeNumbering(rolls: NestedRoll[], offers: OfferedRoll[], pinned: boolean): NestedRoll[] {
  if (pinned) return rolls;
  const fresh = offers.filter((o) => o.roll.assumed).map((o) => o.roll.id);
  let next = 0;
  return rolls.map((r) => (fresh.includes(r.id) ? { ...r, id: fresh[next++] } : r));
}

/**
 * Pieces nested on rolls; what cannot be laid is named in a stop.
 * @units mm
 * @throws PlanError cancelled: told to stop before the first layout was built; pin-… (layPins.ts)
 */
export function runRolls(
  pieces: NestPiece[],
  stock: StockRoll[],
  options: NestDecision,
  context: StationContext = {},
): StationResult<NestedRoll[]> {
  const { fit, findings } = sortPieces(pieces, stock, options);
  const offers = offerRolls(
    stock,
    fit,
    options.pins.map((p) => p.roll),
  );
  const pins = layPins(fit, offers, options);
  const checks: Check[] = [];
  if (fit.length === 0) return { output: [], findings, checks: [checkComplete([], pieces)] };
  let told = false;
  const stop = () => {
    told = told || (context.cancelled?.() ?? false);
    return told;
  };
  const task = { ...buildTask(fit, offers, pins, options), stop };
  const { steps, seed } = options;
  let done = 0;
  const tell = (count: number, layout: Layout | null) => {
    done = count;
    context.onProgress?.(count / (2 * steps), `nest ${count} of ${2 * steps}${layout ? `: ${wordsOf(layout)}` : ""}`);
  };
  const found = searchOrders(task, { steps, seed, onStep: tell });
  if (!found) throw new PlanError("cancelled", "Nesting was stopped before the first layout was built.", "rolls");
  const best = shortenLayout(found.layout, task, { steps, seed, onStep: (k, layout) => tell(steps + k, layout) });
  if (!told) tell(2 * steps, best);
  if (told)
    findings.push({
      ...stopFinding("nest-cut-short", "nest", done, 2 * steps, {
        text: `Nesting was stopped after ${done} of ${2 * steps} layouts tried: this is the best of them.`,
        remedy: "Run again without the cap for the layout the steps alone would give.",
      }),
      level: "note",
    });
  const filled = best.beds.map((bed, i) => ({ bed, roll: offers[i].roll })).filter(({ bed }) => bed.laid.length > 0);
  const rolls = filled.map(({ bed, roll }) => recordRoll(bed, roll, fit, options.bite));
  const byId = new Map(fit.map((p) => [p.id, p]));
  const output = closeNumbering(rolls, offers, options.pins.length > 0);
  output.forEach((roll, i) => {
    const verdict = checkRoll(roll, filled[i].roll.start, byId);
    checks.push(...verdict.checks);
    findings.push(...verdict.findings);
  });
  findings.push(...proposeBatches(best, task, offers, fit, options));
  findings.push(...shortage(best.left, fit, task, stock));
  checks.push(checkComplete(output, pieces));
  return { output, findings, checks };
}
