// Judges a strip layout by code of its own, after facts.md and the outside checker's rules: ends, sides, seams, cover.
import { expect } from "vitest";
import type { FoundForm } from "../../src/core/records/foundForm.ts";
import type { StripLayout } from "../../src/core/records/stripLayout.ts";

function place(layout: StripLayout, v: number): number[] {
  return [0, 1, 2].map((k) => layout.surface.xyz[3 * v + k]);
}

function measureTriangles(xyz: Float64Array, tri: Uint32Array | number[]): number {
  let sum = 0;
  for (let t = 0; t < tri.length; t += 3) {
    const p = [0, 1, 2].map((k) => [0, 1, 2].map((c) => xyz[3 * tri[t + k] + c]));
    const u = p[1].map((x, c) => x - p[0][c]);
    const v = p[2].map((x, c) => x - p[0][c]);
    sum += Math.hypot(u[1] * v[2] - u[2] * v[1], u[2] * v[0] - u[0] * v[2], u[0] * v[1] - u[1] * v[0]) / 2;
  }
  return sum;
}

/** Angle in degrees between the first links of the two sides that meet at a vertex. */
function pointAngle(layout: StripLayout, arms: number[][], v: number): number {
  const [a, b] = arms.map((list) => {
    const w = list[0] === v ? list[1] : list[list.length - 2];
    return place(layout, w).map((x, k) => x - place(layout, v)[k]);
  });
  const dot = a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
  return (Math.acos(dot / (Math.hypot(...a) * Math.hypot(...b))) * 180) / Math.PI;
}

/** Expects everything facts.md asks of panels and seams before they are flat. */
export function expectSoundLayout(form: FoundForm, layout: StripLayout): void {
  const { surface } = layout;
  expectSoundStrips(form, layout);
  const before = measureTriangles(form.surface.xyz, form.surface.tri);
  expect(Math.abs(measureTriangles(surface.xyz, surface.tri) / before - 1), "area kept").toBeLessThan(1e-9);
  expect(surface.xyz.slice(0, form.surface.xyz.length), "the form's own vertices come first").toEqual(form.surface.xyz);
  expectSoundSeams(layout);
}

/** Expects what facts.md asks of each strip of a layout by itself, whether or not it has all strips of a form. */
export function expectSoundStrips(form: FoundForm, layout: StripLayout): void {
  const { strips, seams, surface } = layout;
  const ids = [...strips.map((s) => s.id), ...seams.map((s) => s.id), ...form.edges.map((e) => e.id)];
  expect(new Set(ids).size, "ids are unique").toBe(ids.length);
  const all = strips.flatMap((s) => s.triangles).sort((a, b) => a - b);
  expect(all, "every triangle in one strip").toEqual(Array.from({ length: surface.tri.length / 3 }, (_, t) => t));
  for (const strip of strips) {
    const name = strip.id;
    // border half-edges of the strip's triangles make exactly the sides, in order, counter-clockwise
    const half = new Set<string>();
    for (const t of strip.triangles)
      for (let k = 0; k < 3; k++) half.add(`${surface.tri[3 * t + k]} ${surface.tri[3 * t + ((k + 1) % 3)]}`);
    const border = [...half].filter((key) => !half.has(key.split(" ").reverse().join(" "))).sort();
    const run = strip.sides.flatMap((s) => s.vertices.slice(1).map((v, i) => `${s.vertices[i]} ${v}`)).sort();
    expect(run, `${name}: sides are the whole outline`).toEqual(border);
    strip.sides.forEach((side, i) => {
      const next = strip.sides[(i + 1) % strip.sides.length];
      expect(side.vertices[side.vertices.length - 1], `${name}: sides join`).toBe(next.vertices[0]);
      expect(side.vertices.length).toBeGreaterThan(1);
    });
    const outline = strip.sides.flatMap((s) => s.vertices.slice(1));
    expect(new Set(outline).size, `${name}: outline is simple`).toBe(outline.length);
    const vertices = new Set(strip.triangles.flatMap((t) => [...surface.tri.slice(3 * t, 3 * t + 3)]));
    const edges = (3 * strip.triangles.length + outline.length) / 2;
    expect(vertices.size - edges + strip.triangles.length, `${name}: is a disc`).toBe(1);
    for (const [word, end] of [
      ["from", strip.from],
      ["to", strip.to],
    ] as const) {
      const mine = new Set(end);
      expect(mine.size, `${name} ${word}: no vertex twice`).toBe(end.length);
      if (mine.size === 1) {
        const arms = strip.sides.map((s) => s.vertices).filter((v) => v[0] === end[0] || v[v.length - 1] === end[0]);
        expect(arms.length, `${name} ${word}: two sides meet in a pointed end`).toBe(2);
        expect(pointAngle(layout, arms, end[0]), `${name} ${word}: pointed end`).toBeLessThan(58);
      } else {
        const inside = strip.sides.filter((s) => s.vertices.every((v) => mine.has(v)));
        expect(new Set(inside.flatMap((s) => s.vertices)), `${name} ${word}: whole sides`).toEqual(mine);
      }
    }
    const mean = (end: number[]) => [0, 1, 2].map((k) => end.reduce((s, v) => s + place(layout, v)[k] / end.length, 0));
    const axis = mean(strip.to).map((x, k) => x - mean(strip.from)[k]);
    expect(Math.hypot(...axis), `${name}: has an axis`).toBeGreaterThan(1e-3);
  }
}

function expectSoundSeams(layout: StripLayout): void {
  const { strips, seams } = layout;
  for (const seam of seams) {
    const sides = strips.flatMap((s) => s.sides.filter((q) => q.id === seam.id).map((q) => ({ strip: s.id, ...q })));
    expect(sides.length, `${seam.id} joins two sides`).toBe(2);
    expect(sides.map((s) => s.kind)).toEqual(["seam", "seam"]);
    expect(sides[0].vertices, `${seam.id}: same points the other way`).toEqual([...sides[1].vertices].reverse());
    expect([...seam.strips].sort()).toEqual(sides.map((s) => s.strip).sort());
    expect(seam.strips).toContain(seam.upper);
    const length = seam.vertices
      .slice(1)
      .reduce(
        (sum, v, i) => sum + Math.hypot(...place(layout, v).map((x, k) => x - place(layout, seam.vertices[i])[k])),
        0,
      );
    expect(seam.length).toBeCloseTo(length, 9);
    expect(
      seams.some((s) => s.id === seam.weld && s.weld === s.id),
      `${seam.id}: its weld is named after a seam`,
    ).toBe(true);
  }
  const sewn = new Set(seams.flatMap((s) => s.vertices.slice(1).map((v, i) => [v, s.vertices[i]].sort().join(" "))));
  const owners = new Map<string, number[]>();
  strips.forEach((strip, s) => {
    for (const side of strip.sides)
      side.vertices.slice(1).forEach((v, i) => {
        const key = [v, side.vertices[i]].sort().join(" ");
        owners.set(key, [...(owners.get(key) ?? []), s]);
      });
  });
  for (const [key, list] of owners) expect(sewn.has(key), `border ${key}`).toBe(list.length === 2);
}

/** Sorted lengths of the seams, for comparing copies. */
export function listLengths(layout: StripLayout): number[] {
  return layout.seams.map((s) => s.length).sort((a, b) => a - b);
}
