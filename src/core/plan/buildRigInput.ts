// From the job's words on cables and rig to what the rig station takes: defaults by the rules of the job file, each one noted,
// names checked against the form. Picks no size: a default cable or turnbuckle is there to compute with, not to order.
import { buildFlattenOptions } from "../panels/runPanels.ts";
import { type Finding, PlanError, type StationResult } from "../problem.ts";
import type { FlatPanel } from "../records/flatPanel.ts";
import type { FormEdge, FoundForm } from "../records/foundForm.ts";
import type { Job } from "../records/job.ts";
import type { AdjusterDecision } from "../records/rig.ts";
import type { StripLayout } from "../records/stripLayout.ts";
import { isRing } from "../rig/build/placeRings.ts";
import type { RigInput } from "../rig/rigInput.ts";
import type { Vec3 } from "../surface/surface.ts";
import { tellSurvey } from "./tellSurvey.ts";

/** Stiffness of an adjuster where none is given: a steel rod of 245 mm2 (M20 stress area) at 210 kN/mm2, kN. */
const adjusterEA = 51450;
/** Stiffness of a mast where none is given: a steel tube of 3000 mm2 at 210 kN/mm2, kN. */
const strutEA = 630000;

interface Notes {
  findings: Finding[];
  defaults: string[];
}

function noteDefault(notes: Notes, where: string, text: string, remedy: string): void {
  notes.defaults.push(where);
  notes.findings.push({
    code: "rig-default",
    level: "note",
    station: "rig",
    where,
    value: null,
    limit: null,
    text,
    remedy,
    basis: "common practice",
  });
}

/** Cable of one edge; EA and breaking force must be the job's own numbers before a schedule may be issued. */
function settleCable(edge: FormEdge, job: Job, notes: Notes): RigInput["cables"][string] {
  const decision = { ...job.edges.default, ...job.edges[edge.id] };
  const fallback = job.rig.defaultCable;
  const made = { prestretched: decision.prestretched ?? true, ...(decision.making ? { making: decision.making } : {}) };
  const given = decision.cable;
  const alpha = given?.alpha ?? fallback.alpha ?? 12e-6;
  if (!given) {
    noteDefault(
      notes,
      `edges.${edge.id}.cable`,
      `${edge.id}: no cable is given; ${fallback.id} with EA ${fallback.EA} kN is computed with`,
      `write edges.${edge.id}.cable with its EA and breaking force`,
    );
    return { type: { ...fallback, EA: fallback.EA ?? 1, alpha }, ...made };
  }
  if (given.EA === null) {
    notes.defaults.push(`edges.${edge.id}.cable.EA`);
    notes.findings.push({
      code: "cable-stiffness",
      level: "stop",
      station: "rig",
      where: edge.id,
      value: null,
      limit: null,
      text: `${edge.id}: its cable has no EA, so neither its slack length nor the tensioning can be worked out; ${fallback.EA} kN is computed with meanwhile`,
      remedy: `write edges.${edge.id}.cable.EA in kN (E times the area E belongs to)`,
      basis: "own argument",
    });
  } else if (given.id !== "job") {
    noteDefault(
      notes,
      `edges.${edge.id}.cable`,
      `${edge.id}: EA and breaking force are those of the catalogue's ${given.id}, not of a certificate`,
      `write the numbers of the cable's certificate in edges.${edge.id}.cable`,
    );
  }
  if (given.minBreakingForce === null) notes.defaults.push(`edges.${edge.id}.cable.minBreakingForce`);
  return { type: { ...given, EA: given.EA ?? fallback.EA ?? 1, alpha, status: {} }, ...made };
}

/** The ring a jack hauls; its far pin must be the job's own before a schedule may be issued. */
function settleRing(
  form: FoundForm,
  a: { name: string; ring?: string; support?: Vec3 },
  notes: Notes,
): Pick<AdjusterDecision, "ring" | "support"> {
  const { name, ring, support } = a;
  if (ring === undefined) return {};
  const rings = form.edges.filter(isRing).map((e) => e.id);
  if (!rings.includes(ring))
    throw new PlanError(
      "adjuster-ring",
      `adjuster ${name} hauls ring "${ring}", which is no closed clamped edge; there are ${rings.join(", ") || "none"}`,
      name,
    );
  if (!support)
    noteDefault(
      notes,
      `rig.adjusters.${name}.support`,
      `${name}: the far pin it hauls ring ${ring} to is not given; it is put 1.0 m beyond the ring's middle along the pull`,
      `write rig.adjusters.${name}.support`,
    );
  return { ring, ...(support ? { support } : {}) };
}

