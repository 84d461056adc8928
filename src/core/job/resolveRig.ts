// The rig's part of a job: catalogue entries looked up, defaults in place, and a list of what was not the job's own word.
import type { RigJob } from "../records/job.ts";
import type { CableMaking, Turnbuckle } from "../records/rig.ts";
import type { Catalogues } from "./catalogues.ts";
import { type DefaultLedger, noteDefault, takeDefault } from "./jobDefaults.ts";
import type { JobFile } from "./jobSchema.ts";

/** Values taken where the job says nothing of its rig; all of them keep the schedule from being issued. */
export const RIG_DEFAULTS = {
  stages: [0.1, 0.3, 0.6, 0.85, 1],
  /** degC */
  temperature: 15,
  /** Share of the weakest part: construction stage, several components (EN 1993-1-11:2006 Table 7.1, from memory). */
  limit: 0.55,
  /** Clamp-on tension meter after calibration (common practice: 3 to 5 %). */
  readingError: 0.05,
  cable: "1x19-stainless-16",
  turnbuckle: "open-body-m24",
} as const;

type FileAdjuster = NonNullable<NonNullable<JobFile["rig"]>["adjusters"]>[number];

function resolveTurnbuckle(given: FileAdjuster["turnbuckle"], catalogues: Catalogues): Turnbuckle | null {
  if (given === undefined) return null;
  if (typeof given === "string") return readTurnbuckle(given, catalogues);
  const { perTurn, shortest, longest, capacity, ...rest } = given;
  return { id: "job", perTurn, shortest, longest, capacity: capacity ?? null, ...leaveOut(rest), status: {} };
}

function readTurnbuckle(id: string, catalogues: Catalogues): Turnbuckle {
  const { perTurn, shortest, longest, capacity, thread, status } = catalogues.turnbuckles[id];
  // at its longest a catalogue body holds one diameter of thread at each end: that is how its longest is meant
  const both = { ends: "both" as const, engagement: thread };
  return { id, perTurn, shortest, longest, capacity, thread, ...both, status };
}

/** Keys that are not given are left out. */
function leaveOut<T extends object>(record: T): { [K in keyof T]: Exclude<T[K], undefined> } {
  return Object.fromEntries(Object.entries(record).filter(([, v]) => v !== undefined)) as {
    [K in keyof T]: Exclude<T[K], undefined>;
  };
}

/** How a cable or stay is made, or null where the job says nothing of it. */
export function resolveMaking(
  given: {
    [K in keyof CableMaking]?: CableMaking[K] | undefined;
  },
): CableMaking | null {
  const { terminals, stretch, fitting, clamps } = given;
  const making: CableMaking = leaveOut({ terminals, stretch, fitting, clamps });
  return Object.keys(making).length > 0 ? making : null;
}

/** The rig as the job gives it; names and places are checked against the form later. */
export function resolveRig(file: JobFile, catalogues: Catalogues, ledger: DefaultLedger): RigJob {
  const rig = file.rig ?? {};
  const d = RIG_DEFAULTS;
  const cable = catalogues.cables[RIG_DEFAULTS.cable];
  const defaults: string[] = [];
  if (rig.limit === undefined) {
    defaults.push("rig.limit");
    noteDefault(ledger, "rig.limit", d.limit, `${d.limit} of the weakest part, as while building`, "from memory");
  }
  if (rig.stages === undefined) {
    const words = `stages at ${d.stages.map((s) => `${100 * s} %`).join(", ")} of the final forces`;
    noteDefault(ledger, "rig.stages", null, words);
  }
  const { temperature, reading } = rig;
  return {
    adjusters:
      rig.adjusters?.map((a) => ({
        name: a.name,
        anchor: a.anchor ?? null,
        edge: a.edge ?? null,
        end: a.end === undefined ? null : a.end === 0 ? "first" : a.end === 1 ? "last" : a.end,
        turnbuckle: resolveTurnbuckle(a.turnbuckle, catalogues),
        EA: a.EA ?? null,
        ...leaveOut({ fitting: a.fitting, anchorCapacity: a.anchorCapacity, ring: a.ring, support: a.support }),
      })) ?? null,
    struts: (rig.struts ?? []).map((s) => ({ name: s.name, from: s.from, to: s.to, EA: s.EA ?? null })),
    stays: (rig.stays ?? []).map((s) => ({
      name: s.name,
      from: s.from,
      to: s.to,
      EA: s.EA ?? null,
      force: s.force ?? null,
      minBreakingForce: s.minBreakingForce ?? null,
      ...leaveOut({ making: resolveMaking(s) ?? undefined }),
    })),
    stages: rig.stages ?? [...d.stages],
    temperature: takeDefault<number>(ledger, temperature, d.temperature, "rig.temperature", `${d.temperature} degC`),
    frameAlpha: rig.frameAlpha ?? 0,
    selfWeight: rig.selfWeight ?? false,
    limit: rig.limit ?? d.limit,
    readingError: takeDefault<number>(
      ledger,
      reading?.error,
      d.readingError,
      "rig.reading.error",
      `readings may be off by ${100 * d.readingError} %`,
    ),
    defaults,
    defaultCable: { ...cable.cable, status: cable.status },
    defaultTurnbuckle: readTurnbuckle(RIG_DEFAULTS.turnbuckle, catalogues),
  };
}
