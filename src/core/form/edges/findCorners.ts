// Corners of a boundary loop by its turning angle. A ring drawn as a polygon turns alike everywhere and has none.

/** Turning angle that is a corner whatever the neighbours do, rad. Common practice. */
const SHARP = (75 * Math.PI) / 180;

/** Turning angle that is a corner if it stands out … */
const LEAST = (25 * Math.PI) / 180;

/** … by this factor from the vertices around it. */
const STANDS_OUT = 3;

/** Vertices either side that a turn is compared with. */
const AROUND = 3;

/** Sides shorter than this share of the loop are walked past before the direction is taken (rounding noise). */
const SHORT = 0.001;

/** Turning angles of a closed loop and the reach they were taken over. */
export interface LoopTurns {
  /** At each vertex, rad. @shape n */
  turn: Float64Array<ArrayBuffer>;
  /** Vertices behind and ahead that the directions were taken to. @shape n each */
  back: Int32Array<ArrayBuffer>;
  ahead: Int32Array<ArrayBuffer>;
}

/** Turning angle at each vertex of a closed loop. */
export function measureTurns(xyz: Float64Array<ArrayBuffer>, loop: readonly number[]): LoopTurns {
  const n = loop.length;
  const between = (i: number, j: number) => {
    const a = 3 * loop[i];
    const b = 3 * loop[(j + n) % n];
    return [xyz[b] - xyz[a], xyz[b + 1] - xyz[a + 1], xyz[b + 2] - xyz[a + 2]];
  };
  const size = (d: number[]) => Math.sqrt(d[0] ** 2 + d[1] ** 2 + d[2] ** 2);
  let length = 0;
  for (let i = 0; i < n; i++) length += size(between(i, i + 1));
  const step = (i: number, by: number): { k: number; d: number[] } => {
    for (let k = 1; ; k++) {
      const d = between(i, i + by * k);
      const l = size(d);
      if (l >= SHORT * length || k >= n / 8) return { k, d: d.map((v) => v / l) };
    }
  };
  const out: LoopTurns = { turn: new Float64Array(n), back: new Int32Array(n), ahead: new Int32Array(n) };
  for (let i = 0; i < n; i++) {
    const { k: back, d: p } = step(i, -1);
    const { k: ahead, d: q } = step(i, 1);
    const cross = [p[1] * q[2] - p[2] * q[1], p[2] * q[0] - p[0] * q[2], p[0] * q[1] - p[1] * q[0]];
    out.turn[i] = Math.atan2(size(cross), -(p[0] * q[0] + p[1] * q[1] + p[2] * q[2]));
    out.back[i] = back;
    out.ahead[i] = ahead;
  }
  return out;
}

/** True where no turn within reach is greater; of equal ones the first in the loop counts. */
function isPeak({ turn, back, ahead }: LoopTurns, i: number): boolean {
  const n = turn.length;
  for (let k = 1 - back[i]; k < ahead[i]; k++) {
    const j = (i + k + n) % n;
    if (k !== 0 && (turn[j] > turn[i] || (turn[j] === turn[i] && j < i))) return false;
  }
  return true;
}

/** Positions in the loop that are corners, ascending. */
export function findCorners(xyz: Float64Array<ArrayBuffer>, loop: readonly number[]): number[] {
  const n = loop.length;
  const turns = measureTurns(xyz, loop);
  const { turn, back, ahead } = turns;
  return Array.from(loop.keys()).filter((i) => {
    if (turn[i] < LEAST || !isPeak(turns, i)) return false;
    if (turn[i] >= SHARP) return true;
    const around: number[] = [];
    for (let k = 0; k < AROUND && 2 * k + back[i] + ahead[i] < n; k++)
      around.push(turn[(i + ahead[i] + k) % n], turn[(i - back[i] - k + n) % n]);
    around.sort((a, b) => a - b);
    const median = around.length === 0 ? 0 : around[Math.floor((around.length - 1) / 2)];
    return turn[i] >= STANDS_OUT * median;
  });
}
