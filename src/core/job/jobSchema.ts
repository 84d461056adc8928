// The shape of the job file, version 1: every key it may have, its type, range, unit and remedy. No defaults and no meaning:
// those stand in readJob.ts and its neighbours. Source: the fixed contract of the job file.
import { z } from "zod";

/** What a message can say about a value beside its type and range. */
export interface KeyNotes {
  unit?: string;
  remedy?: string;
}

/** A finite number within limits; the least one may itself be refused (above). */
function num(least: number, most: number, notes: KeyNotes & { above?: boolean } = {}) {
  const { above, ...rest } = notes;
  const base = z.number();
  return (above ? base.gt(least) : base.min(least)).max(most).meta(rest);
}

function whole(least: number, most: number, notes: KeyNotes = {}) {
  return z
    .number()
    .int()
    .min(least)
    .max(most)
    .meta({ ...notes });
}

/** One line of text without control characters or broken letters. */
function line(most: number, least = 0) {
  return z
    .string()
    .min(least)
    .max(most)
    .regex(/^[^\p{Cc}\p{Cs}]*$/u)
    .meta({ remedy: "one line of plain text" });
}

const name = line(80, 1);
const mm = (most: number, remedy?: string) => num(0, most, { unit: "mm", ...(remedy === undefined ? {} : { remedy }) });
const mmAbove = (most: number) => num(0, most, { unit: "mm", above: true });
const kN = num(0, 1e5, { unit: "kN", above: true });
const coordinate = num(-1e6, 1e6, { unit: "m" });
const point = z.tuple([coordinate, coordinate, coordinate]).meta({ remedy: "three numbers [x, y, z], z up" });
const perMetre = (most: number) => num(0, most, { unit: "kN/m", above: true });
const alpha = num(0, 1e-3, { unit: "1/K" });
const names = <T extends z.ZodType>(value: T) => z.record(name, value);

const mesh = z.strictObject({
  file: z
    .string()
    .min(1)
    .max(1000)
    .regex(/^[^\0]*$/)
    .optional(),
  vertices: z.array(z.unknown()).optional(),
  triangles: z.array(z.unknown()).optional(),
  faces: z.array(z.unknown()).optional(),
  lines: z.array(z.unknown()).optional(),
  points: z.array(z.unknown()).optional(),
  unit: z.enum(["m", "mm", "cm", "ft", "in"]).optional(),
  up: z.enum(["z", "y"]).optional(),
  outside: z.enum(["up", "down", "normals"]).optional(),
});

const cable = z.strictObject({
  EA: num(0, 1e8, { unit: "kN", above: true, remedy: "E times the area E belongs to" }).optional(),
  minBreakingForce: kN.optional(),
  diameter: num(0, 300, { unit: "mm", above: true }).optional(),
  mass: num(0, 500, { unit: "kg/m", above: true }).optional(),
  alpha: alpha.optional(),
});

/** How a cable or stay is made: what end fittings take off and carry, growth for good, spacing of clamps. */
const cableMaking = {
  terminals: z.tuple([mm(5000), mm(5000)]).optional(),
  stretch: num(0, 0.03, { remedy: "a share of the length that stays for good: 0.25 % is 0.0025" }).optional(),
  fitting: kN.optional(),
  clamps: num(20, 1e5, { unit: "mm" }).optional(),
};

const edge = z.strictObject({
  kind: z.enum(["cable", "clamped", "free", "ridge", "valley", "belt"]).optional(),
  force: num(0, 1e5, {
    unit: "kN",
    above: true,
    remedy: 'null for the force that balances the form best, or "kind": "free" for an edge without a cable',
  })
    .nullable()
    .optional(),
  cable: z.union([name, cable]).optional(),
  prestretched: z.boolean().optional(),
  ...cableMaking,
});

