// Packs one public instance (../shared/packing) with the rolls' own search, generalised to any listed rotations.

import { bedReach } from "../../src/core/rolls/bed.ts";
import type { NestTask } from "../../src/core/rolls/layPieces.ts";
import { buildShape, clothArea, placementOf } from "../../src/core/rolls/nestShape.ts";
import { searchOrders } from "../../src/core/rolls/searchOrders.ts";

/** Columns across the strip's width. */
const COLUMNS = 256;

export interface PackInstance {
  name: string;
  stripWidth: number;
  allowedRotationsDeg: number[];
  items: { id: string | number; demand: number; polygon: [number, number][]; allowedRotationsDeg?: number[] }[];
}

export interface PackResult {
  length: number;
  placements: { id: string | number; rotationDeg: number; x: number; y: number }[];
}

/** Best layout found within `seconds` (by `now`, ms), its density in percent and the layouts built. */
export function benchPack(
  instance: PackInstance,
  seconds: number,
  seed: number,
  now: () => number,
): { result: PackResult; length: number; density: number; ms: number; steps: number } {
  const began = now();
  const shapes: NestTask["shapes"] = [];
  const areas: number[] = [];
  const ids: (string | number)[] = [];
  for (const item of instance.items) {
    const ring = Float64Array.from(item.polygon.flat());
    const turned = (item.allowedRotationsDeg ?? instance.allowedRotationsDeg).map((r) =>
      buildShape(ring, r, String(item.id)),
    );
    for (let k = 0; k < item.demand; k++) {
      shapes.push(turned);
      areas.push(clothArea(ring));
      ids.push(item.id);
    }
  }
  const width = instance.stripWidth;
  const lengths = shapes.reduce((sum, s) => sum + s[0].length, 0);
  const whole = instance.items.every((item) => item.polygon.flat().every(Number.isInteger));
  // Outlines drawn on whole numbers get columns that divide them, so that what fits exactly is found.
  const dx = whole ? 2 ** Math.floor(Math.log2(Math.min(1, width / COLUMNS))) : width / COLUMNS;
  const size = { start: 0, length: 2 * lengths, width, gap: 0, dx, snap: whole ? 1 : 0, slack: 0, flaws: [] };
  const loose = shapes.map((_, i) => i);
  const task: NestTask = {
    shapes,
    areas,
    offers: [{ size, takes: () => true, pins: [] }],
    loose,
    store: new Map(),
    stop: () => now() - began > 1000 * seconds - 30,
  };
  const found = searchOrders(task, { steps: Number.MAX_SAFE_INTEGER, seed });
  if (!found || found.layout.left.length > 0) throw new Error(`${instance.name}: no layout within ${seconds} s`);
  const [bed] = found.layout.beds;
  const length = bedReach(bed);
  const placements = bed.laid.map((p) => ({
    id: ids[p.piece],
    rotationDeg: p.shape.rotation,
    ...placementOf(p.shape, p.x, p.y),
  }));
  const area = areas.reduce((sum, a) => sum + a, 0);
  return {
    result: { length, placements },
    length,
    density: (100 * area) / (width * length),
    ms: now() - began,
    steps: found.steps,
  };
}
