// Brings a made form into balance under a uniform stress of 1 and cables of given force, by Newton's method on the energy:
// area plus cable force times cable length. Shares no code with the form station.
// Source: the area of a triangle is half the length of the cross product c of two sides; its gradient at a corner is
// n × (opposite side) / 2; second derivatives from dn = (1 − n nᵀ) dc / |c|. Conjugate gradients: Nocedal and Wright,
// Numerical Optimization, 2nd ed. 2006, algorithm 5.2.

import type { MadeForm } from "./madeForm.ts";

/** Gradient of the energy, and with a direction the change of the gradient along it (Hessian times direction). Free vertices only. */
function measureEnergy(
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
  return area + addCables(form, free, grad, along, change);
}

/** A link of length l pulls with its force along its unit vector d; turned by a move m it changes by (m − d dᵀm)/l. */
function addCables(
  form: MadeForm,
  free: Uint8Array,
  grad: Float64Array,
  along?: Float64Array,
  change?: Float64Array,
): number {
  const { xyz: x } = form;
  let energy = 0;
  for (const { name, vertices } of form.lines) {
    const pull = form.pull[name] ?? 0;
    for (let i = 1; pull > 0 && i < vertices.length; i++) {
      const [p, q] = [3 * vertices[i - 1], 3 * vertices[i]];
      const d = [0, 1, 2].map((k) => x[q + k] - x[p + k]);
      const length = Math.hypot(...d);
      energy += pull * length;
      const move = along ? [0, 1, 2].map((k) => along[q + k] - along[p + k]) : [0, 0, 0];
      const stretch = d.reduce((sum, c, k) => sum + (c / length) * move[k], 0);
      for (const [v, sign] of [
        [p, -1],
        [q, 1],
      ]) {
        if (free[v / 3] === 0) continue;
        for (let k = 0; k < 3; k++) {
          grad[v + k] += (sign * pull * d[k]) / length;
          if (change) change[v + k] += (sign * pull * (move[k] - (stretch * d[k]) / length)) / length;
        }
      }
    }
  }
  return energy;
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

/** Unit tangents at the inner vertices of cables, 0 elsewhere. */
function measureTangents(form: MadeForm): Float64Array {
  const { xyz: x } = form;
  const tangent = new Float64Array(x.length);
  for (const { name, vertices } of form.lines) {
    for (let i = 1; name in form.pull && i < vertices.length - 1; i++) {
      const [p, v, q] = [3 * vertices[i - 1], 3 * vertices[i], 3 * vertices[i + 1]];
      const back = Math.hypot(x[v] - x[p], x[v + 1] - x[p + 1], x[v + 2] - x[p + 2]);
      const on = Math.hypot(x[q] - x[v], x[q + 1] - x[v + 1], x[q + 2] - x[v + 2]);
      const mean = [0, 1, 2].map((k) => (x[v + k] - x[p + k]) / back + (x[q + k] - x[v + k]) / on);
      for (let k = 0; k < 3; k++) tangent[v + k] = mean[k] / Math.hypot(...mean);
    }
  }
  return tangent;
}

/** Keeps of each vertex's vector what counts: the part across the cable for its vertices, along the normal for the others. */
function keepAcrossInPlace(vectors: Float64Array, normal: Float64Array, tangent: Float64Array): Float64Array {
  for (let v = 0; v < vectors.length; v += 3) {
    const onCable = tangent[v] !== 0 || tangent[v + 1] !== 0 || tangent[v + 2] !== 0;
    const d = onCable ? tangent : normal;
    const part = vectors[v] * d[v] + vectors[v + 1] * d[v + 1] + vectors[v + 2] * d[v + 2];
    for (let k = 0; k < 3; k++) vectors[v + k] = onCable ? vectors[v + k] - part * d[v + k] : part * d[v + k];
  }
  return vectors;
}

/** Greatest force that counts at a free vertex, over the side of a triangle, at unit stress. */
const BALANCED = 1e-10;

/**
 * Moves free vertices along their normals, and those of cables across them, until no force is left that way. Within the surface they stay where they are:
 * a triangle mesh has no least area there worth having, its vertices would only run together.
 */
export function settleInPlace(form: MadeForm): void {
  const free = new Uint8Array(form.xyz.length / 3).fill(1);
  for (const v of form.fixed) free[v] = 0;
  const g = new Float64Array(form.xyz.length);
  const side = Math.sqrt(measureEnergy(form, free, g) / (form.tri.length / 6));
  for (let step = 0; step < 40; step++) {
    measureEnergy(form, free, g);
    const keep = buildKeep(form);
    const worst = keep(g).reduce((most, v) => Math.max(most, Math.abs(v)), 0) / side;
    if (worst < BALANCED) return;
    const d = solveStep(form, free, g, keep);
    for (let i = 0; i < d.length; i++) form.xyz[i] += d[i];
  }
  throw new Error("the form did not settle in 40 steps");
}

/** The part of vectors that counts at the present places. */
function buildKeep(form: MadeForm): (vectors: Float64Array) => Float64Array {
  const [normal, tangent] = [measureNormals(form), measureTangents(form)];
  return (vectors) => keepAcrossInPlace(vectors, normal, tangent);
}

/** Newton step within what counts, by conjugate gradients. */
function solveStep(
  form: MadeForm,
  free: Uint8Array,
  g: Float64Array,
  keep: (vectors: Float64Array) => Float64Array,
): Float64Array {
  const scratch = new Float64Array(g.length);
  const d = new Float64Array(g.length);
  const r = g.map((v) => -v);
  const p = r.slice();
  const hp = new Float64Array(g.length);
  let rr = dot(r, r);
  const goal = 1e-6 * rr;
  for (let count = 0; rr > goal; count++) {
    measureEnergy(form, free, scratch, p, hp);
    keep(hp);
    const curvature = dot(p, hp);
    if (curvature <= 0 || count > 4000)
      throw new Error("the energy is no minimum here: the form is too high or a cable too slack");
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
