// Whether another split of the panels between batches would save cloth: a proposal only, since a panel is patterned for its batch.
// Does not: change a panel's batch; the job decides. Source: own (the nest once more, batches left free).
import type { Finding } from "../problem.ts";
import type { NestPiece } from "../records/roll.ts";
import type { Layout, NestTask } from "./layPieces.ts";
import type { OfferedRoll } from "./offerRolls.ts";
import { searchOrders } from "./searchOrders.ts";

/** A saving worth a word: share of the cloth. */
const WORTH = 0.02;
/** Layouts tried at most. */
const STEPS = 24;

/** The panels that would change their batch, by the batch they would go to; what follows a panel has no batch of its own. */
function changesOf(layout: Layout, offers: OfferedRoll[], pieces: NestPiece[]): Map<string, string[]> {
  const changes = new Map<string, string[]>();
  layout.beds.forEach((bed, i) => {
    const batch = offers[i].roll.batch;
    if (batch === null) return;
    for (const { piece } of bed.laid) {
      const { id, batch: own, follows } = pieces[piece];
      if (!follows && own !== null && own !== batch) changes.set(batch, [...(changes.get(batch) ?? []), id]);
    }
  });
  return changes;
}

/** A note on the split that would save cloth, if one was found. */
export function proposeBatches(
  layout: Layout,
  task: NestTask,
  offers: OfferedRoll[],
  pieces: NestPiece[],
  limits: { steps: number; seed: number },
): Finding[] {
  const listed = offers.every((o) => !o.roll.assumed) && task.offers.every((o) => o.pins.length === 0);
  const batches = new Set(offers.map((o) => o.roll.batch));
  if (!listed || batches.size < 2 || pieces.every((p) => p.batch === null) || task.stop()) return [];
  const free: NestTask = {
    ...task,
    offers: task.offers.map((o, i) => ({ ...o, takes: (p) => pieces[p].fabric === offers[i].roll.fabric })),
  };
  const found = searchOrders(free, { steps: Math.min(STEPS, limits.steps), seed: limits.seed });
  if (!found) return [];
  const changes = changesOf(found.layout, offers, pieces);
  const [was, would] = [layout.cost, found.layout.cost];
  const saves = (was.cloth - would.cloth) / 1e6;
  const lays = was.left > would.left;
  if (changes.size === 0 || would.left > was.left || (!lays && was.cloth - would.cloth < WORTH * was.cloth)) return [];
  const moves = [...changes].map(([batch, ids]) => `${ids.join(", ")} for batch ${batch}`).join("; ");
  const gain = lays ? "more of the panels would find room" : `${saves.toFixed(1)} m² of cloth would be saved`;
  return [
    {
      code: "batch-split",
      level: "note",
      station: "rolls",
      where: [...changes.values()].flat(),
      value: saves,
      limit: null,
      text: `With another split between batches ${gain}: pattern ${moves}.`,
      remedy:
        "Set panels.NAME.batch in the job if these panels may be of that batch: they are then flattened by its own test.",
      basis: "own argument",
    },
  ];
}
