// The catalogues a job may name entries of: cloths, cables, turnbuckles, and the cautions printed on papers.
// Takes parsed JSON, reads no files. Holds no values of its own: they stand in templates/*.json, each with its status.
import { z } from "zod";
import { PlanError } from "../problem.ts";
import type { Fabric, ValueStatus } from "../records/fabric.ts";
import type { CableSpec } from "../records/job.ts";

/** A cloth of the catalogue with the words a person chooses it by. */
export interface CatalogueFabric {
  name: string;
  use: string;
  fabric: Fabric;
  /** Where each value comes from, by field name. */
  source: Record<string, string>;
}

/** A cable of the catalogue; EA always with the area it belongs to. */
export interface CatalogueCable {
  name: string;
  /** Metallic area, mm2. */
  area: number;
  /** kN/mm2, on that area. */
  modulus: number;
  /** Which area and how it was found. */
  basis: string;
  cable: CableSpec;
  status: Record<string, ValueStatus>;
  source: Record<string, string>;
}

/** A turnbuckle of the catalogue. Lengths in mm, pin to pin. */
export interface CatalogueTurnbuckle {
  id: string;
  name: string;
  /** Nominal diameter and pitch, mm. */
  thread: number;
  pitch: number;
  perTurn: number;
  shortest: number;
  longest: number;
  /** kN, null: none given. */
  capacity: number | null;
  status: Record<string, ValueStatus>;
  source: Record<string, string>;
}

/** A caution for papers: signal word, hazard, consequence, how to avoid it. */
export interface Caution {
  id: string;
  signal: "DANGER" | "WARNING" | "CAUTION" | "NOTICE";
  /** Papers it stands on. */
  papers: ("schedule" | "cables" | "hardware" | "rolls" | "panels" | "seams" | "findings")[];
  hazard: string;
  consequence: string;
  avoid: string;
  /** Only where cloth of this material is used, or of one that is not known. */
  cloth?: Fabric["material"];
  status: ValueStatus;
}

/** Everything a job may refer to by id. The maps have no prototype. */
export interface Catalogues {
  fabrics: Record<string, CatalogueFabric>;
  defaultFabric: string;
  cables: Record<string, CatalogueCable>;
  turnbuckles: Record<string, CatalogueTurnbuckle>;
  cautions: Caution[];
}

const status = z.enum(["verified", "from memory", "common practice"]);
const valued = <T extends z.ZodType>(value: T) => z.strictObject({ value, status, source: z.string().min(1) });
const positive = valued(z.number().gt(0));
const words = z.string().min(1);

const fabricRow = z.strictObject({
  id: words,
  name: words,
  use: words,
  material: z.enum(["polyester", "glass", "other"]),
  Ew: positive,
  Ef: positive,
  nuWf: valued(z.number().min(0)),
  G: positive,
  alpha: valued(z.number().min(0)),
  rollWidth: positive,
  selvedge: valued(z.number().min(0)),
  rollLength: positive,
  mass: positive,
  strength: valued(z.strictObject({ warp: z.number().gt(0), weft: z.number().gt(0) }).nullable()),
});
const cableRow = z.strictObject({
  id: words,
  name: words,
  diameter: z.number().gt(0),
  area: z.number().gt(0),
  modulus: z.number().gt(0),
  basis: words,
  EA: positive,
  minBreakingForce: positive,
  mass: positive,
  alpha: positive,
});
const turnbuckleRow = z.strictObject({
  id: words,
  name: words,
  thread: z.number().gt(0),
  pitch: z.number().gt(0),
  perTurn: positive,
  shortest: positive,
  longest: positive,
  capacity: valued(z.number().gt(0).nullable()),
});
const cautionRow = z.strictObject({
  id: words,
  signal: z.enum(["DANGER", "WARNING", "CAUTION", "NOTICE"]),
  papers: z.array(z.enum(["schedule", "cables", "hardware", "rolls", "panels", "seams", "findings"])).min(1),
  hazard: words,
  consequence: words,
  avoid: words,
  cloth: z.enum(["polyester", "glass", "other"]).optional(),
  status,
});
const catalogueFiles = z.strictObject({
  fabrics: z.strictObject({
    format: z.literal("seamstay-fabrics"),
    version: z.literal(1),
    default: words,
    fabrics: z.array(fabricRow).min(1),
  }),
  cables: z.strictObject({
    format: z.literal("seamstay-cables"),
    version: z.literal(1),
    cables: z.array(cableRow),
  }),
  turnbuckles: z.strictObject({
    format: z.literal("seamstay-turnbuckles"),
    version: z.literal(1),
    turnbuckles: z.array(turnbuckleRow),
  }),
  cautions: z.strictObject({
    format: z.literal("seamstay-cautions"),
    version: z.literal(1),
    cautions: z.array(cautionRow),
  }),
});

