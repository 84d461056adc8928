// Packs one public instance (../shared/packing) with the rolls' own search, generalised to any listed rotations: the orders first,
// then the relaxed search in one thread a core, the best layout passed on about once a second.
import { availableParallelism } from "node:os";
import { MessageChannel, type MessagePort, receiveMessageOnPort, Worker } from "node:worker_threads";
import { bedReach } from "../../src/core/rolls/bed.ts";
import type { NestTask } from "../../src/core/rolls/layPieces.ts";
import { buildShape, clothArea, placementOf, turnRing } from "../../src/core/rolls/nestShape.ts";
import { openSearchOf } from "../../src/core/rolls/relax/relaxBed.ts";
import { adoptState, SETTINGS, tryShorter } from "../../src/core/rolls/relax/shortenStrip.ts";
import type { StripState } from "../../src/core/rolls/relax/strip.ts";
import { ringGap } from "../../src/core/rolls/ringGap.ts";
import { searchOrders } from "../../src/core/rolls/searchOrders.ts";

/** Columns across the strip's width. */
const COLUMNS = 256;
/** Share of the time for the orders, and the most seconds of it. */
const ORDERS = 0.05;
const ORDERS_MOST = 2;
/** Left for ending, s; between two exchanges, s; another's layout is taken while exploring where it is shorter by this share. */
const END = 0.25;
const EXCHANGE = 1;
const AHEAD = 0.01;

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

/** What a thread is started with; times in ms since the epoch. */
export interface PackShare {
  instance: PackInstance;
  seed: number;
  /** Number of the thread. */
  number: number;
  began: number;
  seconds: number;
}

const now = () => performance.timeOrigin + performance.now();

function buildPackTask(instance: PackInstance): { task: NestTask; ids: (string | number)[]; area: number } {
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
  const task: NestTask = {
    shapes,
    areas,
    offers: [{ size, takes: () => true, pins: [] }],
    loose: shapes.map((_, i) => i),
    store: new Map(),
    stop: () => false,
  };
  return { task, ids, area: areas.reduce((sum, a) => sum + a, 0) };
}

/** Whether the true outlines overlap nowhere by more than a millionth of their size. */
function isValid(instance: PackInstance, result: PackResult): boolean {
  const rings = new Map(instance.items.map((item) => [item.id, Float64Array.from(item.polygon.flat())]));
  const lying = result.placements.map((p) => ({ ring: turnRing(rings.get(p.id)!, p.rotationDeg), x: p.x, y: p.y }));
  const least = Math.sqrt(Math.min(...instance.items.map((item) => clothArea(rings.get(item.id)!))));
  return lying.every((a, i) => lying.slice(i + 1).every((b) => ringGap(a, b, least, 1e-6 * least) >= 0));
}

/** One thread's work: the best layout it has or was handed. */
export function workPackShare(share: PackShare, port: MessagePort): { result: PackResult; tries: number } {
  const { instance, seed, began, seconds } = share;
  const { task, ids } = buildPackTask(instance);
  const spent = () => (now() - began) / 1000;
  const ended = () => spent() > seconds - END;
  // Counted from here: on a busy machine a thread may start later than the orders would end, and a first layout there must be.
  const orders = spent() + Math.min(ORDERS_MOST, ORDERS * seconds);
  const found = searchOrders({ ...task, stop: () => spent() > orders }, { steps: Number.MAX_SAFE_INTEGER, seed });
  if (!found || found.layout.left.length > 0) throw new Error(`${instance.name}: no layout within ${seconds} s`);
  const [bed] = found.layout.beds;
  const { search, bedOf } = openSearchOf(bed, task, { seed, share: share.number, fixed: 0 });
  let told = { at: spent(), length: search.best.length };
  let tries = 0;
  for (; !ended() && tries < 1e9; tries++) {
    const part = spent() / seconds;
    tryShorter(search, part, ended);
    for (let m = receiveMessageOnPort(port); m; m = receiveMessageOnPort(port)) {
      const other = m.message as StripState;
      if (part > SETTINGS.settle || other.length < search.best.length * (1 - AHEAD)) adoptState(search, other);
    }
    if (search.best.length < told.length && spent() > told.at + EXCHANGE) {
      told = { at: spent(), length: search.best.length };
      port.postMessage(search.best);
    }
  }
  const pack = (laid: typeof bed.laid, length: number): PackResult => ({
    length,
    placements: laid.map((p) => ({
      id: ids[p.piece],
      rotationDeg: p.shape.rotation,
      ...placementOf(p.shape, p.x, p.y),
    })),
  });
  const best = bedOf(search.best);
  const result = best ? pack(best.laid, bedReach(best)) : null;
  if (result && isValid(instance, result)) return { result, tries };
  process.stderr.write(`${instance.name}: the best layout does not stand before the judge; the start counts\n`);
  return { result: pack(bed.laid, bedReach(bed)), tries };
}

/** Best layout found within `seconds` by one thread a core, its density in percent and the attempts made. */
export async function benchPack(
  instance: PackInstance,
  seconds: number,
  seed: number,
  file: URL,
): Promise<{ result: PackResult; length: number; density: number; ms: number; threads: number; tries: number }> {
  const began = now();
  const threads = Math.max(2, Math.min(8, availableParallelism()));
  const links = Array.from({ length: threads }, () => new MessageChannel());
  // What one thread tells goes to all others.
  links.forEach((link, i) => {
    link.port1.on("message", (m) => {
      links.forEach((other, k) => {
        if (k !== i) other.port1.postMessage(m);
      });
    });
  });
  const shares = links.map(
    ({ port2 }, k) =>
      new Promise<{ result: PackResult; tries: number } | null>((done) => {
        const share: PackShare = { instance, seed: seed + 1000 * k, number: k, began, seconds };
        const worker = new Worker(file, { workerData: { share, port: port2 }, transferList: [port2] });
        worker.on("message", done);
        // A thread that dies costs its share.
        worker.on("error", () => done(null));
        worker.on("exit", () => done(null));
      }),
  );
  const found = (await Promise.all(shares)).filter((f) => f !== null);
  for (const { port1 } of links) port1.close();
  if (found.length === 0) throw new Error(`${instance.name}: no layout within ${seconds} s`);
  const { result } = found.reduce((a, b) => (b.result.length < a.result.length ? b : a));
  const area = instance.items.reduce((sum, i) => sum + i.demand * clothArea(Float64Array.from(i.polygon.flat())), 0);
  return {
    result,
    length: result.length,
    density: (100 * area) / (instance.stripWidth * result.length),
    ms: now() - began,
    threads,
    tries: found.reduce((sum, f) => sum + f.tries, 0),
  };
}
