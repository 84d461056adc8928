// A parsed job file to a job with every decision resolved. Reads no files, knows no mesh: names of edges and anchors are
// checked where the mesh is known. Source: the fixed contract of the job file.
import { type Finding, PlanError } from "../problem.ts";
import type { Job, MeshSource } from "../records/job.ts";
import type { Catalogues } from "./catalogues.ts";
import { checkJobMeaning } from "./checkJobMeaning.ts";
import { type DefaultLedger, JOB_DEFAULTS, noteDefault, takeDefault } from "./jobDefaults.ts";
import { buildJobError, findJobProblems, unknownKey } from "./jobProblems.ts";
import { type JobFile, jobSchema } from "./jobSchema.ts";
import { migrateJob } from "./jobVersions.ts";
import { noteKeysWithoutEffect } from "./keysWithoutEffect.ts";
import { checkUsableWidth, resolveCable, resolveFabric } from "./resolveEntries.ts";
import { resolveMaking, resolveRig } from "./resolveRig.ts";

/** A job as read, where its mesh is, and what was taken for granted. */
export interface ReadJob {
  job: Job;
  /** The file beside the job, or the mesh as it stands in the job (for readMeshJson). */
  mesh: { file: string } | { inline: unknown };
  unit: MeshSource["unit"];
  up: MeshSource["up"];
  outside: MeshSource["outside"];
  findings: Finding[];
}

/**
 * A job with every decision resolved, defaults in place and noted.
 * @units the job file's: mm for cloth and allowances, m for fades, kN, kN/m
 * @throws PlanError job-format, job-version, job-version-newer; job-key-unknown, job-key-missing, job-value-type,
 * job-value-range, job-value-choice, job-value-text, job-name (shape); and the codes of checkJobMeaning and resolveEntries.
 * One error names all that is wrong in the shape; its code is the first one's.
 */
export function readJob(value: unknown, catalogues: Catalogues): ReadJob {
  const migrated = migrateJob(value);
  refuseHiddenKeys(migrated);
  const read = jobSchema.safeParse(migrated);
  if (!read.success) throw buildJobError(findJobProblems(jobSchema, migrated, read.error.issues));
  const file = read.data;
  checkJobMeaning(file, catalogues);

  const ledger: DefaultLedger = { findings: [] };
  const take = <T>(given: T | undefined, fallback: T, path: string, words: string): T =>
    takeDefault(ledger, given, fallback, path, words);
  const d = JOB_DEFAULTS;
  const { mesh: given } = file;
  const unit = take(given.unit, d.unit, "mesh.unit", "metres are taken; a mesh file has no unit of its own");
  const up = take(given.up, d.up, "mesh.up", "z is taken as up");
  const outside = take(given.outside, d.outside, "mesh.outside", "the outer face is taken to look up");
  const mesh = given.file === undefined ? { inline: given } : { file: given.file };
  const job = resolveJob(file, catalogues, ledger);
  return { job, mesh, unit, up, outside, findings: [...noteKeysWithoutEffect(file), ...ledger.findings] };
}

/** Names that JSON can carry and that would reach past the object they stand in. */
function refuseHiddenKeys(root: object): void {
  const open: { value: object; path: PropertyKey[] }[] = [{ value: root, path: [] }];
  for (let at = open.pop(); at !== undefined; at = open.pop()) {
    if (Object.hasOwn(at.value, "__proto__")) throw buildJobError([unknownKey([...at.path, "__proto__"], [])]);
    for (const [key, inner] of Object.entries(at.value)) {
      if (inner === null || typeof inner !== "object") continue;
      if (at.path.length > 200) {
        throw new PlanError(
          "job-depth",
          "the job is nested deeper than 200 levels; no key of a job is",
          String(at.path[0]),
        );
      }
      // Lists of numbers are long and hold no keys.
      if (Array.isArray(inner) && typeof inner[0] === "number") continue;
      open.push({ value: inner, path: [...at.path, Array.isArray(at.value) ? Number(key) : key] });
    }
  }
}