/**
 * Catalogues from the four parsed files.
 * @units as in the files: kN/m, kN, mm, kg/m2, kg/m, 1/K
 * @throws PlanError catalogue-shape: a file that is not of its format; catalogue-entry: an id used twice, a cloth whose
 * nuWf·nuFw reaches 1, a cable whose EA is not its area times its modulus within 0.1 %, a turnbuckle shorter out than in
 */
export function readCatalogues(files: {
  fabrics: unknown;
  cables: unknown;
  turnbuckles: unknown;
  cautions: unknown;
}): Catalogues {
  const read = catalogueFiles.safeParse(files);
  if (!read.success) {
    const issue = read.error.issues[0];
    const path = issue === undefined ? "" : issue.path.join(".");
    throw new PlanError("catalogue-shape", `catalogue ${path}: ${issue?.message ?? "not readable"}`, path);
  }
  const { fabrics, cables, turnbuckles, cautions } = read.data;
  const catalogues: Catalogues = {
    fabrics: collect(fabrics.fabrics.map(toFabric), (f) => f.fabric.id),
    defaultFabric: fabrics.default,
    cables: collect(cables.cables.map(toCable), (c) => c.cable.id),
    turnbuckles: collect(turnbuckles.turnbuckles.map(toTurnbuckle), (t) => t.id),
    cautions: Object.values(collect(cautions.cautions, (c) => c.id)),
  };
  if (!(catalogues.defaultFabric in catalogues.fabrics)) {
    throw wrongEntry(catalogues.defaultFabric, "the default cloth is not in the list");
  }
  return catalogues;
}

function wrongEntry(id: string, why: string): PlanError {
  return new PlanError("catalogue-entry", `catalogue entry ${id}: ${why}; correct the catalogue file`, id);
}

function collect<T>(rows: T[], idOf: (row: T) => string): Record<string, T> {
  const map: Record<string, T> = Object.create(null);
  for (const row of rows) {
    const id = idOf(row);
    if (id in map) throw wrongEntry(id, "the id stands twice");
    map[id] = row;
  }
  return map;
}

type Valued = { value: unknown; status: ValueStatus; source: string };

/** Statuses and sources of the valued fields of a row. */
function takeOrigins(row: object): { status: Record<string, ValueStatus>; source: Record<string, string> } {
  const fields = Object.entries(row).filter((entry): entry is [string, Valued] => typeof entry[1] === "object");
  return {
    status: Object.fromEntries(fields.map(([field, v]) => [field, v.status])),
    source: Object.fromEntries(fields.map(([field, v]) => [field, v.source])),
  };
}

function toFabric(row: z.infer<typeof fabricRow>): CatalogueFabric {
  const origins = takeOrigins(row);
  if ((row.nuWf.value * row.nuWf.value * row.Ef.value) / row.Ew.value >= 1) {
    throw wrongEntry(row.id, "nuWf·nuFw must stay below 1");
  }
  const fabric: Fabric = {
    id: row.id,
    Ew: row.Ew.value,
    Ef: row.Ef.value,
    nuWf: row.nuWf.value,
    G: row.G.value,
    alpha: row.alpha.value,
    rollWidth: row.rollWidth.value,
    selvedge: row.selvedge.value,
    rollLength: row.rollLength.value,
    mass: row.mass.value,
    strength: row.strength.value,
    material: row.material,
    status: origins.status,
  };
  return { name: row.name, use: row.use, fabric, source: origins.source };
}

function toCable(row: z.infer<typeof cableRow>): CatalogueCable {
  if (Math.abs(row.EA.value - row.area * row.modulus) > 1e-3 * row.EA.value) {
    throw wrongEntry(row.id, `EA ${row.EA.value} kN is not ${row.modulus} kN/mm2 on ${row.area} mm2`);
  }
  const cable: CableSpec = {
    id: row.id,
    EA: row.EA.value,
    minBreakingForce: row.minBreakingForce.value,
    diameter: row.diameter,
    mass: row.mass.value,
    alpha: row.alpha.value,
  };
  return { name: row.name, area: row.area, modulus: row.modulus, basis: row.basis, cable, ...takeOrigins(row) };
}

function toTurnbuckle(row: z.infer<typeof turnbuckleRow>): CatalogueTurnbuckle {
  if (row.longest.value <= row.shortest.value) throw wrongEntry(row.id, "longest must be longer than shortest");
  return {
    id: row.id,
    name: row.name,
    thread: row.thread,
    pitch: row.pitch,
    perTurn: row.perTurn.value,
    shortest: row.shortest.value,
    longest: row.longest.value,
    capacity: row.capacity.value,
    ...takeOrigins(row),
  };
}