const fabric = z.strictObject({
  id: name.optional(),
  Ew: perMetre(1e5).optional(),
  Ef: perMetre(1e5).optional(),
  nuWf: num(0, 5, { remedy: "weft strain caused by unit warp strain, usually 0.2 to 1" }).optional(),
  G: perMetre(1e5).optional(),
  alpha: alpha.optional(),
  rollWidth: num(100, 10_000, { unit: "mm" }).optional(),
  selvedge: mm(500).optional(),
  rollLength: num(1000, 1e7, { unit: "mm" }).optional(),
  mass: num(0, 20, { unit: "kg/m2", above: true }).optional(),
  material: z.enum(["polyester", "glass", "other"]).optional(),
  strength: z.strictObject({ warp: perMetre(5000), weft: perMetre(5000) }).optional(),
});

const place = z.strictObject({ edge: name, at: num(0, 1, { remedy: "a share of the edge's length" }) });
const seams = z.strictObject({
  layout: z.enum(["auto", "bands", "gores", "pairs"]).optional(),
  from: name.optional(),
  to: name.optional(),
  count: z.union([whole(1, 1000), z.literal("auto")]).optional(),
  pairs: z.array(z.array(place).min(2).max(50)).min(1).max(1000).optional(),
  maxWidth: num(50, 10_000, { unit: "mm" }).optional(),
  minWidth: num(50, 10_000, { unit: "mm" }).optional(),
  maxLength: num(100, 1e6, { unit: "mm" }).optional(),
  why: line(400, 1).optional(),
  doubleCloth: z.boolean().optional(),
});

const strainRemedy = "a strain, not per cent: 1.2 % is 0.012";
const strain = num(-0.05, 0.2, { remedy: strainRemedy });
const fade = num(0, 50, { unit: "m", above: true }).nullable().optional();

const flaw = z.strictObject({
  x: mm(1e7),
  y: mm(10_000),
  length: mmAbove(1e7),
  width: mmAbove(10_000),
  from: z.enum(["start", "end"]).optional(),
});
/** Money a square metre of cloth, counted over all its width. */
const price = num(0, 1e6, { unit: "a m2" });
const roll = z.strictObject({
  id: name.optional(),
  width: num(100, 10_000, { unit: "mm" }).optional(),
  selvedge: mm(500).optional(),
  length: num(1, 1e7, { unit: "mm" }).optional(),
  batch: name.nullable().optional(),
  start: mm(1e5).optional(),
  flaws: z.array(flaw).max(10_000).optional(),
  outerFace: z.enum(["up", "down"]).optional(),
  price: price.nullable().optional(),
});

const nest = z.strictObject({
  steps: whole(1, 1e7).optional(),
  seconds: num(0, 86_400, { unit: "s", above: true }).nullable().optional(),
  seed: whole(0, 0xffffffff).optional(),
  gap: mm(200).optional(),
  turn: z.boolean().optional(),
  bite: mmAbove(1e6).nullable().optional(),
  pastBite: z.enum(["refuse", "feed"]).optional(),
  sharedEdges: z.boolean().optional(),
  price: price.nullable().optional(),
  currency: name.nullable().optional(),
  pins: z
    .array(
      z.strictObject({
        panel: name,
        roll: name,
        x: num(-1e7, 1e7, { unit: "mm" }),
        y: num(-1e5, 1e5, { unit: "mm" }),
        rotation: z.union([z.literal(0), z.literal(180)]),
      }),
    )
    .max(10_000)
    .optional(),
});

