// One triangle with points on its sides and chords between them: parted into convex polygons, each filled with triangles whose
// least angle is as large as possible. No triangle has its three corners on one side of the parent.
// Source: own; the filling is the dynamic programme for convex polygons (Klincsek 1980) with the least angle as its measure.

/** The rim of a triangle: its corners and the points on its sides, counter-clockwise, in the triangle's plane. */
export interface TriangleRim {
  vertex: number[];
  x: number[];
  y: number[];
  /** Bit k: lies on side k. */
  sides: number[];
}

/** Two chords given by ranks on the rim cross inside the triangle. */
export function crossChords(p: readonly [number, number], q: readonly [number, number]): boolean {
  const [a, b] = p[0] < p[1] ? p : [p[1], p[0]];
  const inside = (r: number) => r > a && r < b;
  const outside = (r: number) => r < a || r > b;
  return (inside(q[0]) && outside(q[1])) || (outside(q[0]) && inside(q[1]));
}

/** Where two crossing chords meet, as a share of the first. */
export function meetChords(rim: TriangleRim, p: readonly [number, number], q: readonly [number, number]): number {
  const [x, y] = [rim.x, rim.y];
  const ux = x[q[1]] - x[q[0]];
  const uy = y[q[1]] - y[q[0]];
  const from = ux * (y[p[0]] - y[q[0]]) - uy * (x[p[0]] - x[q[0]]);
  const to = ux * (y[p[1]] - y[q[0]]) - uy * (x[p[1]] - x[q[0]]);
  return from / (from - to);
}

/** Largest cosine of a triangle's angles (the smaller, the better), 2 where its corners lie on one side of the parent. */
function worstCosine(rim: TriangleRim, i: number, j: number, k: number): number {
  if ((rim.sides[i] & rim.sides[j] & rim.sides[k]) !== 0) return 2;
  const square = (p: number, q: number) => (rim.x[p] - rim.x[q]) ** 2 + (rim.y[p] - rim.y[q]) ** 2;
  const a = square(j, k);
  const b = square(k, i);
  const c = square(i, j);
  const cosine = (opposite: number, p: number, q: number) => (p + q - opposite) / (2 * Math.sqrt(p * q));
  return Math.max(cosine(a, b, c), cosine(b, c, a), cosine(c, a, b));
}

/** Fills a convex polygon (ranks on the rim, counter-clockwise) with triangles, best least angle. */
function fillPolygon(rim: TriangleRim, polygon: readonly number[], out: [number, number, number][]): void {
  const n = polygon.length;
  const worst = new Float64Array(n * n).fill(-2);
  const apex = new Int32Array(n * n).fill(-1);
  for (let span = 2; span < n; span++)
    for (let i = 0; i + span < n; i++) {
      const j = i + span;
      let best = Number.POSITIVE_INFINITY;
      for (let k = i + 1; k < j; k++) {
        const value = Math.max(
          worst[i * n + k],
          worst[k * n + j],
          worstCosine(rim, polygon[i], polygon[k], polygon[j]),
        );
        if (value >= best) continue;
        best = value;
        apex[i * n + j] = k;
      }
      worst[i * n + j] = best;
    }
  const open: [number, number][] = [[0, n - 1]];
  for (let span = open.pop(); span; span = open.pop()) {
    const [i, j] = span;
    if (j - i < 2) continue;
    const k = apex[i * n + j];
    out.push([polygon[i], polygon[k], polygon[j]]);
    open.push([k, j], [i, k]);
  }
}

/** Triangles (ranks on the rim, counter-clockwise) of a triangle parted by chords that do not cross each other. */
export function partTriangle(
  rim: TriangleRim,
  chords: readonly (readonly [number, number])[],
): [number, number, number][] {
  let polygons: number[][] = [rim.vertex.map((_, i) => i)];
  for (const [p, q] of chords) {
    const next: number[][] = [];
    for (const polygon of polygons) {
      const i = polygon.indexOf(Math.min(p, q));
      const j = polygon.indexOf(Math.max(p, q));
      const apart = i >= 0 && j >= 0 && j - i > 1 && !(i === 0 && j === polygon.length - 1);
      if (!apart) next.push(polygon);
      else next.push(polygon.slice(i, j + 1), [...polygon.slice(0, i + 1), ...polygon.slice(j)]);
    }
    polygons = next;
  }
  const out: [number, number, number][] = [];
  for (const polygon of polygons) fillPolygon(rim, polygon, out);
  return out;
}
