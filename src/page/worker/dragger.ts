// Sliding a seam's end: starts and hears the worker that redraws. One place is asked for at a time and the newest wins; places that
// were passed meanwhile are never asked for.
import type { Grip } from "../../core/plan/dragSeam.ts";
import type { EdgePlace } from "../../core/records/job.ts";
import { layPairs } from "../actions/seams/layPairs.ts";
import { act, bookStore, notify } from "../store/bookStore.ts";
import { type Hand, isSameWork } from "../store/hand.ts";
import type { Project } from "../store/project.ts";
import { findSeamEnds } from "../store/seamEnds.ts";
import type { DragReply, DragRequest, SeamPlaces } from "./messages.ts";
import { createWeigher } from "./weigher.ts";

let worker: Worker | null = null;
/** It broke down: the next plan's roof is dragged by another one. */
let broke = false;
/** Where the newest plan's roof will come from, until the worker listens there. */
let waiting: MessagePort | null = null;
/** Places this near each other on an edge are one, share of it. */
const SAME = 2e-5;

const projects = new Map<number, Project>();
/** Run of the roof the grips are of. */
let run = 0;
/** Runs of roofs tied here count downwards, those of plans upwards. */
let tiedRuns = 0;
let asked = false;
let leaving = false;
let next: { weld: string; to: SeamPlaces } | null = null;

function send(request: DragRequest, transfer: Transferable[] = []): void {
  worker?.postMessage(request, transfer);
}

/** Layouts worked out side by side: slid seams go between two of them. */
export const weigher = createWeigher((ask) => send({ kind: "weigh", run, ...ask }));

function listen(): void {
  if (worker === null || waiting === null) return;
  send({ kind: "listen", roofs: waiting }, [waiting]);
  waiting = null;
}

/** A port for the plan's worker to send the roof of this run to. */
export function openRoofs(of: number, project: Project): MessagePort {
  const { port1, port2 } = new MessageChannel();
  projects.set(of, project);
  for (const old of projects.keys()) if (old > 0 && old < of - 1 && old !== run) projects.delete(old);
  waiting?.close();
  waiting = port2;
  if (broke) watchSeams();
  listen();
  return port1;
}

/** From now on seams can be taken in hand; called when they are looked at. */
export function watchSeams(): void {
  broke = false;
  if (worker === null) {
    worker = new Worker(new URL("./dragWorker.ts", import.meta.url), { type: "module", name: "seamstay-drag" });
    worker.onmessage = (event: MessageEvent<DragReply>) => hear(event.data);
    worker.onerror = (event) => {
      event.preventDefault();
      worker?.terminate();
      worker = null;
      broke = true;
      asked = leaving = false;
      next = null;
      weigher.stop();
      bookStore.setState({ grips: null, hand: null, tying: null });
      notify("drag", "Sliding seams broke down; the job is whole. Plan again, or type where the seam ends.", true);
    };
  }
  listen();
}

function changeHand(change: Partial<Hand>): void {
  bookStore.setState((s) => ({ hand: s.hand === null ? null : { ...s.hand, ...change } }));
}

function hear(reply: DragReply): void {
  const project = projects.get(reply.run);
  if (reply.kind === "grips") {
    run = reply.run;
    bookStore.setState({ grips: project === undefined ? null : { of: project, welds: reply.grips } });
    if (project === undefined) return;
    followHand(project, reply.grips);
    weigher.askAnew();
  } else if (reply.kind === "tied") {
    const { seams, panels, ms } = reply;
    if (project !== undefined) bookStore.setState({ tied: { of: project, seams, panels, ms } });
    endTie(project);
  } else if (reply.kind === "weighing" || reply.kind === "weighed") {
    weigher.hear(reply);
  } else if (reply.kind === "untied") {
    endTie(project);
    projects.delete(reply.run);
  } else {
    asked = false;
    const { hand } = bookStore.getState();
    if (reply.kind === "outdated") askAnew();
    else if (hand?.weld === reply.weld && hand.laid === null) {
      if (reply.kind === "dragged")
        changeHand({ drawn: reply.to, path: reply.path, panels: reply.panels, fault: null });
      else changeHand({ fault: reply.fault.message });
    }
    askNext();
    layIfDrawn();
  }
}

function endTie(project: Project | undefined): void {
  if (isSameWork(bookStore.getState().tying, project)) bookStore.setState({ tying: null });
}

/**
 * A roof that was made anew may name its welds otherwise: the one in hand is known by its places, those it was laid at or, while it
 * is slid, those it began at.
 */
