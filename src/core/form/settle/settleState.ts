// A form on its way to balance: its force densities under the wanted stress at any state, and its energy. Takes no step.
import { measureAreas } from "../../surface/measures.ts";
import type { Surface } from "../../surface/surface.ts";
import type { StressField } from "../balance/membraneForces.ts";
import { measureMeanSide } from "../edges/nearestVertex.ts";
import {
  buildForceDensitySystem,
  type ForceDensities,
  type ForceDensitySystem,
  measureDensities,
  measureIsotropicDensities,
  stepForceDensity,
} from "./naturalForceDensity.ts";
import type { SettleCable } from "./settleBalance.ts";

/** What settles. */
export interface SettleInput {
  surface: Surface;
  /** 1 where a vertex is held. @shape nV */
  fixed: Uint8Array<ArrayBuffer>;
  /** Cables of the rim and inside, each with its force. */
  cables: readonly SettleCable[];
  field: StressField;
}

/** What settles, with what is kept from pass to pass. */
export interface Iteration extends SettleInput {
  system: ForceDensitySystem;
  forces: Float64Array<ArrayBuffer>;
  /** The same stress every way. */
  even: boolean;
  /** Share of a step that is taken near balance. */
  share: number;
  /** What counted at the state before. */
  before: Float64Array<ArrayBuffer> | null;
}

/** Analyses the system once. */
export function buildIteration(input: SettleInput): Iteration {
  const lines: number[] = [];
  const forces: number[] = [];
  for (const { vertices, force } of input.cables)
    for (let i = 1; i < vertices.length; i++) {
      lines.push(vertices[i - 1], vertices[i]);
      forces.push(force);
    }
  const { warp, weft, direction } = input.field;
  return {
    ...input,
    system: buildForceDensitySystem(input.surface, input.fixed, Uint32Array.from(lines)),
    forces: Float64Array.from(forces),
    even: direction === null || warp === weft,
    share: 1,
    before: null,
  };
}

function measureLinks(x: Float64Array<ArrayBuffer>, lines: Uint32Array<ArrayBuffer>): Float64Array<ArrayBuffer> {
  return Float64Array.from({ length: lines.length / 2 }, (_, l) => {
    const [a, b] = [3 * lines[2 * l], 3 * lines[2 * l + 1]];
    return Math.sqrt((x[a] - x[b]) ** 2 + (x[a + 1] - x[b + 1]) ** 2 + (x[a + 2] - x[b + 2]) ** 2);
  });
}

/** Warp direction of each triangle; where the field stands square on one, the mean stress both ways. */
function measureField(surface: Surface, { warp, weft, direction }: StressField): Float64Array<ArrayBuffer> {
  const { xyz: x, tri } = surface;
  const n = tri.length / 3;
  const d = direction ?? [1, 0, 0];
  const stress = new Float64Array(3 * n);
  const along = new Float64Array(3 * n);
  for (let t = 0; t < n; t++) {
    const [a, b, c] = [3 * tri[3 * t], 3 * tri[3 * t + 1], 3 * tri[3 * t + 2]];
    const u = [x[b] - x[a], x[b + 1] - x[a + 1], x[b + 2] - x[a + 2]];
    const v = [x[c] - x[a], x[c + 1] - x[a + 1], x[c + 2] - x[a + 2]];
    const m = [u[1] * v[2] - u[2] * v[1], u[2] * v[0] - u[0] * v[2], u[0] * v[1] - u[1] * v[0]];
    const dot = d[0] * m[0] + d[1] * m[1] + d[2] * m[2];
    const square = (d[0] ** 2 + d[1] ** 2 + d[2] ** 2) * (m[0] ** 2 + m[1] ** 2 + m[2] ** 2);
    const upright = square - dot * dot < 1e-12 * square;
    stress.set(upright ? [(warp + weft) / 2, (warp + weft) / 2, 0] : [warp, weft, 0], 3 * t);
    along.set(upright ? u : d, 3 * t);
  }
  return measureDensities(surface, stress, along);
}

/** Force densities of one state; `even`: the mean stress both ways, whatever the field. */
export function measureState(it: Iteration, surface: Surface, even: boolean): ForceDensities {
  const { warp, weft } = it.field;
  const length = measureLinks(surface.xyz, it.system.lines);
  return {
    side: even ? measureIsotropicDensities(surface, (warp + weft) / 2) : measureField(surface, it.field),
    line: it.forces.map((f, l) => f / length[l]),
  };
}

/** Equal densities in cloth and along each cable: spreads the sides of a folded start as evenly as its rim allows. */
export function spreadFolds(it: Iteration, surface: Surface): Surface {
  const { tri } = surface;
  const s = (it.field.warp + it.field.weft) / 2;
  const line = new Float64Array(it.forces.length);
  let l = 0;
  for (const { vertices, force } of it.cables) {
    const [a, b] = [3 * vertices[0], 3 * vertices[vertices.length - 1]];
    const x = surface.xyz;
    const n = vertices.length - 1;
    const chord = Math.sqrt((x[a] - x[b]) ** 2 + (x[a + 1] - x[b + 1]) ** 2 + (x[a + 2] - x[b + 2]) ** 2);
    const mean = (chord > 0 ? chord : vertices.length * measureMeanSide(surface)) / n;
    for (let i = 0; i < n; i++) line[l++] = force / mean;
  }
  const side = new Float64Array(tri.length).fill(s / 2);
  return { xyz: stepForceDensity(it.system, surface, { side, line }), tri };
}

/** Energy of an equal stress and constant cable forces, kNm: what a pass must not raise. */
export function measureEnergy(it: Iteration, surface: Surface): number {
  const { warp, weft } = it.field;
  let sum = 0;
  for (const a of measureAreas(surface)) sum += ((warp + weft) / 2) * a;
  measureLinks(surface.xyz, it.system.lines).forEach((length, l) => {
    sum += it.forces[l] * length;
  });
  return sum;
}
