// Moves a mesh into balance under given prestress and cable forces by natural force densities, pass by pass. First all of
// each vertex moves, as the method has it; near balance only what shapes the form: cloth along its normals, cables across.
// Source: natural force density method, Comput. Methods Appl. Mech. Eng. 197 (2008); that an equal stress never gains area in a
// pass: U. Pinkall, K. Polthier, Computing discrete minimal surfaces, Experiment. Math. 2 (1993). differs: the forces within
// the surface are held by an equal load once the form is near, so that its vertices stop creeping; own.
import { PlanError, type StationContext } from "../problem.ts";
import { measureAreas } from "../surface/measures.ts";
import type { Surface } from "../surface/surface.ts";
import type { StressField } from "./membraneForces.ts";
import {
  buildForceDensitySystem,
  type ForceDensities,
  type ForceDensitySystem,
  measureDensities,
  measureIsotropicDensities,
  stepForceDensity,
} from "./naturalForceDensity.ts";
import { measureMeanSide } from "./nearestVertex.ts";
import { measureSettleBalance, type SettleCable } from "./settleBalance.ts";

/** What settles. */
export interface SettleInput {
  surface: Surface;
  /** 1 where a vertex is held. @shape nV */
  fixed: Uint8Array<ArrayBuffer>;
  /** Cables of the rim and inside, each with its force. */
  cables: readonly SettleCable[];
  field: StressField;
}

/** Limits of the iteration. */
export interface SettleOptions {
  maxPasses: number;
  /** Out-of-balance force that is settled, as a share of mean side over diagonal: so it bounds the curvature, not the mesh. */
  tolerance: number;
}

/** A defect of 1e-5 in curvature times diagonal moves a roof by about 5e-6 of its diagonal: 0.1 mm on 20 m. */
export const settleDefaults: SettleOptions = { maxPasses: 200, tolerance: 1e-5 };

/** Why no balance was found. */
export type SettleEnd = "settled" | "slow" | "collapsed" | "stalled" | "unheld";

/** Where the iteration ended. */
export interface Settled {
  /** Last state, of use where `end` is settled or slow. */
  surface: Surface;
  end: SettleEnd;
  passes: number;
  /** Out-of-balance force that counts, at start and end, over the mean force of the cloth at a vertex (facts.md). */
  start: number;
  residual: number;
  /** The whole force, that within the surface too. */
  whole: number;
  limit: number;
  /** Vertex that is furthest from balance or where the surface gave way. */
  worst: number;
}

/** Out-of-balance force above which all of a vertex moves. */
const NEAR = 1e-3;

/** Start that is folded rather than rough: its sides are first spread by equal force densities. */
const FOLDED = 1;

/** A triangle has collapsed when its height over its longest side falls below both: this, and this share of its start. */
const COLLAPSED = { height: 2e-3, share: 0.05 };

/** Passes without a smaller residual after which the steps do not shrink. */
const PATIENCE = 80;

/** A step under unequal stress far from balance is shortened when it leaves the form this much further out. */
const STRAYED = 2;

/** Halvings of a step that gains energy. */
const HALVINGS = 8;

/** Steps near balance become DAMPING times shorter, down to LEAST_SHARE, where this share of the force comes back turned round. */
const OVERSHOT = 0.5;
const DAMPING = 0.7;
const LEAST_SHARE = 0.3;

/** A form that is this near when the passes end is slow, not lost. */
const SLOW = 1e-3;

interface Iteration extends SettleInput {
  system: ForceDensitySystem;
  forces: Float64Array<ArrayBuffer>;
  /** The same stress every way. */
  even: boolean;
  /** Share of a step that is taken near balance. */
  share: number;
  /** What counted at the state before. */
  before: Float64Array<ArrayBuffer> | null;
}

