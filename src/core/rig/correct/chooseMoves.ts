// The fewest and smallest turns that bring forces and corners back: every set of adjusters is tried, small sets first, with the
// best turns of that set to first order at the goal. Forces and corners may stay off by part of their windows.
import { Matrix, solve } from "ml-matrix";
import { listSteps, type NotchStep, triedByThree } from "../moves/notchSteps.ts";

/** What must come back, to first order at the goal. */
export interface Goal {
  /** Length over the goal of each adjuster now, m. */
  off: readonly number[];
  /** Forces wanted by adjuster, kN, how far the goal's lengths miss them, kN, and how far they may stay off, share. */
  forces: readonly number[];
  bias: readonly number[];
  forceShare: number;
  /** How far corners may stay off, m. */
  cornerWay: number;
  /** Up to where forces (share of the wanted one, by adjuster) and corners (m) are let be: noise would turn adjusters to and fro. */
  patience: { force: readonly number[]; corner: number };
  /** n × n kN/m and 3n × n m/m, per metre added. */
  influence: ArrayLike<number>;
  moves: ArrayLike<number>;
  /** Smallest turn of each adjuster, m. */
  notch: readonly number[];
}

/** Adjusters above which sets are no longer all tried. */
const mostTried = 8;

/** Lengths over the goal that are left after turning the adjusters of a set best. */
function settleSet(goal: Goal, set: readonly number[]): number[] {
  const { off, influence, moves, forces, forceShare, cornerWay } = goal;
  const n = off.length;
  const left = off.slice();
  if (set.length === 0) return left;
  const rows: { row: number[]; miss: number }[] = [];
  for (let i = 0; i < n; i++) {
    const row = Array.from({ length: n }, (_, j) => influence[i * n + j] / (forceShare * forces[i]));
    rows.push({ row, miss: goal.bias[i] / (forceShare * forces[i]) });
  }
  for (let r = 0; r < 3 * n; r++)
    rows.push({ row: Array.from({ length: n }, (_, j) => moves[r * n + j] / cornerWay), miss: 0 });
  const H = Matrix.zeros(set.length, set.length);
  const g = set.map(() => 0);
  for (const { row, miss } of rows) {
    let rest = miss;
    for (let j = 0; j < n; j++) if (!set.includes(j)) rest += row[j] * off[j];
    set.forEach((p, a) => {
      g[a] -= row[p] * rest;
      set.forEach((q, b) => {
        H.set(a, b, H.get(a, b) + row[p] * row[q]);
      });
    });
  }
  // where a turn changes nothing it is held small
  for (let a = 0; a < set.length; a++) H.set(a, a, H.get(a, a) + 1e-6 * (1 + H.get(a, a)));
  const e = solve(H, Matrix.columnVector(g)).to1DArray();
  set.forEach((p, a) => {
    // whole notches from where the adjuster stands
    const turns = Math.round((off[p] - e[a]) / goal.notch[p]);
    left[p] = off[p] - turns * goal.notch[p];
  });
  refineInPlace(goal, set, left);
  return left;
}

/** Single notches, pairs and (most) threes of them within the set, as long as what stays off falls. */
function refineInPlace(goal: Goal, set: readonly number[], left: number[], most = 2): void {
  let worst = measureWorst(goal, left);
  const steps = listSteps(set.length, most);
  const turn = (step: NotchStep, sign: number) => {
    for (const [k, way] of step) left[set[k]] += sign * way * goal.notch[set[k]];
  };
  for (let better = true; better; ) {
    better = false;
    for (const step of steps) {
      turn(step, 1);
      const now = measureWorst(goal, left);
      if (now < worst - 1e-9) {
        worst = now;
        better = true;
      } else turn(step, -1);
    }
  }
}

/** Greatest share of its window that a force or corner stays off. */
function measureWorst(goal: Goal, left: readonly number[]): number {
  return measureOff(
    goal,
    left,
    goal.off.map(() => goal.forceShare),
    goal.cornerWay,
  );
}

function measureOff(goal: Goal, left: readonly number[], forceShare: readonly number[], cornerWay: number): number {
  const n = left.length;
  let worst = 0;
  for (let i = 0; i < n; i++) {
    let df = goal.bias[i];
    const way = [0, 0, 0];
    for (let j = 0; j < n; j++) {
      df += goal.influence[i * n + j] * left[j];
      for (let k = 0; k < 3; k++) way[k] += goal.moves[(3 * i + k) * n + j] * left[j];
    }
    worst = Math.max(worst, Math.abs(df) / (forceShare[i] * goal.forces[i]));
    worst = Math.max(worst, Math.sqrt(way[0] ** 2 + way[1] ** 2 + way[2] ** 2) / cornerWay);
  }
  return worst;
}

/**
 * Changes of length, m (negative takes in), one for each adjuster; 0 where it is let be.
 * @shape of sets that hold every window the smallest, then the one with the least travel; none: the set that comes nearest
 */
export function chooseMoves(goal: Goal): number[] {
  const n = goal.off.length;
  let best = { left: goal.off.slice(), worst: measureWorst(goal, goal.off), size: 0, travel: 0 };
  const offer = (set: number[]) => {
    const left = settleSet(goal, set);
    const worst = measureWorst(goal, left);
    const travel = left.reduce((sum, l, i) => sum + Math.abs(goal.off[i] - l), 0);
    const size = left.filter((l, i) => l !== goal.off[i]).length;
    const better =
      best.worst > 1
        ? worst < best.worst
        : worst <= 1 && (size < best.size || (size === best.size && travel < best.travel - 1e-9));
    if (better) best = { left, worst, size, travel };
  };
  if (measureOff(goal, goal.off, goal.patience.force, goal.patience.corner) > 1) {
    if (n <= mostTried)
      for (let bits = 1; bits < 2 ** n; bits++) offer(goal.off.flatMap((_, i) => ((bits >> i) & 1 ? [i] : [])));
    else growSets(goal, n, offer);
  }
  // where whole notches leave more than is aimed at, all adjusters are tried against each other
  if (best.worst > 1 && best.size > 0 && n <= triedByThree)
    refineInPlace(
      goal,
      goal.off.map((_, i) => i),
      best.left,
      3,
    );
  return best.left.map((l, i) => l - goal.off[i]);
}

/** Sets that grow by the adjuster furthest off; for rigs with many adjusters. */
function growSets(goal: Goal, n: number, offer: (set: number[]) => void): void {
  const order = Array.from({ length: n }, (_, i) => i).sort(
    (p, q) => Math.abs(goal.off[q]) - Math.abs(goal.off[p]) || p - q,
  );
  for (let size = 1; size <= n; size++) offer(order.slice(0, size));
}
