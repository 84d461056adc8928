// Makes the meshes of the starter jobs: minimal surfaces in balance, found by Newton's method on the area itself.
// Shares no code with the form station, so that the starters also test it. Written out by makeForms.test.ts.
// Source: the area of a triangle is half the length of the cross product c of two sides; its gradient at a corner is
// n × (opposite side) / 2; second derivatives from dn = (1 − n nᵀ) dc / |c|. Conjugate gradients: Nocedal and Wright,
// Numerical Optimization, 2nd ed. 2006, algorithm 5.2.

/** A mesh with named border runs, ready to be written as OBJ. */
export interface MadeForm {
  xyz: Float64Array<ArrayBuffer>;
  tri: Uint32Array<ArrayBuffer>;
  lines: { name: string; vertices: number[] }[];
  /** Held vertices. */
  fixed: number[];
  /** Held vertices with names of their own. */
  corners: { name: string; vertex: number }[];
}

/** A membrane clamped along four straight edges over a rectangle, corners at their own heights (SW, SE, NE, NW). */
export function makeSaddle(
  size: [number, number],
  heights: [number, number, number, number],
  cells: [number, number],
): MadeForm {
  const [nx, ny] = cells;
  const at = (i: number, j: number) => j * (nx + 1) + i;
  const xyz = new Float64Array(3 * (nx + 1) * (ny + 1));
  for (let j = 0; j <= ny; j++) {
    for (let i = 0; i <= nx; i++) {
      const [u, v] = [i / nx, j / ny];
      const [sw, se, ne, nw] = heights;
      const z = (1 - u) * (1 - v) * sw + u * (1 - v) * se + u * v * ne + (1 - u) * v * nw;
      xyz.set([u * size[0], v * size[1], z], 3 * at(i, j));
    }
  }
  const tri: number[] = [];
  for (let j = 0; j < ny; j++) {
    for (let i = 0; i < nx; i++) {
      const [a, b, c, d] = [at(i, j), at(i + 1, j), at(i + 1, j + 1), at(i, j + 1)];
      // Diagonals alternate, so that the mesh favours no direction.
      tri.push(...((i + j) % 2 === 0 ? [a, b, c, a, c, d] : [a, b, d, b, c, d]));
    }
  }
  const along = (n: number, place: (k: number) => number) => Array.from({ length: n + 1 }, (_, k) => place(k));
  const lines = [
    { name: "south", vertices: along(nx, (k) => at(k, 0)) },
    { name: "east", vertices: along(ny, (k) => at(nx, k)) },
    { name: "north", vertices: along(nx, (k) => at(nx - k, ny)) },
    { name: "west", vertices: along(ny, (k) => at(0, ny - k)) },
  ];
  const fixed = [...new Set(lines.flatMap((l) => l.vertices))].sort((a, b) => a - b);
  const corners = [
    { name: "corner-sw", vertex: at(0, 0) },
    { name: "corner-se", vertex: at(nx, 0) },
    { name: "corner-ne", vertex: at(nx, ny) },
    { name: "corner-nw", vertex: at(0, ny) },
  ];
  const form = { xyz, tri: new Uint32Array(tri), lines, fixed, corners };
  settleInPlace(form);
  return form;
}

/** Area gradient, and with a direction the change of the gradient along it (Hessian times direction). Free vertices only. */
function measureArea(
  form: MadeForm,
  free: Uint8Array,
  grad: Float64Array,
  along?: Float64Array,
  change?: Float64Array,
): number {
  const { xyz: x, tri } = form;
  grad.fill(0);
  change?.fill(0);
  const e = new Float64Array(9);
  const de = new Float64Array(9);
  const n = new Float64Array(3);
  const dn = new Float64Array(3);
  let area = 0;
  for (let t = 0; t < tri.length; t += 3) {
    // Side k is opposite corner k.
    for (let k = 0; k < 3; k++) {
      const [p, q] = [3 * tri[t + ((k + 1) % 3)], 3 * tri[t + ((k + 2) % 3)]];
      for (let c = 0; c < 3; c++) {
        e[3 * k + c] = x[q + c] - x[p + c];
        if (along) de[3 * k + c] = along[q + c] - along[p + c];
      }
    }
    for (let c = 0; c < 3; c++) n[c] = cross(e, 0, e, 3, c);
    const size = Math.hypot(n[0], n[1], n[2]);
    area += size / 2;
    for (let c = 0; c < 3; c++) n[c] /= size;
    if (along) {
      for (let c = 0; c < 3; c++) dn[c] = (cross(de, 0, e, 3, c) + cross(e, 0, de, 3, c)) / size;
      const normal = dn[0] * n[0] + dn[1] * n[1] + dn[2] * n[2];
      for (let c = 0; c < 3; c++) dn[c] -= normal * n[c];
    }
    for (let k = 0; k < 3; k++) {
      const v = tri[t + k];
      if (free[v] === 0) continue;
      for (let c = 0; c < 3; c++) {
        grad[3 * v + c] += cross(n, 0, e, 3 * k, c) / 2;
        if (change) change[3 * v + c] += (cross(dn, 0, e, 3 * k, c) + cross(n, 0, de, 3 * k, c)) / 2;
      }
    }
  }
  return area;
}

