// Brings a made form near to balance before Newton's method ends the way: rounds of linear solves in which every side of a
// triangle pulls by half the cotangents opposite it and every cable link by its force over its length, both frozen for the round.
// Whole points move, not only along normals, so that a cable may draw its neighbours with it. Shares no code with the form station.
// Source: U. Pinkall and K. Polthier, Computing Discrete Minimal Surfaces and Their Conjugates, 1993 (algorithm of section 3).
// Conjugate gradients: Nocedal and Wright, Numerical Optimization, 2nd ed. 2006, algorithm 5.2.
import type { MadeForm } from "./madeForm.ts";

/** A frozen pull between two vertices: force over length. */
type Pull = [a: number, b: number, q: number];

function freezePulls({ xyz, tri, lines, pull }: MadeForm): Pull[] {
  const between = (a: number, b: number) => [0, 1, 2].map((k) => xyz[3 * b + k] - xyz[3 * a + k]);
  const dot = (u: number[], v: number[]) => u[0] * v[0] + u[1] * v[1] + u[2] * v[2];
  const out: Pull[] = [];
  for (let t = 0; t < tri.length; t += 3) {
    for (let k = 0; k < 3; k++) {
      const [a, b, c] = [0, 1, 2].map((m) => tri[t + ((k + m) % 3)]);
      const [u, v] = [between(a, b), between(a, c)];
      const flat = dot(u, v);
      out.push([b, c, flat / Math.sqrt(dot(u, u) * dot(v, v) - flat * flat) / 2]);
    }
  }
  for (const { name, vertices } of lines) {
    for (let i = 1; (pull[name] ?? 0) > 0 && i < vertices.length; i++) {
      const link = between(vertices[i - 1], vertices[i]);
      out.push([vertices[i - 1], vertices[i], pull[name] / Math.sqrt(dot(link, link))]);
    }
  }
  return out;
}

/** Force on free vertices by frozen pulls, all three coordinates at once. */
function sumPulls(pulls: Pull[], x: Float64Array, free: Uint8Array, out: Float64Array): Float64Array {
  out.fill(0);
  for (const [a, b, q] of pulls) {
    for (let k = 0; k < 3; k++) {
      const f = q * (x[3 * b + k] - x[3 * a + k]);
      out[3 * a + k] += f;
      out[3 * b + k] -= f;
    }
  }
  for (let v = 0; v < free.length; v++) if (free[v] === 0) out.fill(0, 3 * v, 3 * v + 3);
  return out;
}

/** Moves the free vertices through so many rounds. */
export function approachInPlace(form: MadeForm, rounds: number): void {
  const { xyz } = form;
  const free = new Uint8Array(xyz.length / 3).fill(1);
  for (const v of form.fixed) free[v] = 0;
  const [r, p, ap] = [0, 1, 2].map(() => new Float64Array(xyz.length));
  const square = (a: Float64Array) => a.reduce((s, c) => s + c * c, 0);
  for (let round = 0; round < rounds; round++) {
    const pulls = freezePulls(form);
    sumPulls(pulls, xyz, free, r);
    p.set(r);
    let rr = square(r);
    const goal = 1e-8 * rr;
    while (rr > goal) {
      sumPulls(pulls, p, free, ap);
      const alpha = -rr / ap.reduce((s, c, i) => s + c * p[i], 0);
      for (let i = 0; i < xyz.length; i++) {
        xyz[i] += alpha * p[i];
        r[i] += alpha * ap[i];
      }
      const next = square(r);
      for (let i = 0; i < xyz.length; i++) p[i] = r[i] + (next / rr) * p[i];
      rr = next;
    }
  }
}
