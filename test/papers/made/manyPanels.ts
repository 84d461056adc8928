// The sample many times over, its names of sixty letters: papers of a large roof, to see what overflows and how long they take.
import type { Facts } from "../../../src/core/records/facts.ts";
import { sampleFacts } from "./sampleFacts.ts";

/** Sixty letters that differ at their end only. */
export function longName(what: string, n: number): string {
  const tail = ` ${what}${n}`;
  return `Eastern grandstand roof over the upper tier, field of panels`.slice(0, 60 - tail.length) + tail;
}

/** So many panels, three a bay, each bay with its two seams and two rolls. */
export function manyPanels(count: number): Facts {
  const bays = Array.from({ length: Math.ceil(count / 3) }, (_, b) => {
    const name = (what: string, k: number) => longName(what, 10 * b + k);
    const names = {
      ...Object.fromEntries([1, 2, 3].map((k) => [`P${k}`, name("P", k)])),
      ...Object.fromEntries(
        [1, 2].flatMap((k) => [
          [`S${k}`, name("S", k)],
          [`R${k}`, name("R", k)],
        ]),
      ),
    };
    const facts = sampleFacts({ names, stop: false });
    facts.pieces = facts.pieces!.map((p) => ({ ...p, id: name("C", 1) }));
    for (const roll of facts.rolls!) for (const p of roll.placements) if (p.panel === "C1") p.panel = name("C", 1);
    return facts;
  });
  const first = bays[0]!;
  return {
    ...first,
    panels: bays.flatMap((f) => f.panels!).slice(0, count),
    seams: bays.flatMap((f) => f.seams!),
    pieces: bays.flatMap((f) => f.pieces!),
    rolls: bays
      .flatMap((f) => f.rolls!)
      .filter((r) =>
        r.placements.every(
          (p) =>
            /C\d+$/.test(p.panel) ||
            bays
              .flatMap((f) => f.panels!)
              .slice(0, count)
              .some((q) => q.id === p.panel),
        ),
      ),
  };
}
