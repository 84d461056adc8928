// Threads for the nest, one a core beside the plan's own. They start with the first order and end with the plan.
import { existsSync } from "node:fs";
import { availableParallelism } from "node:os";
import { Worker } from "node:worker_threads";
import { type NestMail, shareAmong } from "../core/plan/nestMail.ts";
import { findPackageFile } from "./packageFiles.ts";

/** Most threads: more orders than this are seldom open at once. */
const MOST = 7;

/** A door for the nest, and what closes it. */
export interface NestThreads {
  workShares: (orders: unknown[], stop: () => boolean) => unknown[];
  close: () => void;
}

/** Threads that are started once they are needed; none where the built file is not there or there is one core. */
export function openNestThreads(
  count = Math.min(MOST, availableParallelism() - 1),
  file = findPackageFile("dist/nestWorker.js"),
  patience?: number,
): NestThreads {
  const workers: Worker[] = [];
  const start = (): Worker => {
    const worker = new Worker(file);
    // A thread that breaks costs its share: the nest notices by itself.
    worker.on("error", () => {});
    worker.unref();
    workers.push(worker);
    return worker;
  };
  const threads = Array.from({ length: existsSync(file) ? Math.max(0, count) : 0 }, () => {
    let worker: Worker | null = null;
    return {
      post: (mail: NestMail) => {
        worker ??= start();
        worker.postMessage(mail);
      },
    };
  });
  const work = shareAmong(threads, patience);
  return {
    workShares: (orders, stop) => work(orders as Parameters<typeof work>[0], stop),
    close: () => {
      for (const worker of workers) void worker.terminate();
    },
  };
}
