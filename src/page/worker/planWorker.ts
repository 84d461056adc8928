// The worker: the very core the command line uses, behind messages. One request at a time; who wants to stop it ends it.
import regularFace from "dejavu-fonts-ttf/ttf/DejaVuSans.ttf?url";
import boldFace from "dejavu-fonts-ttf/ttf/DejaVuSans-Bold.ttf?url";
import { config } from "zod";
import cables from "../../../templates/cables.json";
import cautions from "../../../templates/cautions.json";
import fabrics from "../../../templates/fabrics.json";
import turnbuckles from "../../../templates/turnbuckles.json";
import { type Catalogues, readCatalogues } from "../../core/job/catalogues.ts";
import { writePapers } from "../../core/papers/writePapers.ts";
import { capNest } from "../../core/plan/capNest.ts";
import { correctPlan } from "../../core/plan/correctPlan.ts";
import { tellBrokenFacts, writeFactsJson } from "../../core/plan/factsFile.ts";
import { type PlanInput, readPlanInput } from "../../core/plan/readPlanInput.ts";
import { runPlan } from "../../core/plan/runPlan.ts";
import { PlanError, type Station } from "../../core/problem.ts";
import type { Facts } from "../../core/records/facts.ts";
import { describeFault } from "./describeFault.ts";
import { createGiver } from "./growingFacts.ts";
import type { Reply, Request, SentRoof } from "./messages.ts";
import { openNestThreads } from "./nestThreads.ts";
import { createTeller } from "./teller.ts";

// The schema library may compile its checks into code; the page forbids that, so it must not even try.
config({ jitless: true });

let catalogues: Catalogues | null = null;
/** Of the newest plan made here. */
let last: Facts | null = null;
let fonts: { regular: Uint8Array; bold: Uint8Array } | null = null;

function post(reply: Reply, transfer: Transferable[] = []): void {
  self.postMessage(reply, { transfer });
}

async function loadFonts(): Promise<{ regular: Uint8Array; bold: Uint8Array }> {
  const load = async (url: string) => {
    const response = await fetch(new URL(url, self.location.href));
    if (!response.ok)
      throw new PlanError(
        "fonts-missing",
        `the fonts of the papers cannot be read (${response.status}); load the page anew`,
      );
    return new Uint8Array(await response.arrayBuffer());
  };
  const [regular, bold] = await Promise.all([load(regularFace), load(boldFace)]);
  return { regular, bold };
}

function read(request: Extract<Request, { kind: "plan" | "correct" }>): PlanInput {
  const { given, mesh } = request;
  catalogues ??= readCatalogues({ fabrics, cables, turnbuckles, cautions });
  return readPlanInput({ value: given, findings: [] }, catalogues, (file) => {
    if (mesh === null) {
      throw new PlanError(
        "mesh-missing",
        `the job reads its mesh from ${file}, which is not here; drop that file onto the page too`,
        "mesh.file",
      );
    }
    return { bytes: mesh.bytes, name: mesh.name };
  });
}

function correct(request: Extract<Request, { kind: "correct" }>): void {
  const { run, text, percent, kept } = request;
  const { job, source } = read(request);
  const { tell } = createTeller((share, words) => post({ kind: "progress", run, share, words, station: "rig" }));
  const corrected = correctPlan(job, source, { text, percent, kept }, { onProgress: tell });
  post({ kind: "corrected", run, corrected });
}

async function plan(request: Extract<Request, { kind: "plan" }>): Promise<void> {
  const { run } = request;
  const input = read(request);
  post({ kind: "read", run, job: input.job, revision: input.revision });
  const workShares = await openNestThreads();
  const cap = capNest(input.job.nest.seconds, () => performance.now());
  let station: Station = "job";
  const teller = createTeller((share, words) => post({ kind: "progress", run, share, words, station }));
  const onStation = (next: Station) => {
    station = next;
    teller.begin();
    cap.onStation(next);
  };
  const give = createGiver(input.job.warp, input.findings);
  const send = (facts: Facts, kind: { kind: "soFar"; station: Station } | { kind: "planned" }) => {
    const { added, slices } = give(facts);
    for (const slice of slices) post({ kind: "slice", run, slice });
    post({ ...kind, run, added }, buffersIn(added.fields));
  };
  const planned = runPlan(
    input.job,
    input.source,
    {
      revision: input.revision,
      onStation,
      onFacts: (done, facts) => send(facts, { kind: "soFar", station: done }),
      onRoof: (roof) => request.roofs.postMessage({ run, roof } satisfies SentRoof),
    },
    { onProgress: teller.tell, cancelled: cap.cancelled, elapsed: cap.elapsed, ...(workShares ? { workShares } : {}) },
  );
  last = { ...planned, findings: [...input.findings, ...planned.findings] };
  send(planned, { kind: "planned" });
}

/** Fields are handed over, not copied. */
function buffersIn(fields: object): ArrayBuffer[] {
  return Object.values(fields).flatMap((v: unknown) => {
    if (ArrayBuffer.isView(v)) return v.buffer instanceof ArrayBuffer ? [v.buffer] : [];
    return typeof v === "object" && v !== null && !Array.isArray(v) ? buffersIn(v) : [];
  });
}

async function papers({ run, choice, name }: Extract<Request, { kind: "papers" }>, facts: Facts): Promise<void> {
  fonts ??= await loadFonts();
  const { files, findings } = await writePapers(facts, { fonts, papers: choice }).catch((error: unknown) => {
    throw name === null ? error : tellBrokenFacts(error, name);
  });
  const all = [{ path: "facts.json", bytes: writeFactsJson({ ...facts, findings }) }, ...files].map(
    ({ path, bytes }) => ({
      path,
      bytes: Uint8Array.from(bytes),
    }),
  );
  post(
    { kind: "papers", run, files: all, added: findings.slice(facts.findings.length) },
    all.map((f) => f.bytes.buffer),
  );
}

self.onmessage = async (event: MessageEvent<Request>) => {
  const request = event.data;
  try {
    if (request.kind === "plan") await plan(request);
    else if (request.kind === "correct") correct(request);
    else {
      const facts = request.facts ?? last;
      if (facts === null) throw new Error("papers were asked for of no plan");
      await papers(request, facts);
    }
  } catch (error) {
    post({ kind: "failed", run: request.run, fault: describeFault(error) });
  }
};
