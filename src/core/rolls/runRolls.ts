// The rolls station: real outlines nested on rolls, 0 or 180 degrees along the warp, least cloth first.
// Limited by steps, so that one job gives one layout; a stop from outside ends it with the best layout so far.
// Does not: cut, draw, or know where pieces come from. Source: own (constructive nest with exact slides).
import { type Check, type Finding, PlanError, type StationContext, type StationResult } from "../problem.ts";
import type { NestDecision } from "../records/job.ts";
import type { NestedRoll, NestPiece, StockRoll } from "../records/roll.ts";
import { type Bed, type BedSize, bedReach, type LaidShape } from "./bed.ts";
import { checkComplete, checkRoll } from "./checkRolls.ts";
import { isLess, type Layout, layPieces, type NestTask, takesNoMore } from "./layPieces.ts";
import { layPins } from "./layPins.ts";
import { buildShape, clothArea } from "./nestShape.ts";
import { type OfferedRoll, offerRolls } from "./offerRolls.ts";
import type { WorkShares } from "./relax/relaxBed.ts";
import { boundAll, measureDensity, recordRoll } from "./rollFigures.ts";
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
    overall: roll.width,
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

/**
 * How much more cloth is needed for what is left over, nested on an endless roll of its widest kind: on a new roll with its trim, or at the
 * end of one that is longer by as much, a gap behind what lies there.
 */
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
    const begins = Math.max(roll.start, gap);
    const size = { ...bedSize(roll, gap, dx, slack), length: Infinity, start: begins, flaws: [] };
    const one = { ...task, stop: () => false, offers: [{ size, takes: () => true, pins: [] }] };
    const order = [...group].sort((a, b) => task.areas[b] - task.areas[a] || a - b);
    const metres = bedReach((layPieces(one, { order, rule: "least x" }, null) as { beds: Bed[] }).beds[0]) / 1000;
    const names = group.map((p) => pieces[p].id);
    const cloth = `${piece.fabric}${piece.batch === null ? "" : `, batch ${piece.batch}`}`;
    return stopFinding("roll-short", names, metres, null, {
      text: `The rolls of ${cloth} end ${(Math.ceil(metres * 10 - 1e-6) / 10).toFixed(1)} m (at ${usableWidth(roll)} mm usable) too early: ${names.join(", ")} left over.`,
      remedy: "Add a roll, or a longer one, to the stock.",
    });
  });
}

/** Ids of copies run on without a hole where no pin names one. */
function closeNumbering(rolls: NestedRoll[], offers: OfferedRoll[], pinned: boolean): NestedRoll[] {
  if (pinned) return rolls;
  const fresh = offers.filter((o) => o.roll.assumed).map((o) => o.roll.id);
  let next = 0;
  return rolls.map((r) => (fresh.includes(r.id) ? { ...r, id: fresh[next++] } : r));
}

/**
 * The best layout of a search, which takes no more cloth than the constructive nest whenever it is stopped.
 * @throws PlanError cancelled: told to stop before the first layout was built
 */
function nestBest(
  task: NestTask,
  { steps, seed }: NestDecision,
  tell: (done: number, layout: Layout | null) => void,
  work: WorkShares | undefined,
): Layout {
  const limits = { steps: 0, seed, onStep: () => {}, ...(work ? { work } : {}) };
  const first = searchOrders(task, { steps: 1, seed });
  if (!first) throw new PlanError("cancelled", "Nesting was stopped before the first layout was built.", "rolls");
  const nest = shortenLayout(first.layout, task, limits);
  const found = searchOrders(task, { steps, seed, onStep: tell })?.layout ?? nest;
  const start = isLess(found.cost, nest.cost) ? found : nest;
  const best = shortenLayout(start, task, { ...limits, steps, onStep: (k, layout) => tell(steps + k, layout) });
  return takesNoMore(best.cost, nest.cost) ? best : nest;
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
  const { steps } = options;
  const bound = boundAll(fit, stock, options.gap);
  let done = 0;
  const tell = (count: number, layout: Layout | null) => {
    if (told) return;
    done = count;
    const words = `nest ${count} of ${2 * steps}`;
    if (!layout) return context.onProgress?.(count / (2 * steps), words);
    const seconds = context.elapsed?.();
    const figures = { ...measureDensity(layout), bound, ...(seconds === undefined ? {} : { elapsed: seconds }) };
    const { length, density } = figures;
    const clock = seconds === undefined ? "" : `, ${seconds.toFixed(0)} s`;
    const line = `${words}: ${length.toFixed(2)} m, ${(100 * density).toFixed(1)} % full, at least ${bound.toFixed(2)} m${clock}`;
    context.onProgress?.(count / (2 * steps), line, figures);
  };
  const best = nestBest(task, options, tell, context.workShares as WorkShares | undefined);
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
  const rolls = filled.map(({ bed, roll }) => recordRoll(bed, roll, fit, options));
  const byId = new Map(fit.map((p) => [p.id, p]));
  const pinned = new Set(options.pins.map((p) => p.panel));
  const output = closeNumbering(rolls, offers, pinned.size > 0);
  output.forEach((roll, i) => {
    const verdict = checkRoll(roll, filled[i].roll.start, byId, pinned);
    checks.push(...verdict.checks);
    findings.push(...verdict.findings);
  });
  findings.push(...proposeBatches(best, task, offers, fit, options));
  findings.push(...shortage(best.left, fit, task, stock));
  checks.push(checkComplete(output, pieces));
  return { output, findings, checks };
}
