// Papers of facts that were opened by themselves, in a worker of their own: what is planned on the desk goes on beside it.
import type { PaperChoice } from "../../core/papers/choosePapers.ts";
import type { Facts } from "../../core/records/facts.ts";
import type { WrittenPapers } from "../store/bookStore.ts";
import type { PlanFault, Reply, Request } from "./messages.ts";

/** Writes them, and tells what came of it. @returns what ends it at once */
export function drawLoosePapers(
  { name, facts }: { name: string; facts: Facts },
  choice: readonly PaperChoice[],
  hear: (answer: WrittenPapers | PlanFault) => void,
): () => void {
  const worker = new Worker(new URL("./planWorker.ts", import.meta.url), { type: "module", name: "seamstay-papers" });
  const end = (answer: WrittenPapers | PlanFault) => {
    worker.terminate();
    hear(answer);
  };
  worker.onmessage = ({ data }: MessageEvent<Reply>) => {
    if (data.kind === "papers") end({ files: data.files, added: data.added });
    else if (data.kind === "failed") end(data.fault);
  };
  worker.onerror = (event) => {
    event.preventDefault();
    const message = `${name}: the worker that writes papers broke down (${event.message || "no word why"}); open the file again`;
    end({ code: "worker-broken", message, where: [] });
  };
  worker.postMessage({ kind: "papers", run: 0, facts, choice, name } satisfies Request);
  return () => worker.terminate();
}
