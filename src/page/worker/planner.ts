// Starts, ends and hears the worker. The newest request wins: a worker that still computes an older one is ended.
import type { PaperChoice } from "../../core/papers/choosePapers.ts";
import { partSiteLog } from "../../core/plan/siteLog.ts";
import type { Facts } from "../../core/records/facts.ts";
import { bookStore } from "../store/bookStore.ts";
import { type Hand, isSameWork, isSliding } from "../store/hand.ts";
import { totalPlan } from "../store/planTotals.ts";
import type { Project } from "../store/project.ts";
import { openRoofs } from "./dragger.ts";
import { createTaker } from "./growingFacts.ts";
import type { PlanFault, Reply, Request } from "./messages.ts";

let worker: Worker | null = null;
let busy = false;
let run = 0;
/** Project or facts the running request is about. */
let subject: { project: Project } | { facts: Facts; choice: readonly PaperChoice[] } | { readingsOf: Project } | null =
  null;
/** Takes in the plan under way. */
let taker = createTaker();
/** The newest plan, while the worker that made it is there: it can write its papers without being handed the facts again. */
let made: Facts | null = null;
/** To be planned once nothing that goes first is under way. */
let due: Project | null = null;

/** What is said of papers and corrections that were stopped. */
const STOPPED: PlanFault = { code: "cancelled", message: "Stopped. The plan stands as it was.", where: [] };

function start(): Worker {
  const fresh = new Worker(new URL("./planWorker.ts", import.meta.url), { type: "module", name: "seamstay-plan" });
  fresh.onmessage = (event: MessageEvent<Reply>) => hear(event.data);
  fresh.onerror = (event) => {
    event.preventDefault();
    if (worker !== fresh) return;
    end();
    fail({
      code: "worker-broken",
      message: `the computing worker broke down (${event.message || "no word why"}); your job is whole, plan again`,
      where: [],
    });
  };
  return fresh;
}

function end(): void {
  worker?.terminate();
  worker = null;
  made = null;
  busy = false;
}

function send(request: Request, transfer: Transferable[] = []): void {
  if (busy) end();
  worker ??= start();
  busy = true;
  worker.postMessage(request, transfer);
}

function hear(reply: Reply): void {
  if (reply.run !== run) return;
  const set = bookStore.setState;
  switch (reply.kind) {
    case "read":
      set({ job: reply.job });
      return;
    case "progress":
      set({ progress: { share: reply.share, words: reply.words, station: reply.station } });
      return;
    case "slice":
      taker.take(reply.slice);
      return;
    case "soFar": {
      const grown = taker.join(reply.added);
      set((b) => ({ soFar: { ...b.soFar, [reply.station]: grown } }));
      return;
    }
    case "planned": {
      busy = false;
      const { facts, fields } = taker.join(reply.added);
      made = facts;
      const { facts: former, before } = bookStore.getState();
      const another = former !== null && former.job.revision !== facts.job.revision;
      set({
        status: "done",
        soFar: {},
        facts,
        fields,
        before: another ? totalPlan(former) : before,
        planned: subject !== null && "project" in subject ? subject.project : null,
        fault: null,
        papers: null,
        papersFault: null,
        hand: handAfter(subject),
      });
      return;
    }
    case "papers":
      busy = false;
      if (subject !== null && "facts" in subject)
        set({
          papers: { of: subject.facts, choice: subject.choice, files: reply.files, added: reply.added },
          writing: false,
        });
      return;
    case "corrected":
      busy = false;
      if (subject !== null && "readingsOf" in subject) {
        set({ corrected: { of: subject.readingsOf, plan: reply.corrected }, correcting: false, correctFault: null });
      }
      return;
    case "failed":
      busy = false;
      fail(reply.fault);
  }
}

/** A hand that was let go has nothing more to show once its own plan stands. */
function handAfter(of: typeof subject): Hand | null {
  const { hand } = bookStore.getState();
  return of !== null && "project" in of && isSameWork(hand?.laid, of.project) ? null : hand;
}

function fail(fault: PlanFault): void {
  if (subject !== null && "facts" in subject) bookStore.setState({ writing: false, papersFault: fault });
  else if (subject !== null && "readingsOf" in subject) bookStore.setState({ correcting: false, correctFault: fault });
  else bookStore.setState({ status: "failed", fault });
}

/** Plans the project as soon as no seam is slid and its roof is tied: beside a plan with its threads a tie takes three times as long. */
export function planSoon(project: Project): void {
  due = project;
  startDue();
}

/** Starts the plan that waits, if nothing goes before it any more. */
export function startDue(): void {
  const { hand, tying, project } = bookStore.getState();
  if (!isSameWork(due, project)) due = null;
  if (due === null || isSliding(hand)) return;
  if (isSameWork(tying, due)) wait("tying the roof again");
  else requestPlan(due);
}

/** Ends a plan under way; it waits to be started anew. */
export function pausePlan(): void {
  if (!busy || subject === null || !("project" in subject)) return;
  due = subject.project;
  run++;
  end();
  wait("waiting for the seam in hand");
}

/** What stands so far stays: the surface the seam in hand lies on may be of it. */
function wait(words: string): void {
  bookStore.setState({ status: "running", fault: null, progress: { share: 0, words, station: "job" } });
}

/** Plans the project from the start. */
export function requestPlan(project: Project): void {
  due = null;
  run++;
  taker = createTaker();
  subject = { project };
  bookStore.setState({
    status: "running",
    soFar: {},
    fault: null,
    writing: false,
    papersFault: null,
    correcting: false,
    progress: { share: 0, words: "reading the job", station: "job" },
  });
  const roofs = openRoofs(run, project);
  send({ kind: "plan", run, given: project.job, mesh: project.mesh, roofs }, [roofs]);
}

/** Writes the papers of a plan that are chosen. */
export function requestPapers(facts: Facts): void {
  const { choice } = bookStore.getState();
  run++;
  subject = { facts, choice };
  // One worker: what it did is ended, and must not be shown as still going on.
  bookStore.setState({ writing: true, papersFault: null, correcting: false });
  if (busy) end();
  send({ kind: "papers", run, facts: made === facts ? null : facts, choice, name: null });
}

/**
 * Works out what to turn after the readings of the log that stand after a step, the rounds before the last turns counted too.
 * @param percent stage at whose end was read; null: the finished roof
 */
export function requestCorrection(project: Project, step: number, percent: number | null): void {
  const { text, kept } = partSiteLog(project.log, step);
  if (text === null) return;
  run++;
  subject = { readingsOf: project };
  bookStore.setState({
    correcting: true,
    correctFault: null,
    corrected: null,
    writing: false,
    progress: { share: 0, words: "", station: "rig" },
  });
  send({ kind: "correct", run, given: project.job, mesh: project.mesh, text, percent, kept });
}

/** Ends what is computed of a job that is no longer on the desk: nothing of it may come to stand under the next one. */
export function leaveJob(): void {
  due = null;
  run++;
  end();
}

/** Stops what is computed or waits to be; what was planned before stays. */
export function stopPlan(): void {
  const { status, writing, correcting } = bookStore.getState();
  const planning = status === "running";
  if (!busy && !planning && !writing && !correcting) return;
  due = null;
  run++;
  end();
  bookStore.setState({
    writing: false,
    correcting: false,
    ...(planning ? { status: "stopped" } : {}),
    ...(writing ? { papersFault: STOPPED } : {}),
    ...(correcting ? { correctFault: STOPPED } : {}),
  });
}
