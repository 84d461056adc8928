// The form station: from a mesh as a program wrote it to a sound surface with named edges, anchors and its balance.
// Where the job asks for it, the surface is settled before it is balanced.
import { type Check, type Finding, PlanError, type StationContext, type StationResult } from "../problem.ts";
import type { FormEdge, FoundForm } from "../records/foundForm.ts";
import type { Job, MeshSource } from "../records/job.ts";
import { buildAdjacency } from "../surface/adjacency.ts";
import { measureArea } from "../surface/measures.ts";
import type { Surface } from "../surface/surface.ts";
import { balanceCablesInPlace } from "./balance/cableForces.ts";
import { isCable, measureStations } from "./balance/cablePull.ts";
import { balanceStress } from "./balance/clothStress.ts";
import { measureReactionsInPlace, measureResidual, type ResidualReport, sumForces } from "./balance/measureBalance.ts";
import { measureMembraneForces, type StressField } from "./balance/membraneForces.ts";
import { findStepMetres, isExplainedByRounding, measureRoundingReach } from "./balance/roundingReach.ts";
import { buildLoops, buildTearFindings, findTears } from "./edges/boundaryLoops.ts";
import { type BoundaryRun, cutLoop, sideKey } from "./edges/cutLoops.ts";
import { findCorners } from "./edges/findCorners.ts";
import { addJobAnchorsInPlace, readHeldPoints } from "./edges/heldPoints.ts";
import { matchLines, type SurfaceLine } from "./edges/matchLines.ts";
import { nameAnchors } from "./edges/nameAnchors.ts";
import { nameEdges } from "./edges/nameEdges.ts";
import { buildFormFinding, describePlace } from "./formFinding.ts";
import { measureRelief } from "./relief/measureRelief.ts";
import { buildSoundSurface, type SoundSurface } from "./repair/soundSurface.ts";
import { chooseForcesInPlace } from "./settle/settleForces.ts";
import { settleSurface } from "./settle/settleSurface.ts";

/** The decisions of a job that concern the form. */
export type FormJob = Pick<Job, "prestress" | "warp" | "settle" | "edges" | "anchors">;

/** Residual above which the form is not in balance (share of the mean summed force of the cloth at a vertex). */
const BALANCED = 0.01;

function chooseField(job: FormJob): { field: StressField; findings: Finding[] } {
  const { warp, weft, from } = job.prestress;
  if (from === "balance" && job.settle)
    throw new PlanError(
      "form-prestress",
      "prestress.from asks the form for the stress it was found with, settle moves the form to the stress of the job: take one of the two out of the job",
      "prestress.from",
      { from, settle: "true" },
    );
  if (!(warp > 0 && weft > 0))
    throw new PlanError(
      "form-prestress",
      `prestress: warp ${warp} and weft ${weft} kN/m must both be above 0; a cloth without tension has no form`,
      "prestress",
      { warp, weft },
    );
  const findings: Finding[] = [];
  if (warp !== weft && job.warp === null)
    findings.push(
      buildFormFinding("note", {
        code: "form-mean-stress",
        where: "warp",
        value: (warp + weft) / 2,
        text: `prestress ${warp} and ${weft} kN/m differ, but no warp direction is given: the balance is that of their mean, ${(warp + weft) / 2} kN/m both ways`,
        remedy: "give the warp direction in the job (warp)",
      }),
    );
  return { field: { warp, weft, direction: job.warp }, findings };
}

interface Skeleton {
  loops: number[][];
  runs: BoundaryRun[];
  anchorVertices: number[];
  inner: SurfaceLine[];
  findings: Finding[];
}

function cutBoundary(
  sound: SoundSurface,
  source: MeshSource,
  held: ReturnType<typeof readHeldPoints>["held"],
  rough: boolean,
): Skeleton {
  const adjacency = buildAdjacency(sound.surface);
  const loops = buildLoops(sound.surface, adjacency);
  const sides = new Set<string>();
  for (const loop of loops) for (const [i, v] of loop.entries()) sides.add(sideKey(v, loop[(i + 1) % loop.length]));
  const { lines, findings } = matchLines(sound, adjacency, source.lines, (a, b) => sides.has(sideKey(a, b)));
  const spoken = new Uint8Array(sound.toSource.length);
  for (const line of lines) for (const v of line.vertices) spoken[v] = 1;
  for (const v of held.keys()) spoken[v] = 1;
  const tears = new Set(findTears(sound, loops, spoken));
  const lineOfSide = new Map<string, SurfaceLine>();
  for (const line of lines)
    if (line.boundary)
      for (let i = 1; i < line.vertices.length; i++)
        lineOfSide.set(sideKey(line.vertices[i - 1], line.vertices[i]), line);
  const { xyz } = sound.surface;
  // where a form is yet to settle a named line that bends sharply between fixed points is only drawn roughly
  const findBends = (loop: readonly number[]) => {
    if (!rough || loop.filter((v) => held.has(v)).length < 2) return findCorners(xyz, loop);
    const lineAt = (i: number) => lineOfSide.get(sideKey(loop[i], loop[(i + 1) % loop.length]));
    return findCorners(xyz, loop).filter(
      (i) => lineAt(i) === undefined || lineAt(i) !== lineAt((i + loop.length - 1) % loop.length),
    );
  };
  const cut = loops.map((loop, i) =>
    cutLoop(loop, i, { xyz, lineOfSide, held, corners: findBends(loop), tear: tears.has(i) }),
  );
  return {
    loops,
    runs: cut.flatMap((c) => c.runs),
    anchorVertices: cut.flatMap((c) => c.anchors),
    inner: lines.filter((l) => !l.boundary),
    findings,
  };
}

