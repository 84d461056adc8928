// Small rigs for tests, taken through the chain as a plan takes them: form, seams, panels, rig input.

import { buildRigInput } from "../../src/core/plan/buildRigInput.ts";
import { runBuiltForm } from "../../src/core/plan/builtForm.ts";
import { fitPanels } from "../../src/core/plan/fitPanels.ts";
import type { Finding } from "../../src/core/problem.ts";
import type { FoundForm } from "../../src/core/records/foundForm.ts";
import type { CableSpec, Job, MeshSource, RigJob } from "../../src/core/records/job.ts";
import type { Turnbuckle } from "../../src/core/records/rig.ts";
import type { RigInput } from "../../src/core/rig/rigInput.ts";
import type { Vec3 } from "../../src/core/surface/surface.ts";
import { makeJob } from "../madeJob.ts";
import type { MadeForm } from "../templates/madeForm.ts";
import { makeSail } from "../templates/makeForms.ts";

/** A made form as a mesh file would give it. */
export function placeForm(made: MadeForm): MeshSource {
  const n = made.tri.length / 3;
  return {
    xyz: made.xyz.slice(),
    faceStart: Uint32Array.from({ length: n + 1 }, (_, f) => 3 * f),
    faceVertex: made.tri,
    lines: made.lines,
    points: made.corners.map((c) => ({ name: c.name, vertices: [c.vertex] })),
    unit: "m",
    up: "z",
    outside: "up",
  };
}

export const cable: CableSpec = {
  id: "job",
  EA: 19860,
  minBreakingForce: 184,
  diameter: 16,
  mass: 1.29,
  alpha: 16e-6,
};

export const turnbuckle: Turnbuckle = {
  id: "job",
  perTurn: 6,
  shortest: 860,
  longest: 1140,
  capacity: 120,
  status: {},
};

/** The starter's sail with few triangles: 10 x 8 m, cables of 24, 21, 24 and 21 kN at 2 kN/m. */
export function makeSmallSail(cells: [number, number] = [10, 8]): MadeForm {
  return makeSail(
    [
      [-5, -4, 2.6],
      [5, -4, 4.4],
      [5, 4, 2.6],
      [-5, 4, 4.4],
    ],
    [12, 10.5, 12, 10.5],
    cells,
  );
}

/** Cable forces of a made form at 2 kN/m, as a job gives them. */
export function giveForces(made: MadeForm): Job["edges"] {
  return Object.fromEntries(
    Object.entries(made.pull).map(([name, pull]) => [name, { kind: "cable" as const, force: 2 * pull, cable }]),
  );
}

/** One adjuster a corner, named T1 … in their order. */
export function giveAdjusters(made: MadeForm, own: Partial<Turnbuckle> = {}): NonNullable<RigJob["adjusters"]> {
  return made.corners.map((c, i) => ({
    name: `T${i + 1}`,
    anchor: c.name,
    edge: null,
    end: null,
    turnbuckle: { ...turnbuckle, ...own },
    EA: 60000,
  }));
}

/** The chain as far as the rig's input; rig: decisions in place of those of makeJob. */
export function planInput(
  made: MadeForm,
  changes: Partial<Job> = {},
  rig: Partial<RigJob> = {},
): { job: Job; form: FoundForm; input: RigInput; findings: Finding[] } {
  const plain = makeJob({ edges: giveForces(made), ...changes });
  const job = { ...plain, rig: { ...plain.rig, ...rig } };
  const built = runBuiltForm(placeForm(made), job, {});
  const { form, shifts } = built.output;
  const fitted = fitPanels(form, job, { seams: {}, panels: {}, onStation: () => {} });
  const settled = buildRigInput(job, {
    form,
    shifts,
    layout: fitted.seams.output,
    panels: fitted.panels.output,
    rolls: ["R1"],
  });
  return { job, form, input: settled.output, findings: settled.findings };
}

/** A point seen from another, along a direction. */
export function offset(at: ArrayLike<number>, way: ArrayLike<number>, length: number): Vec3 {
  const l = Math.hypot(way[0], way[1], way[2]);
  return [0, 1, 2].map((k) => at[k] + (length * way[k]) / l) as Vec3;
}
