// What is out of balance while a form settles: the force at each vertex and the part of it that may move the vertex.
// Cloth: along the normal only, since the place of a vertex within the surface says nothing about the form. Cables: across.
import { measureVertexNormals } from "../../surface/measures.ts";
import type { Surface, Vec3 } from "../../surface/surface.ts";
import { collectAlong, measureStations } from "../balance/cablePull.ts";
import type { ForceDensities } from "./naturalForceDensity.ts";

/** A cable that settles at constant force: vertices in order, a closed one repeats its first. @units kN */
export interface SettleCable {
  id: string;
  vertices: readonly number[];
  force: number;
}

/** Forces at one state of the form. */
export interface SettleBalance {
  /** Sum of cloth and cables. @shape 3*nV @units kN */
  force: Float64Array<ArrayBuffer>;
  /** Keeps of 3*nV vectors what counts, free vertices only. */
  keepInPlace: (vectors: Float64Array<ArrayBuffer>) => void;
  /** Greatest force that counts over the mean summed |force of the cloth| at a free vertex (facts.md, form.residual). */
  across: number;
  /** The same for the whole force, along cables left out. */
  whole: number;
  /** Free vertex where `across` is greatest, -1 where nothing is free. */
  worst: number;
}

/** Sums the forces of the sides, and in `size` the magnitudes of the triangles' forces at each corner. */
function sumCloth(
  { xyz: x, tri }: Surface,
  side: Float64Array<ArrayBuffer>,
  force: Float64Array<ArrayBuffer>,
  size: Float64Array<ArrayBuffer>,
): void {
  for (let h = 0; h < tri.length; h++) {
    const t = h - (h % 3);
    const i = t + ((h + 1) % 3);
    const j = t + ((h + 2) % 3);
    const v = 3 * tri[h];
    const b = 3 * tri[i];
    const c = 3 * tri[j];
    // the side towards b lies opposite c, and the other way round
    const px = side[j] * (x[b] - x[v]) + side[i] * (x[c] - x[v]);
    const py = side[j] * (x[b + 1] - x[v + 1]) + side[i] * (x[c + 1] - x[v + 1]);
    const pz = side[j] * (x[b + 2] - x[v + 2]) + side[i] * (x[c + 2] - x[v + 2]);
    force[v] += px;
    force[v + 1] += py;
    force[v + 2] += pz;
    size[tri[h]] += Math.sqrt(px * px + py * py + pz * pz);
  }
}

function addLines(
  x: Float64Array<ArrayBuffer>,
  lines: Uint32Array<ArrayBuffer>,
  line: Float64Array<ArrayBuffer>,
  force: Float64Array<ArrayBuffer>,
): void {
  for (let l = 0; l < line.length; l++) {
    const v = 3 * lines[2 * l];
    const w = 3 * lines[2 * l + 1];
    for (let k = 0; k < 3; k++) {
      const p = line[l] * (x[w + k] - x[v + k]);
      force[v + k] += p;
      force[w + k] -= p;
    }
  }
}

/** What of a vector counts at each vertex: nothing where held, across the cables where there are some, else along the normal. */
function buildKeep(
  surface: Surface,
  fixed: Uint8Array<ArrayBuffer>,
  cables: readonly SettleCable[],
): { keepInPlace: SettleBalance["keepInPlace"]; along: Map<number, Vec3[]> } {
  const normal = measureVertexNormals(surface);
  const stations = cables.map((c) => measureStations(surface.xyz, c.vertices));
  const along = collectAlong(stations);
  for (const cable of stations) for (const { vertex } of cable) if (!along.has(vertex)) along.set(vertex, []);
  const keepInPlace = (f: Float64Array<ArrayBuffer>) => {
    for (let v = 0, p = 0; v < fixed.length; v++, p += 3) {
      if (fixed[v]) {
        f[p] = f[p + 1] = f[p + 2] = 0;
        continue;
      }
      const out = along.get(v);
      if (out === undefined) {
        const d = f[p] * normal[p] + f[p + 1] * normal[p + 1] + f[p + 2] * normal[p + 2];
        for (let k = 0; k < 3; k++) f[p + k] = d * normal[p + k];
        continue;
      }
      for (const a of out) {
        const d = f[p] * a[0] + f[p + 1] * a[1] + f[p + 2] * a[2];
        for (let k = 0; k < 3; k++) f[p + k] -= d * a[k];
      }
    }
  };
  return { keepInPlace, along };
}

/**
 * Forces of cloth and cables at free vertices.
 * @shape lines 2*nL as in the force density system @units kN
 * @source facts.md, form.residual
 */
export function measureSettleBalance(
  surface: Surface,
  fixed: Uint8Array<ArrayBuffer>,
  cables: readonly SettleCable[],
  lines: Uint32Array<ArrayBuffer>,
  densities: ForceDensities,
): SettleBalance {
  const nV = fixed.length;
  const force = new Float64Array(3 * nV);
  const size = new Float64Array(nV);
  sumCloth(surface, densities.side, force, size);
  addLines(surface.xyz, lines, densities.line, force);
  const { keepInPlace, along } = buildKeep(surface, fixed, cables);
  const kept = force.slice();
  keepInPlace(kept);
  let nFree = 0;
  let scale = 0;
  let across = 0;
  let whole = 0;
  let worst = -1;
  for (let v = 0, p = 0; v < nV; v++, p += 3) {
    if (fixed[v]) continue;
    nFree++;
    scale += size[v];
    const counted = along.has(v) ? kept : force;
    whole = Math.max(whole, counted[p] ** 2 + counted[p + 1] ** 2 + counted[p + 2] ** 2);
    const square = kept[p] ** 2 + kept[p + 1] ** 2 + kept[p + 2] ** 2;
    if (square < across || (worst >= 0 && square === across)) continue;
    across = square;
    worst = v;
  }
  const mean = nFree > 0 && scale > 0 ? scale / nFree : 1;
  return { force, keepInPlace, across: Math.sqrt(across) / mean, whole: Math.sqrt(whole) / mean, worst };
}