function reportResidual(
  { surface, toSource }: Pick<SoundSurface, "surface" | "toSource">,
  { residual, worst, judged, size }: ResidualReport,
  step: number,
  reach: () => Float64Array<ArrayBuffer>,
): { checks: Check[]; findings: Finding[] } {
  const holds = judged <= BALANCED;
  const check: Check = {
    station: "form",
    text: "residual at free vertices over the mean summed force of the cloth (under equal stress without the part within plain cloth)",
    value: judged,
    limit: BALANCED,
    holds,
  };
  const percent = (r: number) => `${(100 * r).toPrecision(3)} %`;
  if (holds) {
    if (residual.max <= BALANCED) return { checks: [check], findings: [] };
    const slide = buildFormFinding("note", {
      code: "form-balance-within",
      where: "mesh",
      value: residual.tangentialMax ?? 0,
      limit: BALANCED,
      text: `the form is in balance across cloth and cables (at most ${percent(judged)} of the cloth's force at a vertex); within the cloth up to ${percent(residual.tangentialMax ?? 0)} is left, which under equal stress tells of uneven triangles, not of the form`,
      remedy: "nothing needs doing; a more even mesh leaves less",
    });
    return { checks: [check], findings: [slide] };
  }
  const source = toSource[worst];
  const words = `residual up to ${percent(judged)} of the cloth's force at a vertex (rms ${percent(residual.rms)}, across the cloth ${percent(residual.normalMax)}, within it ${percent(residual.tangentialMax ?? 0)}, limit ${percent(BALANCED)}), worst at vertex ${source} at ${describePlace(surface.xyz, worst)}`;
  const bound = step > 0 ? reach() : null;
  const explained = bound !== null && isExplainedByRounding(size, bound);
  const rounded = `the mesh file's coordinates are rounded to ${1000 * step} mm`;
  const finding = explained
    ? buildFormFinding("note", {
        code: "form-balance-rounding",
        where: `vertex ${source}`,
        value: judged,
        limit: BALANCED,
        text: `whether the form is in balance cannot be told more finely: ${words}; ${rounded}, and that alone can leave as much at every vertex`,
        remedy: "export the mesh with more digits to see the balance itself",
      })
    : buildFormFinding("caution", {
        code: "form-balance",
        where: `vertex ${source}`,
        value: judged,
        limit: BALANCED,
        text: `the form is not in balance under this prestress and these cable forces: ${words}${bound ? `; ${rounded}, which does not explain it` : ""}`,
        remedy:
          "check prestress and cable forces against those the form was found with; the roof will move towards its own balance when it is pulled up",
      });
  return { checks: [check], findings: [finding] };
}

/** The surface that goes on: settled where the job asks for it. */
function settle(
  job: FormJob,
  sound: SoundSurface,
  form: { skeleton: Skeleton; edges: FormEdge[]; fixed: Uint8Array<ArrayBuffer>; torn: boolean },
  built: Float64Array<ArrayBuffer> | null,
  context: StationContext,
): { surface: Surface; findings: Finding[]; checks: Check[] } {
  const { toSource } = sound;
  const surface = built ? { ...sound.surface, xyz: built } : sound.surface;
  if (!(job.settle || built) || form.torn) return { surface, findings: [], checks: [] };
  const { fixed, edges } = form;
  const field: StressField = { ...job.prestress, direction: job.warp };
  const mean = (field.warp + field.weft) / 2;
  const findings = chooseForcesInPlace(surface.xyz, edges, measureMembraneForces(surface, field), fixed, mean);
  const task = { surface, fixed, edges, loops: form.skeleton.loops, field, toSource };
  const settled = settleSurface(task, {
    ...context,
    onProgress: (share, words) => context.onProgress?.(0.5 + 0.4 * share, words),
  });
  return { ...settled, findings: [...findings, ...settled.findings] };
}

/** Every boundary side belongs to exactly one edge; all coordinates and forces are finite. */
function checkOutput(form: FoundForm): Check[] {
  const sides = form.loops.reduce((n, loop) => n + loop.length, 0);
  const covered = form.edges.reduce((n, e) => n + (e.loop >= 0 ? e.vertices.length - 1 : 0), 0);
  const numbers = [
    form.area,
    form.residual.max,
    ...form.reactions.flatMap((r) => r.force),
    ...form.edges.map((e) => e.force ?? 0),
  ];
  const broken = numbers.filter((x) => !Number.isFinite(x)).length;
  return [
    {
      station: "form",
      text: "boundary sides covered by edges",
      value: covered,
      limit: sides,
      holds: covered === sides,
    },
    { station: "form", text: "results that are not finite", value: broken, limit: 0, holds: broken === 0 },
  ];
}

