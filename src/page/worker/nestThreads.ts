// Threads for the nest, one a core beside the plan's own, started by the plan's worker and ended with it. None where the browser
// shares no memory between them (the page is served with the headers that let it). The layout is the same with any number.
import { type NestMail, shareAmong } from "../../core/plan/nestMail.ts";
import type { StationContext } from "../../core/problem.ts";

/** Most threads: more orders than this are seldom open at once. */
const MOST = 7;
/** A thread that has not started by then is left out of this plan, ms. */
const PATIENCE = 500;

interface PageThread {
  worker: Worker;
  /** Resolved once it runs: it cannot start while the plan computes. */
  begun: Promise<void>;
  runs: boolean;
}

let threads: PageThread[] | null = null;

function startThread(): PageThread {
  const worker = new Worker(new URL("./nestWorker.ts", import.meta.url), { type: "module", name: "seamstay-nest" });
  const begun = new Promise<void>((done) => {
    worker.onmessage = () => {
      thread.runs = true;
      done();
    };
  });
  // A thread that breaks costs its share: the nest notices by itself.
  worker.onerror = (event) => event.preventDefault();
  const thread = { worker, begun, runs: false };
  return thread;
}

/** The door of the nest to all threads that run; undefined where there are none. */
export async function openNestThreads(): Promise<StationContext["workShares"]> {
  if (!self.crossOriginIsolated) return undefined;
  threads ??= Array.from({ length: Math.min(MOST, navigator.hardwareConcurrency - 1) }, startThread);
  await Promise.race([Promise.all(threads.map((t) => t.begun)), new Promise((done) => setTimeout(done, PATIENCE))]);
  const running = threads.filter((t) => t.runs);
  if (running.length === 0) return undefined;
  const work = shareAmong(running.map(({ worker }) => ({ post: (mail: NestMail) => worker.postMessage(mail) })));
  return (orders, stop) => work(orders as Parameters<typeof work>[0], stop);
}