function resolveJob(file: JobFile, catalogues: Catalogues, ledger: DefaultLedger): Job {
  const take = <T>(given: T | undefined, fallback: T, path: string, words: string): T =>
    takeDefault(ledger, given, fallback, path, words);
  const d = JOB_DEFAULTS;
  const fabric = resolveFabric(file.fabric, catalogues, ledger);
  const edges: Job["edges"] = Object.create(null);
  for (const [name, e] of Object.entries(file.edges ?? {})) {
    const { cable, kind, force, prestretched } = e;
    const making = resolveMaking(e);
    edges[name] = {
      ...(kind === undefined ? {} : { kind }),
      ...(force === undefined ? {} : { force }),
      ...(prestretched === undefined ? {} : { prestretched }),
      ...(cable === undefined ? {} : { cable: resolveCable(cable, catalogues) }),
      ...(making ? { making } : {}),
    };
  }
  if (file.compensation === undefined) {
    noteDefault(ledger, "compensation", null, "what the cloth's stiffness gives at prestress, nothing permanent");
  }
  if (file.decompensation === undefined) {
    noteDefault(ledger, "decompensation", null, "none along clamped edges, rings and cables");
  }
  const prestress = file.prestress ?? {};
  const papers = file.papers ?? {};
  return {
    title: file.title,
    issue: take(file.issue, d.issue, "issue", `issue ${d.issue}`),
    meshName: file.mesh.file ?? "inline",
    prestress: {
      warp: take(prestress.warp, d.prestress, "prestress.warp", `${d.prestress.toFixed(1)} kN/m`),
      weft: take(prestress.weft, d.prestress, "prestress.weft", `${d.prestress.toFixed(1)} kN/m`),
      ...(prestress.from === undefined ? {} : { from: prestress.from }),
    },
    warp: take(file.warp ?? undefined, null, "warp", "the warp runs along the strips"),
    settle: take(file.settle, false, "settle", "the form is taken as it is and checked"),
    fabric,
    edges,
    anchors: (file.anchors ?? []).map(({ name, ...rest }) => ({ name, ...leaveOut(rest) })),
    seams: resolveSeams(file, ledger),
    panels: copyNames(file.panels ?? {}, leaveOut),
    compensation: copyNames(file.compensation ?? {}, (c) => c),
    decompensation: {
      clamped: file.decompensation?.clamped ?? null,
      ring: file.decompensation?.ring ?? null,
      cable: file.decompensation?.cable ?? null,
    },
    allowances: resolveAllowances(file, ledger),
    rolls: resolveRolls(file, fabric, ledger),
    nest: resolveNest(file, ledger),
    rig: resolveRig(file, catalogues, ledger),
    survey: file.survey ?? [],
    proof: resolveProof(file, ledger),
    clothCut: file.clothCut ?? false,
    papers: {
      date: papers.date ?? "",
      drawnBy: papers.drawnBy ?? "",
      checkedBy: papers.checkedBy ?? "",
      ...(papers.supersedes === undefined ? {} : { supersedes: papers.supersedes }),
      sheet: take(papers.sheet, d.sheet, "papers.sheet", d.sheet),
      units: take(papers.units, d.units, "papers.units", d.units),
      site: papers.site ? copyNames(papers.site, (value) => value) : null,
    },
  };
}

/** Keys that are undefined are left out, as exact optional types want. */
function leaveOut<T extends object>(record: T): { [K in keyof T]: Exclude<T[K], undefined> } {
  return Object.fromEntries(Object.entries(record).filter(([, v]) => v !== undefined)) as {
    [K in keyof T]: Exclude<T[K], undefined>;
  };
}

/** A map by name without a prototype: an edge may be called "constructor". */
function copyNames<T, U>(map: Record<string, T>, copy: (value: T) => U): Record<string, U> {
  const out: Record<string, U> = Object.create(null);
  for (const [name, value] of Object.entries(map)) out[name] = copy(value);
  return out;
}

