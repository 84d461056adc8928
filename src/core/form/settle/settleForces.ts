// Forces of the cables that a form settles with: the job's, else those that balance the start form best, that is, the cables
// as curved as they were drawn; else, where the drawn rim bends too little for any cable to hold it, a usual sag.
import type { Finding } from "../../problem.ts";
import type { FormEdge } from "../../records/foundForm.ts";
import { balanceCablesInPlace } from "../balance/cableForces.ts";
import { isCable, measureStations } from "../balance/cablePull.ts";
import type { MembraneForces } from "../balance/membraneForces.ts";
import { buildFormFinding } from "../formFinding.ts";

/** Usual sag of an edge cable over its chord. Common practice. */
export const USUAL_SAG = 0.1;

/** Distance between the ends of an edge, m; 0 where it closes. */
export function measureChord(xyz: Float64Array<ArrayBuffer>, vertices: readonly number[]): number {
  const [a, b] = [3 * vertices[0], 3 * vertices[vertices.length - 1]];
  return Math.sqrt((xyz[a] - xyz[b]) ** 2 + (xyz[a + 1] - xyz[b + 1]) ** 2 + (xyz[a + 2] - xyz[b + 2]) ** 2);
}

/**
 * Force of an edge cable that sags in an arc by the usual share of its chord: T = s·R with R = L²/8f + f/2.
 * @units chord m, stress kN/m -> kN
 */
export function takeUsualForce(chord: number, stress: number): number {
  const sag = USUAL_SAG * chord;
  return stress * ((chord * chord) / (8 * sag) + sag / 2);
}

/**
 * Fills in the force of every cable that has none.
 * @units stress: mean of the prestress, kN/m
 */
export function chooseForcesInPlace(
  xyz: Float64Array<ArrayBuffer>,
  edges: readonly FormEdge[],
  membrane: MembraneForces,
  fixed: Uint8Array<ArrayBuffer>,
  stress: number,
): Finding[] {
  const stations = edges.map((e) => (isCable(e) ? measureStations(xyz, e.vertices) : null));
  const trial = edges.map((e) => ({ ...e }));
  balanceCablesInPlace(trial, stations, membrane.force, fixed);
  const usual = edges.filter((edge, e) => {
    const chord = measureChord(xyz, edge.vertices);
    if (edge.kind !== "cable" || edge.force !== null || chord === 0) return false;
    // an arc of radius T/s spans its chord only where 2·T/s is longer
    return (trial[e].force ?? 0) < (stress * chord) / 2;
  });
  for (const edge of usual) {
    edge.force = takeUsualForce(measureChord(xyz, edge.vertices), stress);
    edge.forceFrom = "sag";
  }
  const findings = balanceCablesInPlace(edges, stations, membrane.force, fixed);
  if (usual.length === 0) return findings;
  return [
    ...findings,
    buildFormFinding("caution", {
      code: "settle-force-default",
      where: usual.map((e) => e.id),
      value: USUAL_SAG,
      text: `neither the job nor the shape drawn says the force of ${usual.map((e) => `${e.id} (${(e.force ?? 0).toFixed(1)} kN taken)`).join(", ")}: the form is settled with the force at which the cable sags by ${100 * USUAL_SAG} % of its chord`,
      remedy: "give edges.NAME.force in the job, or draw the cable as curved as it is to be",
      basis: "common practice",
    }),
  ];
}
