import { readFileSync, writeFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { readObj } from "../../src/core/form/reading/readObj.ts";
import { runForm } from "../../src/core/form/runForm.ts";
import { readJob } from "../../src/core/job/readJob.ts";
import { catalogues, readTemplate } from "../job/catalogueFiles.ts";
import { type MadeForm, writeObj } from "./madeForm.ts";
import { makeSaddle } from "./makeForms.ts";
import { STARTER_FORMS } from "./starterForms.ts";

/** Forces of a uniform stress 1 by cotangents, and of the cables by their links: a second way, apart from the generator's energy. */
function measureResidual(form: MadeForm): { max: number; normalMax: number } {
  const { xyz, tri } = form;
  const force = new Float64Array(xyz.length);
  const size = new Float64Array(xyz.length / 3);
  const normal = new Float64Array(xyz.length);
  const at = (v: number) => [xyz[3 * v], xyz[3 * v + 1], xyz[3 * v + 2]];
  const minus = (a: number[], b: number[]) => a.map((c, k) => c - b[k]);
  const dot = (a: number[], b: number[]) => a.reduce((s, c, k) => s + c * b[k], 0);
  const cross = (a: number[], b: number[]) =>
    [0, 1, 2].map((k) => a[(k + 1) % 3] * b[(k + 2) % 3] - a[(k + 2) % 3] * b[(k + 1) % 3]);
  for (let t = 0; t < tri.length; t += 3) {
    const own = [
      [0, 0, 0],
      [0, 0, 0],
      [0, 0, 0],
    ];
    for (let k = 0; k < 3; k++) {
      const [a, b, c] = [0, 1, 2].map((m) => tri[t + ((k + m) % 3)]);
      // The side b-c opposite a pulls with cot(angle at a)/2 per unit of its length.
      const [u, w] = [minus(at(b), at(a)), minus(at(c), at(a))];
      const n = cross(u, w);
      const q = dot(u, w) / Math.hypot(...n) / 2;
      const pull = minus(at(c), at(b)).map((x) => q * x);
      for (let m = 0; m < 3; m++) {
        own[(k + 1) % 3][m] += pull[m];
        own[(k + 2) % 3][m] -= pull[m];
        normal[3 * a + m] += n[m];
      }
    }
    for (let k = 0; k < 3; k++) {
      size[tri[t + k]] += Math.hypot(...own[k]);
      for (let m = 0; m < 3; m++) force[3 * tri[t + k] + m] += own[k][m];
    }
  }
  const tangent = new Map<number, number[]>();
  for (const { name, vertices } of form.lines.filter((l) => l.name in form.pull)) {
    const unit = (a: number, b: number) => {
      const d = minus(at(b), at(a));
      return d.map((x) => x / Math.hypot(...d));
    };
    vertices.slice(1, -1).forEach((v, i) => {
      const [back, on] = [unit(v, vertices[i]), unit(v, vertices[i + 2])];
      for (let m = 0; m < 3; m++) force[3 * v + m] += form.pull[name] * (back[m] + on[m]);
      tangent.set(v, unitOf(minus(on, back)));
    });
  }
  // Along a cable the force does not count: the cable slides in its pocket until it is even.
  for (const [v, t] of tangent) {
    const part = dot([...force.subarray(3 * v, 3 * v + 3)], t);
    for (let m = 0; m < 3; m++) force[3 * v + m] -= part * t[m];
  }
  const held = new Set(form.fixed);
  const free = [...size.keys()].filter((v) => !held.has(v));
  const scale = free.reduce((s, v) => s + size[v], 0) / free.length;
  const along = (v: number) => {
    const n = [...normal.subarray(3 * v, 3 * v + 3)];
    return Math.abs(dot([...force.subarray(3 * v, 3 * v + 3)], n)) / Math.hypot(...n);
  };
  return {
    max: Math.max(...free.map((v) => Math.hypot(...force.subarray(3 * v, 3 * v + 3)))) / scale,
    normalMax: Math.max(...free.map(along)) / scale,
  };
}

function unitOf(d: number[]): number[] {
  return d.map((x) => x / Math.hypot(...d));
}

describe("the generator", () => {
  it("leaves a plane a plane", () => {
    const flat = makeSaddle([4, 3], [1, 2, 2, 1], [8, 6]);
    for (let v = 0; v < flat.xyz.length; v += 3) expect(flat.xyz[v + 2]).toBeCloseTo(1 + flat.xyz[v] / 4, 12);
  });

  it("finds Schwarz's patch in a cube of 1 m: area towards 1.279262", () => {
    // H. A. Schwarz: the D surface patch on four edges of a cube's skew quadrilateral; area 1.27926 a2 (a closed form in
    // complete elliptic integrals). Here the quadrilateral has corners (0,0,0) (1,0,1)… of a unit cube seen as a rectangle
    // of 1 x 1 m with heights 0, 1, 0, 1, whose four edges are face diagonals; side √2, so the area is that of the regular
    // skew quadrilateral of a tetrahedron.
    const at = (n: number) => {
      const form = makeSaddle([1, 1], [0, 1, 0, 1], [n, n]);
      return area(form);
    };
    const [coarse, fine] = [at(16), at(32)];
    const limit = fine + (fine - coarse) / 3;
    // Richardson: the error of linear triangles falls with the square of their size.
    expect(limit).toBeCloseTo(1.279262, 4);
    expect(Math.abs(coarse - limit)).toBeGreaterThan(3.5 * Math.abs(fine - limit));
  });
});

function area(form: MadeForm): number {
  let sum = 0;
  for (let t = 0; t < form.tri.length; t += 3) {
    const [a, b, c] = [0, 1, 2].map((k) => form.xyz.subarray(3 * form.tri[t + k], 3 * form.tri[t + k] + 3));
    const [u, v] = [b.map((x, k) => x - a[k]), c.map((x, k) => x - a[k])];
    sum += Math.hypot(u[1] * v[2] - u[2] * v[1], u[2] * v[0] - u[0] * v[2], u[0] * v[1] - u[1] * v[0]) / 2;
  }
  return sum;
}

describe.each(STARTER_FORMS)("starter $name", ({ name, head, make }) => {
  const file = new URL(`../../templates/${name}/form.obj`, import.meta.url);
  const made = make();
  // MAKE_FORMS=1 npx vitest run test/templates writes the meshes anew.
  if (process.env.MAKE_FORMS === "1") writeFileSync(file, writeObj(made, head));

  it("stands in the file as the generator makes it, within a micron", () => {
    const read = readObj(readFileSync(file, "utf8"));
    expect([...read.faceVertex]).toEqual([...made.tri]);
    const off = read.xyz.reduce((most, x, i) => Math.max(most, Math.abs(x - made.xyz[i])), 0);
    expect(off).toBeLessThan(1e-6);
    expect(read.lines).toEqual(made.lines);
    expect(read.points.flatMap((p) => p.vertices).sort((a, b) => a - b)).toEqual(made.fixed);
  });

  it("is in balance as written: along the normal to 1e-8 (1e-6 beside cables), within the surface to 1e-3", () => {
    const { xyz } = readObj(readFileSync(file, "utf8"));
    const residual = measureResidual({ ...made, xyz });
    expect(residual.normalMax).toBeLessThan(Object.keys(made.pull).length > 0 ? 1e-6 : 1e-8);
    expect(residual.max).toBeLessThan(1e-3);
  });

  it("is a membrane of three to six thousand triangles without needles", () => {
    const { tri, xyz } = made;
    expect(tri.length / 3).toBeGreaterThan(3000);
    expect(tri.length / 3).toBeLessThan(6000);
    const side = (a: number, b: number) =>
      Math.hypot(xyz[3 * a] - xyz[3 * b], xyz[3 * a + 1] - xyz[3 * b + 1], xyz[3 * a + 2] - xyz[3 * b + 2]);
    let slimmest = 1;
    for (let t = 0; t < tri.length; t += 3) {
      const sides = [0, 1, 2].map((k) => side(tri[t + k], tri[t + ((k + 1) % 3)]));
      slimmest = Math.max(slimmest, Math.max(...sides) / Math.min(...sides));
    }
    expect(slimmest).toBeLessThan(5);
  });

  it("has its cable forces found by the form station from the file alone, within a newton", () => {
    const { job } = readJob(readTemplate(`${name}/job.json`), catalogues);
    const source = {
      ...readObj(readFileSync(file, "utf8")),
      unit: "m" as const,
      up: "z" as const,
      outside: "up" as const,
    };
    expect(Object.values(job.edges).filter((e) => typeof e.force === "number")).toEqual([]);
    const { output } = runForm(source, job, {});
    const found = Object.fromEntries(output.edges.filter((e) => e.force !== null).map((e) => [e.id, e.force ?? 0]));
    expect(Object.keys(found).sort()).toEqual(Object.keys(made.pull).sort());
    for (const [id, pull] of Object.entries(made.pull)) {
      expect(Math.abs(found[id] - pull * job.prestress.warp), `${id}: ${found[id]} kN`).toBeLessThan(0.001);
    }
  });

  it("has a job that reads and names only what takes effect", () => {
    const { findings, mesh } = readJob(readTemplate(`${name}/job.json`), catalogues);
    expect(mesh).toEqual({ file: "form.obj" });
    expect(findings.filter((f) => f.level !== "note" || f.code === "job-key-without-effect")).toEqual([]);
  });
});