function resolveSeams(file: JobFile, ledger: DefaultLedger): Job["seams"] {
  const given = file.seams ?? {};
  const layout = given.layout ?? (given.pairs === undefined ? undefined : "pairs");
  const words = "auto: the fewest strips that fit the roll";
  return {
    layout: takeDefault(ledger, layout, "auto", "seams.layout", words),
    from: given.from ?? null,
    to: given.to ?? null,
    // Pairs are their own count.
    count:
      layout === "pairs"
        ? (given.count ?? "auto")
        : takeDefault<number | "auto">(ledger, given.count, "auto", "seams.count", words),
    pairs: given.pairs ?? [],
    maxWidth: takeDefault(ledger, given.maxWidth, null, "seams.maxWidth", "the usable width of the roll"),
    ...(given.minWidth === undefined ? {} : { minWidth: given.minWidth }),
    ...(given.why === undefined ? {} : { why: given.why }),
    maxLength: takeDefault(ledger, given.maxLength, null, "seams.maxLength", "no limit but the length of the roll"),
    doubleCloth: given.doubleCloth ?? JOB_DEFAULTS.doubleCloth,
  };
}

function resolveProof(file: JobFile, ledger: DefaultLedger): Job["proof"] {
  const d = JOB_DEFAULTS.proof;
  if (file.proof === undefined) {
    const words = `the assembled roof may be off by ${100 * d.mean} % in its mean stress, ${100 * d.rms} % (rms) in a panel, ${100 * d.force} % in a force, with ${100 * d.slack} % of it slack`;
    noteDefault(ledger, "proof", null, words);
  }
  return { ...d, ...leaveOut(file.proof ?? {}) };
}

function resolveAllowances(file: JobFile, ledger: DefaultLedger): Job["allowances"] {
  const a = file.allowances ?? {};
  const d = JOB_DEFAULTS;
  const take = <T>(given: T | undefined, fallback: T, key: string, words: string): T =>
    takeDefault(ledger, given, fallback, `allowances.${key}`, words);
  return {
    seam: take(a.seam, d.seam, "seam", `${d.seam} mm finished overlap`),
    seamOn: take(a.seamOn, d.seamOn, "seamOn", "half the overlap on both sides of a seam"),
    pocket: take(a.pocket, d.pocket, "pocket", `${d.pocket} mm beyond the fold of a cable pocket`),
    pocketStrip: a.pocketStrip ?? d.pocketStrip,
    cover: a.cover ?? d.cover,
    clamp: take(a.clamp, d.clamp, "clamp", `${d.clamp} mm set-back along clamped edges`),
    hem: take(a.hem, d.hem, "hem", `${d.hem} mm hem along free edges`),
  };
}

function resolveRolls(file: JobFile, fabric: Job["fabric"], ledger: DefaultLedger): Job["rolls"] {
  if (file.rolls === undefined) {
    const words = `as many rolls as needed, ${fabric.rollWidth} mm wide and ${fabric.rollLength / 1000} m long`;
    return takeDefault(ledger, undefined, null, "rolls", words);
  }
  return file.rolls.map((roll, i) => {
    const take = <T>(given: T | undefined, fallback: T, key: string, words: string): T =>
      takeDefault(ledger, given, fallback, `rolls[${i}].${key}`, words);
    const read = {
      id: take(roll.id, `R${i + 1}`, "id", `R${i + 1}`),
      width: take(roll.width, fabric.rollWidth, "width", `${fabric.rollWidth} mm, of the fabric`),
      selvedge: take(roll.selvedge, fabric.selvedge, "selvedge", `${fabric.selvedge} mm a side, of the fabric`),
      length: take(roll.length, fabric.rollLength, "length", `${fabric.rollLength} mm, of the fabric`),
      batch: roll.batch ?? null,
      start: roll.start ?? 0,
      flaws: [],
      outerFace: take<"up" | "down">(
        roll.outerFace,
        "up",
        "outerFace",
        "the outer face is up as the roll comes off; flaws are noted so",
      ),
      price: roll.price ?? file.nest?.price ?? null,
    };
    checkUsableWidth(`rolls[${i}]`, read.width, read.selvedge);
    const flaws = (roll.flaws ?? []).map((f) => placeFlaw(f, read));
    checkAlongRoll(i, read, flaws);
    return { ...read, flaws };
  });
}