/** Cables whose mass nobody gave, where weight is to count. */
function tellWeight(cables: RigInput["cables"]): Finding[] {
  const open = Object.keys(cables).filter((id) => cables[id].type.mass === null);
  if (open.length === 0) return [];
  return [
    {
      code: "weight-open",
      level: "caution",
      station: "rig",
      where: open,
      value: null,
      limit: null,
      text: `self-weight is asked for, but the mass of ${open.join(", ")} is not given: they are counted without weight`,
      remedy: "write the cables' mass in kg/m",
      basis: "rules of the job file",
    },
  ];
}

/** A name for an adjuster at an anchor that nothing else in the file has. */
function nameAdjuster(anchor: string, taken: Set<string>): string {
  let name = /^A\d+$/.test(anchor) ? `T${anchor.slice(1)}` : `T-${anchor}`;
  while (taken.has(name)) name = `${name}'`;
  taken.add(name);
  return name;
}

/** End of a cable edge, or of a stay, at which an adjuster sits. */
function findEnd(form: FoundForm, job: Job, edge: string, end: string | null, name: string): "first" | "last" {
  const stay = job.rig.stays.find((s) => s.name === edge);
  const run = form.edges.find((e) => e.id === edge);
  if (!stay && run?.force == null)
    throw new PlanError(
      "adjuster-edge",
      `adjuster ${name} sits in "${edge}", which is no cable edge and no stay; there are ${[...form.edges.filter((e) => e.force !== null).map((e) => e.id), ...job.rig.stays.map((s) => s.name)].join(", ") || "none"}`,
      name,
    );
  if (end === "first" || end === "last") return end;
  if (stay && end !== null && stay.from === end) return "first";
  if (stay && end !== null && stay.to === end) return "last";
  const anchor = form.anchors.find((a) => a.id === end);
  if (run && anchor && run.vertices[0] === anchor.vertex) return "first";
  if (run && anchor && run.vertices[run.vertices.length - 1] === anchor.vertex) return "last";
  throw new PlanError(
    "adjuster-end",
    `adjuster ${name} stands at end "${end}" of ${edge}; write 0 for its first end, 1 for its last, or the anchor there`,
    name,
  );
}

function settleAdjusters(
  form: FoundForm,
  job: Job,
  supports: Record<string, Vec3>,
  taken: Set<string>,
  notes: Notes,
): AdjusterDecision[] {
  const pulls = new Map(form.reactions.map((r) => [r.anchor, Math.hypot(...r.force)]));
  const wanted =
    job.rig.adjusters ??
    form.anchors
      .filter((a) => a.isolated && (pulls.get(a.id) ?? 0) > 0)
      .map((a) => ({
        name: nameAdjuster(a.id, taken),
        anchor: a.id as string | null,
        edge: null,
        end: null,
        turnbuckle: null,
        EA: null,
      }));
  if (job.rig.adjusters === null && wanted.length > 0)
    noteDefault(
      notes,
      "rig.adjusters",
      `no adjusters are given: one stands at each of ${wanted.map((a) => a.anchor).join(", ")}, pin to pin 1.0 m, outward along the pull`,
      "write rig.adjusters in the job",
    );
  return wanted.map((a) => {
    const jack = "ring" in a ? settleRing(form, a, notes) : {};
    const anchor = form.anchors.find((q) => q.id === a.anchor);
    const far = anchor ? supports[anchor.id] : undefined;
    if (anchor && !far)
      noteDefault(
        notes,
        `anchors.${anchor.id}.support`,
        `${anchor.id}: its far pin is not given; it is put 1.0 m out along the pull`,
        `write the pin's place in anchors (name ${anchor.id}, support)`,
      );
    if (!a.turnbuckle)
      noteDefault(
        notes,
        `rig.adjusters.${a.name}.turnbuckle`,
        `${a.name}: no turnbuckle is given; ${job.rig.defaultTurnbuckle.id} (${job.rig.defaultTurnbuckle.perTurn} mm a turn) is computed with`,
        "name the turnbuckle with its travel and capacity",
      );
    else if (a.turnbuckle.id !== "job") notes.defaults.push(`rig.adjusters.${a.name}.turnbuckle`);
    if (a.turnbuckle && a.turnbuckle.capacity === null)
      notes.defaults.push(`rig.adjusters.${a.name}.turnbuckle.capacity`);
    if (a.EA === null)
      noteDefault(
        notes,
        `rig.adjusters.${a.name}.EA`,
        `${a.name}: its stiffness is not given; EA ${adjusterEA} kN is taken`,
        "write the adjuster's EA",
      );
    return {
      name: a.name,
      anchor: a.anchor,
      edge: a.edge,
      end: a.edge === null ? null : findEnd(form, job, a.edge, a.end, a.name),
      turnbuckle: a.turnbuckle ?? job.rig.defaultTurnbuckle,
      EA: a.EA ?? adjusterEA,
      ...jack,
      ...("fitting" in a && a.fitting !== undefined ? { fitting: a.fitting } : {}),
      ...("anchorCapacity" in a && a.anchorCapacity !== undefined ? { anchorCapacity: a.anchorCapacity } : {}),
    };
  });
}

