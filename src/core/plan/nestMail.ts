// Orders of the nest worked in other threads through shared memory, in Node and in the browser alike: who opens threads gives the
// posts, this gives the door the nest goes through. The same states come back whatever the number of threads, and whichever of
// them was lost: an order no thread answers is worked here. Does not: start threads. Source: own.
import type { WorkShares } from "../rolls/relax/relaxBed.ts";
import type { StripState } from "../rolls/relax/strip.ts";
import { type ShareOrder, workShare } from "../rolls/relax/workShare.ts";

/** An order and the memory its answer is written into. */
export interface NestMail {
  order: ShareOrder;
  memory: SharedArrayBuffer;
}

/** A thread, as far as the nest knows it. */
export interface NestThread {
  post: (mail: NestMail) => void;
}

/** Places in the head of the memory: how the order stands, a count that grows while it is worked, and 1 for stop. */
const [STANDS, BEATS, STOP] = [0, 1, 2];
const [OPEN, DONE, FAILED] = [0, 1, 2];
const HEAD = 16;
/** Between two looks at a thread that is waited for, ms. */
const TICK = 50;
/** A thread that shows no sign of life for so long is lost, ms: much more than one starts or moves a piece in. */
const PATIENCE = 10_000;

const headOf = (mail: NestMail) => new Int32Array(mail.memory, 0, HEAD / 4);

function openMail(order: ShareOrder): NestMail {
  return { order, memory: new SharedArrayBuffer(HEAD + 8 * (1 + 3 * order.from.x.length)) };
}

/** Works an order in the thread it was posted to. */
export function workMail(mail: NestMail): void {
  const head = headOf(mail);
  const stop = () => {
    Atomics.add(head, BEATS, 1);
    return Atomics.load(head, STOP) === 1;
  };
  let stands = FAILED;
  try {
    const { length, x, y, shape } = workShare(mail.order, stop);
    new Float64Array(mail.memory, HEAD).set([length, ...x, ...y, ...shape]);
    stands = DONE;
  } finally {
    Atomics.store(head, STANDS, stands);
    Atomics.notify(head, STANDS);
  }
}

function readMail(mail: NestMail): StripState {
  const all = new Float64Array(mail.memory, HEAD);
  const n = mail.order.from.x.length;
  return {
    length: all[0],
    x: all.slice(1, 1 + n),
    y: all.slice(1 + n, 1 + 2 * n),
    shape: Int32Array.from(all.subarray(1 + 2 * n)),
  };
}

/** Waits for an answer. @returns false where the thread failed, or showed no sign of life for `patience` ms */
function awaitMail(mail: NestMail, patience: number, look: () => void): boolean {
  const head = headOf(mail);
  let beats = Atomics.load(head, BEATS);
  for (let idle = 0; Atomics.load(head, STANDS) === OPEN; ) {
    Atomics.wait(head, STANDS, OPEN, TICK);
    look();
    const now = Atomics.load(head, BEATS);
    idle = now === beats ? idle + TICK : 0;
    beats = now;
    if (idle >= patience) return false;
  }
  return Atomics.load(head, STANDS) === DONE;
}

/** The door of the nest: orders shared out among this thread and the others. */
export function shareAmong(threads: NestThread[], patience = PATIENCE): WorkShares {
  const lost = new Set<NestThread>();
  return (orders, stop) => {
    const able = threads.filter((t) => !lost.has(t));
    const sent = orders.map((order, k) => {
      const thread = able[(k % (able.length + 1)) - 1];
      if (!thread) return null;
      const mail = openMail(order);
      thread.post(mail);
      return { thread, mail };
    });
    const look = () => {
      if (!stop()) return false;
      for (const s of sent) if (s) Atomics.store(headOf(s.mail), STOP, 1);
      return true;
    };
    const own = orders.map((order, k) => (sent[k] ? null : workShare(order, look)));
    return orders.map((order, k) => {
      const s = sent[k];
      if (!s) return own[k];
      if (!lost.has(s.thread) && awaitMail(s.mail, patience, look)) return readMail(s.mail);
      lost.add(s.thread);
      // Told to stop, the share is not worth waiting for.
      return look() ? null : workShare(order, look);
    });
  };
}