function buildIteration(input: SettleInput): Iteration {
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
function measureState(it: Iteration, surface: Surface, even: boolean): ForceDensities {
  const { warp, weft } = it.field;
  const length = measureLinks(surface.xyz, it.system.lines);
  return {
    side: even ? measureIsotropicDensities(surface, (warp + weft) / 2) : measureField(surface, it.field),
    line: it.forces.map((f, l) => f / length[l]),
  };
}

/** Equal densities in cloth and along each cable: spreads the sides of a folded start as evenly as its rim allows. */
function spreadFolds(it: Iteration, surface: Surface): Surface {
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

/** Height over longest side of each triangle. */
function measureShapes(surface: Surface): Float64Array<ArrayBuffer> {
  const { xyz: x, tri } = surface;
  return measureAreas(surface).map((area, t) => {
    let longest = 0;
    for (let k = 0; k < 3; k++) {
      const [a, b] = [3 * tri[3 * t + k], 3 * tri[3 * t + ((k + 1) % 3)]];
      longest = Math.max(longest, (x[a] - x[b]) ** 2 + (x[a + 1] - x[b + 1]) ** 2 + (x[a + 2] - x[b + 2]) ** 2);
    }
    return longest > 0 ? (2 * area) / longest : 0;
  });
}

/** A corner of the worst collapsed triangle, -1 where there is none. */
function findCollapse(surface: Surface, start: Float64Array<ArrayBuffer>): number {
  let worst = 1;
  let at = -1;
  measureShapes(surface).forEach((shape, t) => {
    const share = shape / Math.max(start[t], 1e-12);
    if (shape >= COLLAPSED.height || share >= COLLAPSED.share || share >= worst) return;
    worst = share;
    at = surface.tri[3 * t];
  });
  return at;
}

/** Energy of an equal stress and constant cable forces, kNm: what a pass must not raise. */
function measureEnergy(it: Iteration, surface: Surface): number {
  const { warp, weft } = it.field;
  let sum = 0;
  for (const a of measureAreas(surface)) sum += ((warp + weft) / 2) * a;
  measureLinks(surface.xyz, it.system.lines).forEach((length, l) => {
    sum += it.forces[l] * length;
  });
  return sum;
}

/** Shortens the steps where the last one overshot: what counts came out turned round and hardly smaller. */
function dampInPlace(it: Iteration, kept: Float64Array<ArrayBuffer>): void {
  const before = it.before;
  it.before = kept;
  if (before === null) return;
  let turned = 0;
  let square = 0;
  for (let i = 0; i < kept.length; i++) {
    turned -= kept[i] * before[i];
    square += before[i] * before[i];
  }
  if (turned > OVERSHOT * square) it.share = Math.max(LEAST_SHARE, DAMPING * it.share);
}

/**
 * Next state while far from balance: all of every vertex moves. Where the stress is unequal it shapes the form, and the equal
 * one spreads the vertices within it: unequal stress would drive them along without end.
 */
function takeFarStep(it: Iteration, now: Surface): Surface {
  const even = measureState(it, now, true);
  if (it.even) {
    const to = stepForceDensity(it.system, now, even);
    return shortenStep(now, { xyz: to, tri: now.tri }, 1, gains(it, now));
  }
  const { fixed, cables, system } = it;
  const unequal = measureState(it, now, false);
  const { force: spread } = measureSettleBalance(now, fixed, cables, system.lines, even);
  const { force, keepInPlace } = measureSettleBalance(now, fixed, cables, system.lines, unequal);
  const load = spread.map((f, i) => f - force[i]);
  const across = load.slice();
  const kept = force.slice();
  keepInPlace(across);
  keepInPlace(kept);
  for (let i = 0; i < load.length; i++) load[i] -= across[i];
  const to = stepForceDensity(system, now, unequal, load);
  return shortenStep(now, { xyz: to, tri: now.tri }, 1, strays(it, kept, STRAYED));
}

/** Next state near balance: forces within the surface and along cables are held by the opposite load. */
function takeNearStep(it: Iteration, now: Surface): Surface {
  const densities = measureState(it, now, it.even);
  const balance = measureSettleBalance(now, it.fixed, it.cables, it.system.lines, densities);
  const kept = balance.force.slice();
  balance.keepInPlace(kept);
  dampInPlace(it, kept);
  const load = balance.force.map((f, i) => kept[i] - f);
  const move = stepForceDensity(it.system, now, densities, load).map((value, i) => value - now.xyz[i]);
  balance.keepInPlace(move);
  const to = { xyz: now.xyz.map((value, i) => value + move[i]), tri: now.tri };
  return shortenStep(now, to, it.share, it.even ? gains(it, now) : strays(it, kept, 1));
}

/** Whether a state is `times` further out of balance than the one before. */
function strays(it: Iteration, before: Float64Array<ArrayBuffer>, times: number): (next: Surface) => boolean {
  const size = (f: Float64Array<ArrayBuffer>) => f.reduce((s, c) => s + c * c, 0);
  const bound = times * times * size(before);
  return (next) => {
    const balance = measureSettleBalance(next, it.fixed, it.cables, it.system.lines, measureState(it, next, it.even));
    const kept = balance.force.slice();
    balance.keepInPlace(kept);
    return size(kept) > bound;
  };
}

/** Whether a state has more energy than the one before, beyond rounding. */
function gains(it: Iteration, now: Surface): (next: Surface) => boolean {
  const bound = measureEnergy(it, now) * (1 + 1e-12);
  return (next) => measureEnergy(it, next) > bound;
}

/** Part of the way from one state to another, halved while it is refused. */
function shortenStep(now: Surface, to: Surface, first: number, refuses: (next: Surface) => boolean): Surface {
  let next = to;
  for (let halving = 0, share = first; halving <= HALVINGS; halving++, share /= 2) {
    if (share < 1) next = { xyz: now.xyz.map((value, i) => value + share * (to.xyz[i] - value)), tri: now.tri };
    if (!refuses(next)) break;
  }
  return next;
}

/**
 * The form in balance under the given stress and cable forces, or how far it came and why no further. Equal stress settles
 * into a minimal surface; unequal stress is laid along the projected warp direction in every pass, which leaves a force within
 * the surface that no form removes: it is in `whole`.
 * @shape vertices and triangles keep their order @units m, kN
 * @throws PlanError cancelled
 */
export function settleForm(input: SettleInput, options: SettleOptions, context: StationContext): Settled {
  const it = buildIteration(input);
  const { surface: first, fixed } = input;
  const limit = (options.tolerance * measureMeanSide(first)) / measureDiagonal(first);
  const measure = (s: Surface) =>
    measureSettleBalance(s, fixed, it.cables, it.system.lines, measureState(it, s, it.even));
  let state = first;
  let balance = measure(state);
  const start = balance.across;
  let near = start < NEAR;
  let shapes = measureShapes(state);
  let best = start;
  let since = 0;
  let passes = 0;
  const finish = (end: SettleEnd, worst = balance.worst): Settled => {
    return { surface: state, end, passes, start, residual: balance.across, whole: balance.whole, limit, worst };
  };
  try {
    while (balance.across > limit) {
      if (context.cancelled?.()) throw new PlanError("cancelled", "settling was stopped", "form");
      if (passes === options.maxPasses) return finish(balance.across < SLOW ? "slow" : "stalled");
      if (passes === 0 && start > FOLDED) {
        state = spreadFolds(it, state);
        shapes = measureShapes(state);
      } else state = near ? takeNearStep(it, state) : takeFarStep(it, state);
      passes++;
      const collapse = findCollapse(state, shapes);
      balance = measure(state);
      if (collapse >= 0) return finish("collapsed", collapse);
      since = balance.across < best ? 0 : since + 1;
      best = Math.min(best, balance.across);
      if (since === PATIENCE) return finish(balance.across < SLOW ? "slow" : "stalled");
      near ||= balance.across < NEAR;
      context.onProgress?.(Math.min(1, passes / options.maxPasses), `settling, pass ${passes}`);
    }
  } catch (error) {
    if (!(error instanceof PlanError) || error.code === "cancelled") throw error;
    if (error.code === "triangle-flat") return finish("collapsed", state.tri[3 * Number(error.facts.triangle)]);
    if (error.code !== "form-unstable") throw error;
    return finish(passes < 2 ? "unheld" : "collapsed", Number(error.facts.vertex));
  }
  return finish("settled");
}

function measureDiagonal({ xyz }: Surface): number {
  const low = [Infinity, Infinity, Infinity];
  const high = [-Infinity, -Infinity, -Infinity];
  for (let i = 0; i < xyz.length; i++) {
    low[i % 3] = Math.min(low[i % 3], xyz[i]);
    high[i % 3] = Math.max(high[i % 3], xyz[i]);
  }
  return Math.sqrt((high[0] - low[0]) ** 2 + (high[1] - low[1]) ** 2 + (high[2] - low[2]) ** 2);
}
