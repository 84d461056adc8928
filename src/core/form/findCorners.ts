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

/**
 * Turning angle at each vertex of a closed loop, rad.
 * @shape loop n -> n
 */
export function measureTurns(xyz: Float64Array<ArrayBuffer>, loop: readonly number[]): Float64Array<ArrayBuffer> {
  const n = loop.length;
  const step = (i: number, by: number, least: number): number[] => {
    const a = loop[i];
    for (let k = 1; ; k++) {
      const b = loop[(i + by * k + k * n) % n];
      const d = [0, 1, 2].map((c) => xyz[3 * b + c] - xyz[3 * a + c]);
      const l = Math.sqrt(d[0] ** 2 + d[1] ** 2 + d[2] ** 2);
      if (l >= least || k >= n / 4) return d.map((v) => v / l);
    }
  };
  let length = 0;
  for (let i = 0; i < n; i++) {
    const a = 3 * loop[i];
    const b = 3 * loop[(i + 1) % n];
    length += Math.sqrt((xyz[a] - xyz[b]) ** 2 + (xyz[a + 1] - xyz[b + 1]) ** 2 + (xyz[a + 2] - xyz[b + 2]) ** 2);
  }
  return Float64Array.from(loop, (_, i) => {
    const p = step(i, -1, SHORT * length);
    const q = step(i, 1, SHORT * length);
    const cross = [p[1] * q[2] - p[2] * q[1], p[2] * q[0] - p[0] * q[2], p[0] * q[1] - p[1] * q[0]];
    const cos = -(p[0] * q[0] + p[1] * q[1] + p[2] * q[2]);
    return Math.atan2(Math.sqrt(cross[0] ** 2 + cross[1] ** 2 + cross[2] ** 2), cos);
  });
}

/** Positions in the loop that are corners, ascending. */
export function findCorners(xyz: Float64Array<ArrayBuffer>, loop: readonly number[]): number[] {
  const n = loop.length;
  const turns = measureTurns(xyz, loop);
  return Array.from(loop.keys()).filter((i) => {
    if (turns[i] >= SHARP) return true;
    if (turns[i] < LEAST) return false;
    const around: number[] = [];
    for (let k = 1; k <= AROUND && 2 * k < n; k++) around.push(turns[(i + k) % n], turns[(i - k + n) % n]);
    around.sort((a, b) => a - b);
    const median = around.length === 0 ? 0 : around[Math.floor((around.length - 1) / 2)];
    return turns[i] >= STANDS_OUT * median;
  });
}
