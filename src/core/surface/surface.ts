// The triangle surface record that everything else is written on. Measures, adjacency and checks stand in their own files.

/**
 * A triangle surface in space.
 * @shape xyz 3*nV (x, y, z of vertex i at 3*i), tri 3*nT (vertex indices of triangle t at 3*t)
 * @units metres, z up; triangles counter-clockwise seen on the outer face
 */
export interface Surface {
  xyz: Float64Array<ArrayBuffer>;
  tri: Uint32Array<ArrayBuffer>;
}

/**
 * A place on a mesh edge: (1 - t)·x[a] + t·x[b]. A vertex is { a: v, b: v, t: 0 }.
 * t strictly between 0 and 1 otherwise; a and b share a triangle side.
 */
export interface SurfacePoint {
  a: number;
  b: number;
  t: number;
}

/** Three numbers, metres or kN. */
export type Vec3 = [number, number, number];
