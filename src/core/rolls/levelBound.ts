// A length below which no nest can come, from lines along the roll: at any level across it, what pieces take of that line adds up to
// no more than the length. Each piece counts with the least it takes of a weighed set of levels wherever it lies across the roll; the
// weights are sought that give most. A gore too wide to lie beside another, though its chords would fit, is told from one that is not.
// Source: own argument (for a step at half the width it gives the width conflict of lowerBound.ts; with even weights the area).
import { type PlaneRing, ringBox } from "../surface/ring.ts";
import { walkSlabs } from "./columns.ts";

/** Cells across the roll in which a piece's place is told, and cells from one level to the next. */
const CELLS = 256;
const STRIDE = 4;
const LEVELS = CELLS / STRIDE / 2;
/** Cells are taken wider by this share of the roll on both sides, so that what touches a level is not counted. */
const HAIR = 1e-6;
/** Changes of the weights, without a gain at the end, and the first one's size. */
const ROUNDS = 120;
const IDLE = 30;
const STRIDE_FIRST = 0.6;
/** Sums in all the changes: very many kinds of pieces get fewer of them. */
const WORK = 4e7;

/** What so many pieces of one kind take of the levels, the gap before the next piece counted in; pairs of levels as one. */
interface Taken {
  count: number;
  /** Places across. */
  places: number;
  /** Least length. @shape places·LEVELS */
  length: Float64Array;
}

/** Least length along x of a ring in each cell across, lowest cell first. */
function cellLengths(ring: PlaneRing, cell: number): Float64Array {
  const { y0, y1 } = ringBox(ring);
  const hair = HAIR * cell * CELLS;
  const across = new Float64Array(ring.length);
  for (let i = 0; i < ring.length; i += 2) {
    across[i] = ring[i + 1] - y0;
    across[i + 1] = ring[i];
  }
  const height = y1 - y0;
  const least = new Float64Array(CELLS + 1);
  for (let c = 0; c <= CELLS; c++) if (c * cell - hair >= 0 && (c + 1) * cell + hair <= height) least[c] = Infinity;
  walkSlabs(across, 0, [], (ya, yb, sides) => {
    let [a, b] = [0, 0];
    for (let i = 0; i + 1 < sides.count; i += 2) {
      a += sides.left[i + 1] - sides.left[i];
      b += sides.right[i + 1] - sides.right[i];
    }
    const slope = (b - a) / (yb - ya);
    const last = Math.min(CELLS, Math.floor((yb + hair) / cell));
    for (let c = Math.max(0, Math.ceil((ya - hair) / cell) - 1); c <= last; c++) {
      const from = a + slope * (Math.max(ya, c * cell - hair) - ya);
      const to = a + slope * (Math.min(yb, (c + 1) * cell + hair) - ya);
      least[c] = Math.max(0, Math.min(least[c], from, to));
    }
  });
  return least;
}

function takenBy(ring: PlaneRing, count: number, width: number, gap: number): Taken {
  const cell = width / CELLS;
  const least = cellLengths(ring, cell);
  const box = ringBox(ring);
  const places = Math.max(0, Math.floor((width - box.y1 + box.y0) / cell + HAIR)) + 1;
  const length = new Float64Array(places * LEVELS);
  for (let m = 0; m < places; m++)
    for (let j = 0; j < LEVELS; j++)
      // A half turn of the roll takes one level of a pair to the other: weighed alike, a piece's turn does not matter.
      for (const level of [(j + 1) * STRIDE, CELLS - (j + 1) * STRIDE]) {
        const c = level - m - 1;
        if (c >= 0 && least[c] > 0) length[m * LEVELS + j] += (least[c] + gap) / 2;
      }
  return { count, places, length };
}

/** The bound under given weights, and which levels each piece takes in its least place, times its number: the way up. */
function weigh(all: Taken[], weights: Float64Array, up: Float64Array): number {
  let sum = 0;
  up.fill(0);
  for (const { count, places, length } of all) {
    let least = Infinity;
    let at = 0;
    for (let m = 0; m < places; m++) {
      let own = 0;
      for (let j = 0, k = m * LEVELS; j < LEVELS; j++, k++) own += weights[j] * length[k];
      if (own < least) {
        least = own;
        at = m;
      }
    }
    sum += count * least;
    for (let j = 0; j < LEVELS; j++) up[j] += count * length[at * LEVELS + j];
  }
  return sum;
}

/** Weights to begin with: all alike, the middle alone, levels at thirds, quarters, fifths. */
function firstWeights(): Float64Array[] {
  const even = new Float64Array(LEVELS).fill(1 / LEVELS);
  const spaced = [2, 3, 4, 5].map((parts) => {
    const weights = new Float64Array(LEVELS);
    for (let i = 1; 2 * i <= parts; i++)
      weights[Math.min(LEVELS, Math.round((2 * LEVELS * i) / parts)) - 1] += 2 * i === parts ? 1 : 2;
    const all = weights.reduce((sum, w) => sum + w, 0);
    return weights.map((w) => w / all);
  });
  return [even, ...spaced];
}

/**
 * The greatest bound found.
 * @param rolls at most so many rolls: a gap stands between two pieces on one line of one roll only
 * @units mm
 */
export function boundByLevels(rings: PlaneRing[], width: number, gap: number, rolls = 1): number {
  if (rings.length === 0 || !(width > 0) || !Number.isFinite(width)) return 0;
  const kinds = new Map<string, { ring: PlaneRing; count: number }>();
  for (const ring of rings) {
    const key = ring.join(",");
    const kind = kinds.get(key);
    if (kind) kind.count++;
    else kinds.set(key, { ring, count: 1 });
  }
  // With as many rolls as pieces no gap need stand between any two.
  const between = rolls < rings.length ? gap : 0;
  const all = [...kinds.values()].map(({ ring, count }) => takenBy(ring, count, width, between));
  const up = new Float64Array(LEVELS);
  let best = 0;
  let from = firstWeights()[0];
  for (const weights of firstWeights()) {
    const bound = weigh(all, weights, up);
    if (bound <= best) continue;
    best = bound;
    from = weights;
  }
  // Weights grow where pieces take much (exponentiated gradient); the best of all is kept, each of them is a bound.
  let weights = from.map((w) => 0.9 * w + 0.1 / LEVELS);
  const rounds = Math.min(ROUNDS, WORK / all.reduce((sum, t) => sum + t.length.length, 0));
  for (let round = 0, idle = 0; round < rounds && idle < IDLE; round++, idle++) {
    const bound = weigh(all, weights, up);
    if (bound > best * (1 + 1e-6)) {
      best = bound;
      idle = 0;
    }
    const most = Math.max(...up) || 1;
    const step = STRIDE_FIRST / Math.sqrt(1 + round);
    const grown = weights.map((w, j) => w * Math.exp((step * up[j]) / most));
    const sum = grown.reduce((s, w) => s + w, 0);
    weights = grown.map((w) => w / sum);
  }
  return Math.max(0, best - between * rolls);
}