function checkNamesFree(job: Job, taken: Set<string>): void {
  for (const a of [...(job.rig.adjusters ?? []), ...job.rig.struts, ...job.rig.stays]) {
    if (taken.has(a.name))
      throw new PlanError(
        "rig-name",
        `rig: the name "${a.name}" is taken by an edge, seam, panel or roll, or given twice; give it another`,
        a.name,
      );
    taken.add(a.name);
  }
}

/**
 * Input of the rig station, with notes on all that was taken for granted.
 * @throws PlanError rig-name, adjuster-edge, adjuster-end
 */
export function buildRigInput(
  job: Job,
  parts: { form: FoundForm; shifts?: RigInput["shifts"]; layout: StripLayout; panels: FlatPanel[]; rolls: string[] },
): StationResult<RigInput> {
  const { form, layout, panels } = parts;
  const notes: Notes = { findings: [], defaults: [...job.rig.defaults] };
  const taken = new Set([
    ...form.edges.map((e) => e.id),
    ...layout.seams.map((s) => s.id),
    ...panels.map((p) => p.id),
    ...parts.rolls,
  ]);
  checkNamesFree(job, taken);
  const supports: Record<string, Vec3> = Object.create(null);
  for (const a of job.anchors) if (a.support) supports[a.name] = a.support;
  const cutBacks: Record<string, number> = Object.create(null);
  for (const a of job.anchors) if (a.cutBack !== undefined) cutBacks[a.name] = a.cutBack;
  const survey: Record<string, Vec3> = Object.create(null);
  for (const s of job.survey) if (s.anchor !== undefined) survey[s.anchor] = s.at;
  const cables: RigInput["cables"] = Object.create(null);
  for (const edge of form.edges) {
    if (edge.force === null) continue;
    cables[edge.id] = settleCable(edge, job, notes);
    // a force taken from a usual sag is nobody's word: no schedule is issued on it
    if (edge.forceFrom === "sag") notes.defaults.push(`edges.${edge.id}.force`);
  }
  const adjusters = settleAdjusters(form, job, supports, taken, notes);
  const struts = job.rig.struts.map((s) => ({ ...s, EA: s.EA ?? strutEA }));
  for (const s of job.rig.struts)
    if (s.EA === null)
      noteDefault(
        notes,
        `rig.struts.${s.name}.EA`,
        `${s.name}: its stiffness is not given; EA ${strutEA} kN is taken`,
        "write the mast's EA",
      );
  const stays = job.rig.stays.map((s) => ({ ...s, EA: s.EA ?? job.rig.defaultCable.EA ?? 1 }));
  for (const s of job.rig.stays)
    if (s.EA === null || s.minBreakingForce === null)
      noteDefault(
        notes,
        `rig.stays.${s.name}`,
        `${s.name}: its EA or breaking force is not given; EA ${s.EA ?? job.rig.defaultCable.EA} kN is computed with`,
        "write the stay's EA and breaking force",
      );
  notes.findings.push(...tellSurvey({ form, supports }, job, adjusters));
  const { stages, temperature, frameAlpha, limit, readingError, selfWeight } = job.rig;
  const settings = { temperature, frameAlpha, limit, readingError, selfWeight };
  if (selfWeight) notes.findings.push(...tellWeight(cables));
  const whole = stages[stages.length - 1] === 1 ? stages : [...stages.filter((s) => s < 1), 1];
  return {
    output: {
      form,
      layout,
      panels,
      fabric: job.fabric,
      cables,
      supports,
      cutBacks,
      survey,
      lap: buildFlattenOptions(form, job).lap ?? null,
      proof: job.proof,
      shifts: parts.shifts ?? {},
      rig: { adjusters, struts, stays, stages: whole, ...settings, defaults: notes.defaults },
    },
    findings: notes.findings,
    checks: [],
  };
}
