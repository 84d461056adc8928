// Moves a mesh into balance under given prestress and cable forces by natural force densities, pass by pass. First all of
// each vertex moves, as the method has it; near balance only what shapes the form: cloth along its normals, cables across.
// Source: natural force density method, Comput. Methods Appl. Mech. Eng. 197 (2008); that an equal stress never gains area in a
// pass: U. Pinkall, K. Polthier, Computing discrete minimal surfaces, Experiment. Math. 2 (1993). differs: the forces within
// the surface are held by an equal load once the form is near, so that its vertices stop creeping; own.
import { PlanError, type StationContext } from "../../problem.ts";
import { measureAreas } from "../../surface/measures.ts";
import type { Surface } from "../../surface/surface.ts";
import { measureMeanSide } from "../edges/nearestVertex.ts";
import { measureSettleBalance } from "./settleBalance.ts";
import { buildIteration, measureState, type SettleInput, spreadFolds } from "./settleState.ts";
import { takeFarStep, takeNearStep } from "./settleSteps.ts";

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

/** Out-of-balance force above which a form that was near has left balance again, as one does that does not exist. */
const LEFT = 2e-2;

/** Start that is folded rather than rough: its sides are first spread by equal force densities. */
const FOLDED = 1;

/** A triangle has collapsed when its height over its longest side falls below both: this, and this share of its start. */
const COLLAPSED = { height: 2e-3, share: 0.05 };

/** Passes without a smaller residual after which the steps do not shrink. */
const PATIENCE = 80;

/** A form that is this near when the passes end, and no further out than GROWN times its best, is slow, not lost. */
const SLOW = 1e-3;
const GROWN = 2;

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
  // just past the last form that exists a state comes near balance, creeps by and leaves again
  const isSlow = () => balance.across < SLOW && balance.across <= GROWN * best;
  try {
    while (balance.across > limit) {
      if (context.cancelled?.()) throw new PlanError("cancelled", "settling was stopped", "form");
      if (passes === options.maxPasses) return finish(isSlow() ? "slow" : "stalled");
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
      if (since === PATIENCE) return finish(isSlow() ? "slow" : "stalled");
      near = balance.across < (near ? LEFT : NEAR);
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