function cross(a: Float64Array, i: number, b: Float64Array, j: number, c: number): number {
  const [p, q] = [(c + 1) % 3, (c + 2) % 3];
  return a[i + p] * b[j + q] - a[i + q] * b[j + p];
}

const dot = (a: Float64Array, b: Float64Array) => {
  let s = 0;
  for (let i = 0; i < a.length; i++) s += a[i] * b[i];
  return s;
};

/** Area-weighted unit normals. */
function measureNormals(form: MadeForm): Float64Array {
  const { xyz: x, tri } = form;
  const normal = new Float64Array(x.length);
  for (let t = 0; t < tri.length; t += 3) {
    const [a, b, c] = [3 * tri[t], 3 * tri[t + 1], 3 * tri[t + 2]];
    const e = Float64Array.of(
      ...[0, 1, 2].map((k) => x[b + k] - x[a + k]),
      ...[0, 1, 2].map((k) => x[c + k] - x[a + k]),
    );
    for (let k = 0; k < 3; k++) for (const v of [a, b, c]) normal[v + k] += cross(e, 0, e, 3, k);
  }
  for (let v = 0; v < x.length; v += 3) {
    const size = Math.hypot(normal[v], normal[v + 1], normal[v + 2]);
    for (let k = 0; k < 3; k++) normal[v + k] /= size;
  }
  return normal;
}

/** Keeps of each vertex's vector the part along its normal. */
function keepNormalInPlace(vectors: Float64Array, normal: Float64Array): Float64Array {
  for (let v = 0; v < vectors.length; v += 3) {
    const along = vectors[v] * normal[v] + vectors[v + 1] * normal[v + 1] + vectors[v + 2] * normal[v + 2];
    for (let k = 0; k < 3; k++) vectors[v + k] = along * normal[v + k];
  }
  return vectors;
}

/** Greatest normal force at a free vertex, over the side of a triangle, at unit stress. */
const BALANCED = 1e-10;

/**
 * Moves free vertices along their normals until no force is left that way. Within the surface they stay where they are:
 * a triangle mesh has no least area there worth having, its vertices would only run together.
 */
function settleInPlace(form: MadeForm): void {
  const free = new Uint8Array(form.xyz.length / 3).fill(1);
  for (const v of form.fixed) free[v] = 0;
  const g = new Float64Array(form.xyz.length);
  const side = Math.sqrt(measureArea(form, free, g) / (form.tri.length / 6));
  for (let step = 0; step < 40; step++) {
    measureArea(form, free, g);
    const normal = measureNormals(form);
    const worst = keepNormalInPlace(g, normal).reduce((most, v) => Math.max(most, Math.abs(v)), 0) / side;
    if (worst < BALANCED) return;
    const d = solveStep(form, free, g, normal);
    for (let i = 0; i < d.length; i++) form.xyz[i] += d[i];
  }
  throw new Error("the form did not settle in 40 steps");
}

/** Newton step along the normals by conjugate gradients. */
function solveStep(form: MadeForm, free: Uint8Array, g: Float64Array, normal: Float64Array): Float64Array {
  const scratch = new Float64Array(g.length);
  const d = new Float64Array(g.length);
  const r = g.map((v) => -v);
  const p = r.slice();
  const hp = new Float64Array(g.length);
  let rr = dot(r, r);
  const goal = 1e-6 * rr;
  for (let count = 0; rr > goal; count++) {
    measureArea(form, free, scratch, p, hp);
    keepNormalInPlace(hp, normal);
    const curvature = dot(p, hp);
    if (curvature <= 0 || count > 4000) throw new Error("the area is no minimum here: the form is too high");
    const alpha = rr / curvature;
    for (let i = 0; i < d.length; i++) {
      d[i] += alpha * p[i];
      r[i] -= alpha * hp[i];
    }
    const next = dot(r, r);
    for (let i = 0; i < d.length; i++) p[i] = r[i] + (next / rr) * p[i];
    rr = next;
  }
  return d;
}

/** OBJ text: metres, z up, border runs as named lines, held vertices as points. Nine decimals: a thousandth of a micron. */
export function writeObj(form: MadeForm, head: string): string {
  const out = [`# ${head}`, "# metres, z up"];
  for (let v = 0; v < form.xyz.length; v += 3) {
    out.push(`v ${Array.from(form.xyz.subarray(v, v + 3), (c) => c.toFixed(9).replace(/^-(0\.0+)$/, "$1")).join(" ")}`);
  }
  out.push("g membrane");
  for (let t = 0; t < form.tri.length; t += 3) {
    out.push(`f ${Array.from(form.tri.subarray(t, t + 3), (v) => v + 1).join(" ")}`);
  }
  for (const line of form.lines) out.push(`g ${line.name}`, `l ${line.vertices.map((v) => v + 1).join(" ")}`);
  for (const corner of form.corners) out.push(`g ${corner.name}`, `p ${corner.vertex + 1}`);
  const others = form.fixed.filter((v) => !form.corners.some((c) => c.vertex === v));
  out.push("g held", `p ${others.map((v) => v + 1).join(" ")}`);
  return `${out.join("\n")}\n`;
}
