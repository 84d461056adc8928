import { expect, test } from "vitest";
import { readObj } from "../../../src/core/form/reading/readObj.ts";
import { splitTees } from "../../../src/core/form/repair/splitTees.ts";
import { runForm } from "../../../src/core/form/runForm.ts";
import { buildJob, placeMesh } from "../formJob.ts";

/** A field of coarse quads beside one whose quads are `fine` times narrower along their common side. */
function buildMismatch(fine: number, off = 0): string {
  const out: string[] = [];
  const n = 4;
  let count = 0;
  const sheet = (nx: number, ny: number, place: (i: number, j: number) => number[]) => {
    const base = count;
    for (let j = 0; j <= ny; j++) for (let i = 0; i <= nx; i++) out.push(`v ${place(i, j).join(" ")}`);
    count += (nx + 1) * (ny + 1);
    for (let j = 0; j < ny; j++)
      for (let i = 0; i < nx; i++) {
        const a = base + j * (nx + 1) + i + 1;
        out.push(`f ${a} ${a + 1} ${a + nx + 2} ${a + nx + 1}`);
      }
  };
  sheet(n, n, (i, j) => [2 * i, 2 * j, 0]);
  sheet(n, n * fine, (i, j) => [8 + 2 * i + (i === 0 && j % fine !== 0 ? off : 0), (2 * j) / fine, 0]);
  return `${out.join("\n")}\n`;
}

test.each([2, 3, 5])("a coarse field beside one %d times as fine becomes one sheet, said so", (fine) => {
  const { output: form, findings } = runForm(placeMesh(readObj(buildMismatch(fine))), buildJob(), {});
  const [note] = findings.filter((f) => f.code === "mesh-tees");
  expect([note.level, note.value]).toEqual(["note", 4 * (fine - 1)]);
  expect(findings.map((f) => f.code)).not.toContain("mesh-pieces");
  expect(form.loops.length).toBe(1);
  expect(form.area).toBeCloseTo(128, 9);
  expect(form.surface.tri.length / 3).toBe(32 + 32 * fine + 4 * (fine - 1));
});

test("vertices half a millimetre off the side are on it, and the text says how far", () => {
  const { output: form, findings } = runForm(placeMesh(readObj(buildMismatch(2, 0.0005))), buildJob(), {});
  expect(findings.find((f) => f.code === "mesh-tees")?.text).toMatch(/up to 0\.50 mm off it/);
  expect(form.loops.length).toBe(1);
});

test("a real gap stays one", () => {
  const { findings } = runForm(placeMesh(readObj(buildMismatch(2, 0.02))), buildJob(), {});
  expect(findings.map((f) => f.code)).not.toContain("mesh-tees");
});

test("sound triangles come back as they are; a vertex that only touches a side does not split it", () => {
  const x = Float64Array.from([0, 0, 0, 4, 0, 0, 2, 3, 0, 2, 0, 0, 1, -2, 0, 3, -2, 0]);
  const tri = Uint32Array.of(0, 1, 2, 3, 4, 5);
  expect(splitTees(x, tri, 1e-6)).toMatchObject({ tri, at: [] });
  const sound = Uint32Array.of(0, 1, 2);
  expect(splitTees(x, sound, 1e-6).tri).toBe(sound);
});

test("all three sides of a triangle met in their middle", () => {
  const x = Float64Array.from([0, 0, 0, 4, 0, 0, 0, 4, 0, 2, 0, 0, 2, 2, 0, 0, 2, 0, 2, -2, 0, 4, 4, 0, -2, 2, 0]);
  const tri = Uint32Array.of(0, 1, 2, 0, 6, 3, 3, 6, 1, 1, 7, 4, 4, 7, 2, 2, 8, 5, 5, 8, 0);
  const { tri: out, at } = splitTees(x, tri, 1e-6);
  expect([...at].sort()).toEqual([3, 4, 5]);
  expect(out.length / 3).toBe(10);
  const area = (t: number) => {
    const [a, b, c] = [2, 1, 0].map((k) => 3 * out[3 * t + k]);
    return ((x[b] - x[a]) * (x[c + 1] - x[a + 1]) - (x[b + 1] - x[a + 1]) * (x[c] - x[a])) / 2;
  };
  const sum = Array.from({ length: 4 }, (_, i) => [0, 7, 8, 9][i]).reduce((s, t) => s - area(t), 0);
  expect(sum).toBeCloseTo(8, 12);
});