const turnbuckle = z.strictObject({
  thread: num(3, 200, { unit: "mm", remedy: "the nominal diameter: 24 for M24" }).optional(),
  perTurn: mmAbove(100),
  shortest: mmAbove(10_000),
  longest: mmAbove(10_000),
  capacity: kN.optional(),
  ends: z.enum(["both", "single"]).optional(),
  engagement: mm(1000).optional(),
});
const rig = z.strictObject({
  adjusters: z
    .array(
      z.strictObject({
        name,
        anchor: name.optional(),
        edge: name.optional(),
        end: z.union([name, z.literal(0), z.literal(1)]).optional(),
        ring: name.optional(),
        support: point.optional(),
        turnbuckle: z.union([name, turnbuckle]).optional(),
        EA: num(0, 1e8, { unit: "kN", above: true }).optional(),
        fitting: kN.optional(),
        anchorCapacity: kN.optional(),
      }),
    )
    .optional(),
  struts: z
    .array(
      z.strictObject({
        name,
        from: z.union([name, point]),
        to: z.union([name, point]),
        EA: num(0, 1e9, { unit: "kN", above: true }).optional(),
        pinned: z.union([z.boolean(), z.array(name), name]).optional(),
      }),
    )
    .optional(),
  stays: z
    .array(
      z.strictObject({
        name,
        from: z.union([name, point]),
        to: z.union([name, point]),
        EA: num(0, 1e8, { unit: "kN", above: true }).optional(),
        force: num(0, 1e5, { unit: "kN" }).nullable().optional(),
        minBreakingForce: kN.optional(),
        ...cableMaking,
      }),
    )
    .optional(),
  stages: z
    .array(num(0, 1.5, { above: true }))
    .min(1)
    .max(50)
    .optional(),
  temperature: num(-60, 80, { unit: "degC" }).optional(),
  frameAlpha: alpha.optional(),
  selfWeight: z.boolean().optional(),
  limit: num(0, 1, { above: true, remedy: "a share of the weakest part's capacity" }).optional(),
  reading: z
    .strictObject({ error: num(0, 0.5, { remedy: "a share of the reading: 5 % is 0.05" }).optional() })
    .optional(),
});

const share = (most: number) => num(0, most, { above: true, remedy: "a share: 5 % is 0.05" }).optional();
const proof = z.strictObject({
  mean: share(1),
  rms: share(2),
  moved: mmAbove(1e5).nullable().optional(),
  force: share(1),
  slack: share(1),
});

const survey = z.union([
  z.strictObject({ anchor: name, at: point }),
  z.strictObject({ edge: name, along: num(0, 1, { remedy: "a share of the edge's length" }), at: point }),
]);

const papers = z.strictObject({
  date: line(40).optional(),
  drawnBy: line(80).optional(),
  checkedBy: line(80).optional(),
  supersedes: line(12, 1).optional(),
  sheet: z.enum(["A4", "A3", "Letter", "Tabloid"]).optional(),
  units: z.enum(["metric", "imperial"]).optional(),
  site: names(z.union([z.number(), line(400), z.boolean()])).optional(),
});

/** The job file, version 1. Unknown keys are refused everywhere. */
export const jobSchema = z.strictObject({
  format: z.literal("seamstay-job"),
  version: z.literal(1),
  title: line(200, 1),
  issue: line(12, 1).optional(),
  mesh,
  prestress: z
    .strictObject({
      warp: perMetre(200).optional(),
      weft: perMetre(200).optional(),
      from: z.literal("balance").optional(),
    })
    .optional(),
  warp: point.optional(),
  settle: z.boolean().optional(),
  fabric: z.union([name, fabric]).optional(),
  edges: names(edge).optional(),
  anchors: z
    .array(
      z.strictObject({
        name,
        vertex: whole(0, 1e9).optional(),
        at: point.optional(),
        support: point.optional(),
        cutBack: mm(5000).optional(),
      }),
    )
    .optional(),
  seams: seams.optional(),
  panels: names(
    z.strictObject({ batch: name.optional(), warp: num(-180, 180, { unit: "degrees" }).optional() }),
  ).optional(),
  compensation: names(z.strictObject({ warp: strain, weft: strain })).optional(),
  decompensation: z.strictObject({ clamped: fade, ring: fade, cable: fade }).optional(),
  allowances: z
    .strictObject({
      seam: mm(500).optional(),
      seamOn: z.enum(["both", "one"]).optional(),
      pocket: mm(1000).optional(),
      pocketStrip: z.boolean().optional(),
      cover: mm(2000).optional(),
      clamp: mm(2000, "a set-back, which takes cloth away: 0 or more").optional(),
      hem: mm(1000).optional(),
    })
    .optional(),
  rolls: z.array(roll).min(1).max(10_000).optional(),
  nest: nest.optional(),
  rig: rig.optional(),
  survey: z.array(survey).optional(),
  clothCut: z.boolean().optional(),
  proof: proof.optional(),
  papers: papers.optional(),
});

/** A job file that has the shape; everything but format, version, title and mesh may be missing. */
export type JobFile = z.infer<typeof jobSchema>;
