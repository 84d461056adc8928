// The relaxed search by itself: known optima, and the same layout for the same seed whoever works the shares.
import { describe, expect, it } from "vitest";
import { type Bed, bedReach } from "../../../src/core/rolls/bed.ts";
import { layPieces, type NestTask } from "../../../src/core/rolls/layPieces.ts";
import { buildShape, clothArea } from "../../../src/core/rolls/nestShape.ts";
import { openSearchOf, relaxBeds, type WorkShares } from "../../../src/core/rolls/relax/relaxBed.ts";
import { openSearch, tryShorter } from "../../../src/core/rolls/relax/shortenStrip.ts";
import { copyState, measureOverlap, setState } from "../../../src/core/rolls/relax/strip.ts";
import { type ShareOrder, workShare } from "../../../src/core/rolls/relax/workShare.ts";

/** Right triangles that pair to boxes 1000 × 500: two pairs across a strip of 1000 fill it without loss. */
const TRIANGLE = Float64Array.from([0, 0, 1000, 0, 0, 500]);

function trianglesTask(count: number, flaws: { x: number; y: number; length: number; width: number }[] = []): NestTask {
  const shapes = [0, 180].map((r) => buildShape(TRIANGLE, r, "t"));
  const size = { start: 0, length: 20_000, width: 1000, gap: 0, dx: 10, snap: 0, slack: 0, flaws };
  return {
    shapes: Array.from({ length: count }, () => shapes),
    areas: new Array(count).fill(clothArea(TRIANGLE)),
    offers: [{ size, takes: () => true, pins: [] }],
    loose: Array.from({ length: count }, (_, i) => i),
    store: new Map(),
    stop: () => false,
  };
}

/** One bed relaxed. */
const relaxBed = (bed: Bed, task: NestTask, limits: { steps: number; seed: number }, work?: WorkShares) =>
  relaxBeds([{ bed, steps: limits.steps }], task, { seed: limits.seed, onRound: () => {} }, work)[0];

/** A poor start: one triangle after the other, none turned. */
function poorBed(task: NestTask) {
  const straight = { ...task, shapes: task.shapes.map((s) => [s[0]]), store: new Map() };
  return layPieces(straight, { order: task.loose, rule: "least x" }, null)!.beds[0];
}

describe("relaxBed", () => {
  it("finds turned pairs from a start without any", () => {
    const task = trianglesTask(8);
    const bed = poorBed(task);
    const better = relaxBed(bed, task, { steps: 300, seed: 1 });
    expect(bedReach(better)).toBeLessThan(0.9 * bedReach(bed));
    expect(bedReach(better)).toBeGreaterThanOrEqual(2000 - 1e-3);
    expect(better.laid.length).toBe(8);
  });

  it("gives the same layout for the same seed, and never a longer one; a lost share costs its work only", () => {
    const task = trianglesTask(6, [{ x: 500, y: 300, length: 200, width: 200 }]);
    const run = (work?: WorkShares) => {
      const bed = relaxBed(poorBed(task), task, { steps: 120, seed: 4 }, work);
      return JSON.stringify(bed.laid.map((p) => [p.piece, p.shape.rotation, p.x, p.y]));
    };
    // Orders cross threads as copies.
    const copied = (orders: ShareOrder[]) => orders.map((o) => workShare(structuredClone(o), () => false));
    expect(run(copied)).toBe(run());
    const lost = (orders: ShareOrder[]) => orders.map((o, k) => (k === 1 ? null : workShare(o, () => false)));
    const bed = relaxBed(poorBed(task), task, { steps: 120, seed: 4 }, lost);
    expect(bed.laid.length).toBe(6);
    expect(bedReach(bed)).toBeLessThanOrEqual(bedReach(poorBed(task)));
    const none = relaxBed(poorBed(task), task, { steps: 120, seed: 4 }, (o) => o.map(() => null));
    expect(bedReach(none)).toBe(bedReach(poorBed(task)));
  });

  it("reads a state found from another start with its own pieces and turns", () => {
    const rings = [TRIANGLE, TRIANGLE.map((v) => v / 2), Float64Array.from([0, 0, 700, 0, 700, 300, 0, 300])];
    const shapes = rings.map((ring, k) => [0, 180].map((r) => buildShape(ring, r, `k${k}`)));
    const kinds = [0, 1, 2, 0, 1, 2];
    const task: NestTask = {
      ...trianglesTask(6),
      shapes: kinds.map((k) => shapes[k]),
      areas: kinds.map((k) => clothArea(rings[k])),
    };
    const bedOfOrder = (order: number[]) => layPieces(task, { order, rule: "least x" }, null)!.beds[0];
    const [one, other] = [bedOfOrder([0, 1, 2, 3, 4, 5]), bedOfOrder([5, 4, 1, 2, 0, 3])];
    expect(one.laid.map((p) => p.piece)).not.toEqual(other.laid.map((p) => p.piece));
    const { search } = openSearchOf(one, task, { seed: 1, share: 0, fixed: 0 });
    const read = openSearchOf(other, task, { seed: 2, share: 1, fixed: 0 }).bedOf(search.best)!;
    const places = (laid: Bed["laid"]) =>
      [...laid]
        .sort((a, b) => a.piece - b.piece)
        .map((p) => [p.piece, p.shape.key, Math.round(p.x * 1e3), Math.round(p.y * 1e3)]);
    expect(places(read.laid)).toEqual(places(one.laid));
  });

  it("holds a valid layout at any moment it is stopped at", () => {
    const task = trianglesTask(6);
    let order: ShareOrder | null = null;
    relaxBed(poorBed(task), task, { steps: 60, seed: 2 }, (orders) => {
      order ??= orders[0];
      return orders.map(() => null);
    });
    const { task: strip, from, fixed } = order!;
    for (let stopAt = 0; stopAt < 200; stopAt++) {
      let asked = 0;
      const search = openSearch(strip, from, { seed: stopAt, share: stopAt % 2, fixed });
      const stop = () => asked++ >= stopAt;
      for (let k = 0; k < 6 && asked < stopAt; k++) tryShorter(search, k / 6, stop);
      const { best } = search;
      setState(search.strip, best);
      expect(measureOverlap(search.strip)).toBeLessThanOrEqual(strip.none);
      for (let i = 0; i < 6; i++) {
        expect(copyState(search.strip).x[i]).toBeGreaterThanOrEqual(0);
        expect(search.strip.x1[i]).toBeLessThanOrEqual(best.length + 1e-6);
        expect(search.strip.y1[i]).toBeLessThanOrEqual(1000 + 1e-6);
      }
    }
  });
});