/**
 * The found form of a mesh: repaired, named, balanced; every repair and default is a finding.
 * @shape built: where the sound surface's vertices stand once its held edges are where they were surveyed, 3*nV; then it is settled
 *   from there whatever the job says
 * @units metres, kN; reactions are the pull of the structure on what holds it
 * @throws PlanError mesh-flat, mesh-closed, mesh-three-way-edge, mesh-one-sided, anchor-unknown, anchor-double, edge-unknown,
 *   edge-kind, form-prestress, cancelled
 */
export function runForm(
  source: MeshSource,
  job: FormJob,
  context: StationContext,
  built: Float64Array<ArrayBuffer> | null = null,
): StationResult<FoundForm> {
  const step = (share: number, words: string) => {
    if (context.cancelled?.()) throw new PlanError("cancelled", "the form station was stopped", "form");
    context.onProgress?.(share, words);
  };
  step(0, "checking the mesh");
  const stress = chooseField(job);
  const sound = buildSoundSurface(source);
  step(0.4, "cutting the boundary into edges");
  const points = readHeldPoints(sound, source);
  addJobAnchorsInPlace(points.held, sound, job.anchors);
  const skeleton = cutBoundary(sound, source, points.held, job.settle);
  const taken = new Set([...points.held.values()].map((h) => h.name).filter((n) => n !== null));
  const even = measureMembraneForces(sound.surface, { warp: 1, weft: 1, direction: null });
  const named = nameEdges(
    { xyz: sound.surface.xyz, pull: even.force },
    skeleton.runs,
    skeleton.inner,
    job.edges,
    taken,
  );
  const edges: FormEdge[] = named.edges.map((n) => n.edge);
  const tears = buildTearFindings(
    sound,
    named.edges.filter((n) => n.tear).map(({ edge }) => ({ id: edge.id, loop: edge.vertices.slice(1) })),
  );
  const anchorage = nameAnchors(sound.surface, skeleton.anchorVertices, points.held, edges, job.anchors);
  step(0.5, job.settle ? "settling" : "balancing cloth and cables");
  const found = { skeleton, edges, fixed: anchorage.fixed, torn: tears.length > 0 };
  const settling = settle(job, sound, found, built, context);
  const { surface } = settling;
  step(0.9, "balancing cloth and cables");
  const stations = edges.map((e) => (isCable(e) ? measureStations(surface.xyz, e.vertices) : null));
  const sought =
    job.prestress.from === "balance"
      ? balanceStress({ surface, edges, fixed: anchorage.fixed }, stations, stress.field)
      : { stress: null, findings: [] };
  const field: StressField = sought.stress
    ? { ...stress.field, warp: sought.stress.warp, weft: sought.stress.weft }
    : stress.field;
  const membrane = measureMembraneForces(surface, field);
  const cableFindings = balanceCablesInPlace(edges, stations, membrane.force, anchorage.fixed);
  const total = sumForces(membrane, edges, stations);
  const { warp, weft, direction } = field;
  // stresses closer than the limit pull the cloth along itself by less than the limit
  const isEven = direction === null || Math.abs(warp - weft) <= (BALANCED * (warp + weft)) / 2;
  const report = measureResidual(surface, membrane, total, anchorage.fixed, edges, stations, isEven);
  const { reactions, check } = measureReactionsInPlace(surface, total, edges, anchorage.anchors, field);
  const grain = surface === sound.surface ? findStepMetres(source) : 0;
  const balance = reportResidual({ surface, toSource: sound.toSource }, report, grain, () =>
    measureRoundingReach(surface, edges, Math.max(warp, weft), grain),
  );
  const { relief, ...slopes } = measureRelief(surface, edges, anchorage.fixed, sound.toSource);
  const output: FoundForm = {
    surface,
    fixed: anchorage.fixed,
    loops: skeleton.loops,
    stress: { warp, weft },
    ...(sought.stress ? { stressSpread: sought.stress.spread } : {}),
    edges,
    anchors: anchorage.anchors,
    residual: report.residual,
    area: measureArea(surface),
    reactions,
    relief,
  };
  step(1, "form done");
  return {
    output,
    findings: [
      ...sound.findings,
      ...points.findings,
      ...skeleton.findings,
      ...tears,
      ...named.findings,
      ...anchorage.findings,
      ...stress.findings,
      ...settling.findings,
      ...sought.findings,
      ...cableFindings,
      ...balance.findings,
      ...slopes.findings,
    ],
    checks: [...settling.checks, ...balance.checks, check, ...slopes.checks, ...checkOutput(output)],
  };
}