function followHand(project: Project, welds: readonly Grip[]): void {
  const { hand, chosen, project: now } = bookStore.getState();
  if (hand === null || !isSameWork(hand.laid ?? now, project)) return;
  const places = hand.laid === null ? hand.from : hand.to;
  const same = welds.find(({ ends }) =>
    ends.every((p, k) => p.edge === places[k].edge && Math.abs(p.at - places[k].at) < SAME),
  );
  if (same === undefined) {
    if (hand.laid === null) putBack();
    return;
  }
  if (same.weld === hand.weld) return;
  if (next !== null) next = { ...next, weld: same.weld };
  bookStore.setState({ chosen: chosen === hand.weld ? same.weld : chosen, hand: { ...hand, weld: same.weld } });
}

/** Asks once more for where the hand is, of the roof that is dragged now; a hand on no weld of it is put back. */
function askAnew(): void {
  const { hand, grips, project } = bookStore.getState();
  if (hand === null || hand.laid !== null) return;
  const { weld, to } = hand;
  if (isSameWork(grips?.of, project) && grips?.welds.some((g) => g.weld === weld)) next ??= { weld, to };
  else putBack();
}

function askNext(): void {
  if (asked || next === null) return;
  asked = true;
  send({ kind: "drag", run, ...next });
  next = null;
}

/** Takes the end of a weld in hand. */
export function takeEnd(weld: string, end: 0 | 1): void {
  const { grips, hand, project } = bookStore.getState();
  const ends = grips?.welds.find((g) => g.weld === weld)?.ends;
  if (ends === undefined || !isSameWork(grips?.of, project)) return;
  if (hand !== null && hand.laid === null && hand.weld === weld && hand.end === end) return;
  if (hand !== null && hand.laid === null) putBack();
  bookStore.setState({
    chosen: weld,
    tied: null,
    hand: { weld, end, from: ends, to: ends, drawn: ends, path: null, panels: [], fault: null, laid: null },
  });
  slideEnd(ends[end]);
}

/** Slides the end in hand to a place. */
export function slideEnd(place: SeamPlaces[0]): void {
  const { hand } = bookStore.getState();
  if (hand === null || hand.laid !== null) return;
  const to: SeamPlaces = hand.end === 0 ? [place, hand.to[1]] : [hand.to[0], place];
  changeHand({ to });
  next = { weld: hand.weld, to };
  askNext();
}

/** Puts the end in hand back where it was. */
export function putBack(): void {
  next = null;
  leaving = false;
  bookStore.setState({ hand: null });
}

/** Lets go: once the newest place is drawn the seam lies there, or where it last could, and the whole roof is tied again. */
export function letGo(): void {
  const { hand } = bookStore.getState();
  if (hand === null || hand.laid !== null) return;
  leaving = true;
  layIfDrawn();
}

function layIfDrawn(): void {
  const { hand } = bookStore.getState();
  if (leaving && !asked && next === null && hand !== null && hand.laid === null) lay(hand);
}

/** All seams one by one with this one between two other places: in their own numbers where the job gives them so already. */
function listPairs(hand: Hand, to: SeamPlaces): EdgePlace[][] {
  const { grips, project, soFar, ...whole } = bookStore.getState();
  // before the first plan stands there is only what it has come to
  const facts = soFar.panels?.facts ?? whole.facts;
  const own = grips?.welds.find((g) => g.weld === hand.weld);
  const given = project?.job.seams?.pairs;
  if (given !== undefined && typeof own?.pair === "number") {
    const at = own.pair;
    return given.map((pair, i) => (i === at ? [to[0], ...pair.slice(1, -1), to[1]] : pair));
  }
  if (facts === null) return [];
  const known = new Map<string, EdgePlace[]>(grips?.welds.map(({ weld, ends }) => [weld, ends]));
  return findSeamEnds(facts, known.set(hand.weld, to)).map(({ places }) => places);
}

function lay(hand: Hand): void {
  leaving = false;
  const { grips, project } = bookStore.getState();
  const to = hand.fault === null ? hand.to : hand.drawn;
  const { from, end, weld } = hand;
  if (!isSameWork(grips?.of, project) || (to[end].edge === from[end].edge && to[end].at === from[end].at)) {
    bookStore.setState({ hand: null });
    return;
  }
  const laid = listPairs(hand, to);
  // out of hand first: who hears of the changed job must not take it for one changed under the hand, nor plan the one before it
  bookStore.setState({ hand: null, tying: project });
  act(layPairs, { pairs: laid }, `end of ${weld}`);
  const after = bookStore.getState().project;
  const pairs = after?.job.seams?.pairs;
  if (after === null || after === project || pairs === undefined) {
    bookStore.setState({ tying: null });
    return;
  }
  bookStore.setState({ hand: { ...hand, to, laid: after, fault: null }, tying: worker === null ? null : after });
  projects.set(--tiedRuns, after);
  send({ kind: "tie", run, next: tiedRuns, pairs });
}
