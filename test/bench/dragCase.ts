// `bench drag JOB|FORM.obj`: a seam's end dragged on the planned form: the two panels anew for each place of the pointer, then, when it
// is let go, the whole roof tied again. Times of the clock and of the processor, since a busy machine tells them apart.
import { performance } from "node:perf_hooks";
import { runForm } from "../../src/core/form/runForm.ts";
import { runPanels } from "../../src/core/panels/runPanels.ts";
import { dragSeamInPlace, openDrag } from "../../src/core/plan/dragSeam.ts";
import { fitPanels } from "../../src/core/plan/fitPanels.ts";
import type { EdgePlace, Job, MeshSource } from "../../src/core/records/job.ts";
import { runSeams } from "../../src/core/seams/runSeams.ts";

/** Places of the pointer while the end is dragged, and how far each is from the one before, share of the edge. */
const MOVES = 25;
const STEP = 0.0012;
/** Times the roof is tied again. */
const TIES = 5;

interface Spent {
  ms: number;
  cpuMs: number;
}

function spend(run: () => void): Spent {
  const [begin, used] = [performance.now(), process.cpuUsage()];
  run();
  const { user, system } = process.cpuUsage(used);
  return { ms: performance.now() - begin, cpuMs: (user + system) / 1000 };
}

function medianOf(all: readonly Spent[]): Spent {
  const middle = (of: (s: Spent) => number) => all.map(of).sort((a, b) => a - b)[all.length >> 1];
  return { ms: middle((s) => s.ms), cpuMs: middle((s) => s.cpuMs) };
}

/** Medians; `worst` is the slowest redraw, the first one included. */
export function benchDrag(job: Job, source: MeshSource) {
  const form = runForm(source, job, {}).output;
  const fitted = fitPanels(form, job, { seams: {}, panels: {}, onStation: () => {} });
  let drag = openDrag(form, job, fitted);
  const open = spend(() => {
    drag = openDrag(form, job, fitted);
  });
  const welds = [...drag.work.ends];
  const [weld, [from, to]] = welds[welds.length >> 1];
  const there = (k: number): [EdgePlace, EdgePlace] => [from, { ...to, at: to.at + STEP * k }];
  const moves = Array.from({ length: MOVES }, (_, k) => spend(() => dragSeamInPlace(drag, weld, there(k - 12))));
  const given: Job = { ...job, seams: { ...job.seams, layout: "pairs", pairs: [] } };
  given.seams.pairs = welds.map(([id, ends]) => (id === weld ? there(5) : ends));
  const ties = Array.from({ length: TIES }, () =>
    spend(() => runPanels(runSeams(form, given, fitted.options).output, form, given, {})),
  );
  return {
    triangles: form.surface.tri.length / 3,
    panels: fitted.panels.output.length,
    open,
    redraw: medianOf(moves),
    worst: Math.max(...moves.map((s) => s.ms)),
    retie: medianOf(ties),
  };
}