/** Trim that leaves nothing of a roll, and a flaw that lies past its end, are slips of a unit or of the end they are measured from. */
function checkAlongRoll(
  i: number,
  roll: { length: number; start: number },
  flaws: { x: number; length: number }[],
): void {
  const refuse = (path: string, words: string): never => {
    throw new PlanError("job-value-range", `rolls[${i}].${path}: ${words}`, `rolls[${i}].${path}`, {
      length: roll.length,
    });
  };
  if (roll.start >= roll.length)
    refuse("start", `a trim of ${roll.start} mm leaves nothing of a roll of ${roll.length} mm; correct one of them`);
  flaws.forEach((f, k) => {
    if (f.x < roll.length && f.x + f.length > 0) return;
    refuse(
      `flaws[${k}]`,
      `lies from ${f.x} to ${f.x + f.length} mm from the start, off a roll of ${roll.length} mm; correct its x, the end it is measured from, or the roll's length`,
    );
  });
}

/** Between cuts that may not be shared the knife needs this, mm (common practice: a blade's own width). */
const KNIFE = 1;

/** The gap between cuts: none only where edges may be shared. */
function resolveGap(given: NonNullable<JobFile["nest"]>, ledger: DefaultLedger): number {
  const shared = given.sharedEdges === true;
  const fallback = shared ? 0 : JOB_DEFAULTS.gap;
  if (given.gap === undefined || shared || given.gap >= KNIFE)
    return takeDefault(ledger, given.gap, fallback, "nest.gap", `${fallback} mm between cuts`);
  const words = `${KNIFE} mm between cuts in place of ${given.gap}: edges are not shared unless nest.sharedEdges is true`;
  return takeDefault(ledger, undefined, KNIFE, "nest.gap", words);
}

type GivenFlaw = NonNullable<NonNullable<JobFile["rolls"]>[number]["flaws"]>[number];

/** A flaw as it lies once the outer face is up, from the roll's start: turning a roll over along its length swaps its edges. */
function placeFlaw(
  flaw: GivenFlaw,
  roll: { width: number; selvedge: number; length: number; outerFace: "up" | "down" },
): { x: number; y: number; length: number; width: number } {
  const { x, y, length, width, from } = flaw;
  const usable = roll.width - 2 * roll.selvedge;
  return {
    x: from === "end" ? roll.length - x - length : x,
    y: roll.outerFace === "down" ? usable - y - width : y,
    length,
    width,
  };
}

function resolveNest(file: JobFile, ledger: DefaultLedger): Job["nest"] {
  const n = file.nest ?? {};
  const d = JOB_DEFAULTS;
  const take = <T>(given: T | undefined, fallback: T, key: string, words: string): T =>
    takeDefault(ledger, given, fallback, `nest.${key}`, words);
  return {
    steps: take(n.steps, d.steps, "steps", `${d.steps} steps`),
    seconds: n.seconds ?? null,
    seed: take(n.seed, d.seed, "seed", `seed ${d.seed}`),
    gap: resolveGap(n, ledger),
    turn: take<boolean>(n.turn, d.turn, "turn", "panels may lie turned by 180 degrees"),
    bite: n.bite ?? null,
    pastBite: n.pastBite ?? "refuse",
    price: n.price ?? null,
    currency: n.currency ?? null,
    pins: n.pins ?? [],
  };
}
