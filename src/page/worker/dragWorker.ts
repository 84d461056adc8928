// The worker that redraws a dragged seam's panels, whatever the plan's worker does meanwhile, and ties the roof again. Roofs come to
// it from there by a port of its own, so that they never pass through the page.
import {
  dragSeamInPlace,
  type Grip,
  listGrips,
  type MadeRoof,
  openDrag,
  type SeamDrag,
  seeDragged,
  seeRoof,
  tieRoof,
} from "../../core/plan/dragSeam.ts";
import { measureLayout } from "../../core/plan/measureLayout.ts";
import { PlanError } from "../../core/problem.ts";
import { describeFault } from "./describeFault.ts";
import type { DragReply, DragRequest, SentRoof } from "./messages.ts";
import { createTeller } from "./teller.ts";

let run = -1;
let roof: MadeRoof | null = null;
let drag: SeamDrag | null = null;
let port: MessagePort | null = null;

/** How often, and for how long at most (ms), a seam is slid to where it is, unseen, before the first hand takes one. */
const WARM = { moves: 40, ms: 4000 };
let warmed = 0;
let warming: ReturnType<typeof setTimeout> | undefined;

function post(reply: DragReply): void {
  self.postMessage(reply);
}

/** Takes a roof up and tells what can be dragged on it. One whose seams cannot be opened has nothing to drag. */
function takeUp(next: SentRoof): void {
  run = next.run;
  roof = next.roof;
  drag = null;
  try {
    drag = openDrag(roof.form, roof.job, roof.fitted);
  } catch (error) {
    if (!(error instanceof PlanError)) throw error;
  }
  const grips = drag === null ? [] : listGrips(drag);
  post({ kind: "grips", run, grips });
  const one = grips[grips.length >> 1];
  if (one !== undefined) warmUp(one, performance.now());
}

/**
 * A worker's code is slow until the browser has seen it run some dozen times, and a hand would feel that. So the seam in the middle is
 * slid to where it lies, once a turn so that whatever is asked meanwhile goes first; the first true move ends it.
 */
function warmUp(grip: Grip, begin: number): void {
  clearTimeout(warming);
  if (warmed >= WARM.moves || performance.now() - begin > WARM.ms) return;
  warming = setTimeout(() => {
    warmed++;
    try {
      if (drag !== null) seeDragged(dragSeamInPlace(drag, grip.weld, grip.ends), grip.weld);
    } catch (error) {
      if (!(error instanceof PlanError)) throw error;
      return;
    }
    warmUp(grip, begin);
  });
}

function redraw(request: Extract<DragRequest, { kind: "drag" }>): void {
  const { weld, to } = request;
  if (request.run !== run || drag === null) {
    post({ kind: "outdated", run });
    return;
  }
  clearTimeout(warming);
  const begin = performance.now();
  try {
    const seen = seeDragged(dragSeamInPlace(drag, weld, to), weld);
    post({ kind: "dragged", run, weld, to, ...seen, ms: performance.now() - begin });
  } catch (error) {
    post({ kind: "refused", run, weld, to, fault: describeFault(error) });
  }
}

/** Another layout on its own; a fault of the program is told as a refusal, so that the next one is still weighed. */
function weigh({ run: of, turn, asked, stop }: Extract<DragRequest, { kind: "weigh" }>): void {
  const isStopped = () => stop !== null && Atomics.load(stop, 0) !== 0;
  if (of !== run || roof === null || isStopped()) return;
  const { tell } = createTeller((share, words) => post({ kind: "weighing", run, turn, share, words }));
  try {
    const layout = measureLayout(roof.form, roof.job, asked, { onProgress: tell, cancelled: isStopped });
    post({ kind: "weighed", run, turn, layout });
  } catch (error) {
    if (isStopped()) return;
    const refused = describeFault(error).message;
    post({ kind: "weighed", run, turn, layout: { asked, rows: [], ways: [], lines: [], refused } });
  }
}

function tie({ run: of, next, pairs }: Extract<DragRequest, { kind: "tie" }>): void {
  if (of !== run || roof === null) {
    post({ kind: "untied", run: next });
    return;
  }
  clearTimeout(warming);
  const begin = performance.now();
  try {
    const tied = tieRoof(roof, pairs);
    post({ kind: "tied", run: next, ...seeRoof(tied), ms: performance.now() - begin });
    takeUp({ run: next, roof: tied });
  } catch {
    post({ kind: "untied", run: next });
  }
}

self.onmessage = ({ data: request }: MessageEvent<DragRequest>) => {
  if (request.kind === "drag") redraw(request);
  else if (request.kind === "tie") tie(request);
  else if (request.kind === "weigh") weigh(request);
  else {
    port?.close();
    port = request.roofs;
    port.onmessage = ({ data }: MessageEvent<SentRoof>) => takeUp(data);
  }
};
