// Vertices that lie in one place, found by a hash grid. Says which; changes no coordinates.

function hash(i: number, j: number, k: number): number {
  return Math.imul(i, 73856093) ^ Math.imul(j, 19349663) ^ Math.imul(k, 83492791);
}

/**
 * For each vertex the one it is welded to: the nearest earlier vertex that stands for itself and lies within the tolerance,
 * else itself. So no chain drifts further than the tolerance.
 * @shape xyz 3*nV -> nV @units tolerance as xyz
 */
export function findWelds(xyz: Float64Array<ArrayBuffer>, tolerance: number): Uint32Array<ArrayBuffer> {
  const nV = xyz.length / 3;
  const target = new Uint32Array(nV);
  const cell = 4 * tolerance;
  if (!(cell > 0)) return target.map((_, v) => v);
  let size = 1;
  while (size < 2 * nV) size *= 2;
  const head = new Int32Array(size).fill(-1);
  const next = new Int32Array(nV).fill(-1);
  const low = [0, 0, 0];
  const high = [0, 0, 0];
  for (let v = 0; v < nV; v++) {
    for (let k = 0; k < 3; k++) {
      low[k] = Math.floor((xyz[3 * v + k] - tolerance) / cell);
      high[k] = Math.floor((xyz[3 * v + k] + tolerance) / cell);
    }
    let best = -1;
    let bestSquare = tolerance * tolerance;
    for (let i = low[0]; i <= high[0]; i++)
      for (let j = low[1]; j <= high[1]; j++)
        for (let k = low[2]; k <= high[2]; k++)
          for (let o = head[hash(i, j, k) & (size - 1)]; o >= 0; o = next[o]) {
            const d =
              (xyz[3 * o] - xyz[3 * v]) ** 2 +
              (xyz[3 * o + 1] - xyz[3 * v + 1]) ** 2 +
              (xyz[3 * o + 2] - xyz[3 * v + 2]) ** 2;
            if (d < bestSquare || (d === bestSquare && best >= 0 && o < best) || (d <= bestSquare && best < 0)) {
              best = o;
              bestSquare = d;
            }
          }
    target[v] = best >= 0 ? best : v;
    if (best >= 0) continue;
    const slot =
      hash(Math.floor(xyz[3 * v] / cell), Math.floor(xyz[3 * v + 1] / cell), Math.floor(xyz[3 * v + 2] / cell)) &
      (size - 1);
    next[v] = head[slot];
    head[slot] = v;
  }
  return target;
}
