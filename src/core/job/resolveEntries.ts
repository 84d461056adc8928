// Cloths and cables a job names: from the catalogue, from the job, or both. Values keep their status.
import { PlanError } from "../problem.ts";
import type { Fabric, ValueStatus } from "../records/fabric.ts";
import type { CableSpec } from "../records/job.ts";
import type { Catalogues } from "./catalogues.ts";
import { type DefaultLedger, noteDefault } from "./jobDefaults.ts";
import type { JobFile } from "./jobSchema.ts";

const CLOTH_LAW = ["Ew", "Ef", "nuWf", "G"] as const;
const CLOTH_REST = ["alpha", "rollWidth", "selvedge", "rollLength", "mass"] as const;

/**
 * The job's cloth. An inline cloth takes what it leaves out from the catalogue entry of its id; without one it must give
 * Ew, Ef, nuWf and G itself, and takes the rest from the default cloth.
 * @throws PlanError job-fabric-unknown; job-fabric-incomplete; job-fabric-constants: nuWf·nuFw reaches 1; job-roll-width
 */
export function resolveFabric(given: JobFile["fabric"], catalogues: Catalogues, ledger: DefaultLedger): Fabric {
  if (given === undefined || typeof given === "string") {
    const entry = catalogues.fabrics[given ?? catalogues.defaultFabric];
    if (entry === undefined) throw unknownEntry("fabric", String(given), catalogues.fabrics);
    if (given === undefined) noteDefault(ledger, "fabric", entry.fabric.id, `${entry.name} (${entry.fabric.id})`);
    noteStatus(ledger, entry.fabric);
    return entry.fabric;
  }
  const named = given.id === undefined ? undefined : catalogues.fabrics[given.id];
  const missing = CLOTH_LAW.filter((key) => given[key] === undefined);
  if (named === undefined && missing.length > 0) {
    throw new PlanError(
      "job-fabric-incomplete",
      `fabric: ${missing.join(", ")} missing; a cloth of its own gives Ew, Ef, G in kN/m and nuWf, or has the id of a catalogue cloth: ${Object.keys(catalogues.fabrics).join(", ")}`,
      missing.length === 1 ? `fabric.${missing[0]}` : missing.map((key) => `fabric.${key}`),
    );
  }
  const base = (named ?? catalogues.fabrics[catalogues.defaultFabric]).fabric;
  const { material = named?.fabric.material } = given;
  const { material: _, ...numbers } = base;
  const fabric: Fabric = {
    ...numbers,
    ...(named === undefined ? { strength: null } : {}),
    ...(material === undefined ? {} : { material }),
    id: given.id ?? "job",
    status: { ...base.status },
  };
  for (const key of [...CLOTH_LAW, ...CLOTH_REST, "strength"] as const) {
    if (given[key] !== undefined) {
      Object.assign(fabric, { [key]: given[key] });
      fabric.status[key] = "job";
    } else if (key !== "strength" || named !== undefined) {
      const status: ValueStatus = fabric.status[key] ?? "common practice";
      noteDefault(ledger, `fabric.${key}`, showValue(base[key]), `${showValue(base[key])} as of ${base.id}`, status);
    }
  }
  checkLaw(fabric);
  checkUsableWidth("fabric", fabric.rollWidth, fabric.selvedge);
  return fabric;
}

function showValue(value: Fabric["strength"] | number): string {
  if (value === null) return "none";
  return typeof value === "number" ? String(value) : `${value.warp}/${value.weft}`;
}

function checkLaw(f: Fabric): void {
  const product = (f.nuWf * f.nuWf * f.Ef) / f.Ew;
  if (product < 1) return;
  throw new PlanError(
    "job-fabric-constants",
    `fabric.nuWf: with nuWf ${f.nuWf}, Ew ${f.Ew} and Ef ${f.Ef} kN/m the product nuWf·nuFw is ${product.toFixed(3)}; a cloth that does not tear itself apart has it below 1; nuWf is the weft strain caused by unit warp strain, check that it is not the other one`,
    "fabric.nuWf",
    { product, limit: 1 },
  );
}

/**
 * Throws where the selvedges leave no cloth.
 * @throws PlanError job-roll-width
 */
export function checkUsableWidth(where: string, width: number, selvedge: number): void {
  if (width > 2 * selvedge) return;
  throw new PlanError(
    "job-roll-width",
    `${where}: selvedges of ${selvedge} mm a side leave nothing of a width of ${width} mm; correct one of them`,
    where,
    { width, selvedge },
  );
}

/** One note on what the cloth's values stand on. */
function noteStatus(ledger: DefaultLedger, fabric: Fabric): void {
  const open = Object.entries(fabric.status).filter(([, status]) => status !== "verified");
  if (open.length === 0) return;
  const listed = open.map(([field, status]) => `${field} ${status}`).join(", ");
  ledger.findings.push({
    code: "job-fabric-status",
    level: "note",
    station: "job",
    where: "fabric",
    value: fabric.id,
    limit: null,
    text: `values of the catalogue cloth ${fabric.id} that are not verified: ${listed}`,
    remedy: "give the values of the cloth that is bought, from its certificate or test, as an inline fabric",
    basis: "catalogue",
  });
}

/**
 * A cable of an edge.
 * @throws PlanError job-cable-unknown
 */
export function resolveCable(
  given: string | { [K in "EA" | "minBreakingForce" | "diameter" | "mass" | "alpha"]?: number | undefined },
  catalogues: Catalogues,
): CableSpec {
  if (typeof given === "string") {
    const entry = catalogues.cables[given];
    if (entry === undefined) throw unknownEntry("cable", given, catalogues.cables);
    return entry.cable;
  }
  return {
    id: "job",
    EA: given.EA ?? null,
    minBreakingForce: given.minBreakingForce ?? null,
    diameter: given.diameter ?? null,
    mass: given.mass ?? null,
    alpha: given.alpha ?? null,
  };
}

/** The error for an id no catalogue has. */
export function unknownEntry(
  kind: "fabric" | "cable" | "turnbuckle",
  id: string,
  known: object,
  where = kind as string,
) {
  return new PlanError(
    `job-${kind}-unknown`,
    `${where}: there is no ${kind} ${JSON.stringify(id)} in the catalogue; it has ${Object.keys(known).join(", ")}; take one of these or give the values in the job`,
    where,
  );
}
