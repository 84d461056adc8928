// A thread of the packing bench.
import { type MessagePort, parentPort, workerData } from "node:worker_threads";
import { type PackShare, workPackShare } from "./packCase.ts";

const { share, port } = workerData as { share: PackShare; port: MessagePort };
parentPort?.postMessage(workPackShare(share, port));
port.close();
