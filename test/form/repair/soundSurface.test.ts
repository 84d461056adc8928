import { expect, test } from "vitest";
import { buildSoundSurface } from "../../../src/core/form/repair/soundSurface.ts";
import { buildAdjacency } from "../../../src/core/surface/adjacency.ts";
import { measureArea } from "../../../src/core/surface/measures.ts";
import { listCodes, placeMesh } from "../formJob.ts";
import { buildCatenoid, buildGrid, mapPlaces, readFixture } from "../formMeshes.ts";

const sound = buildSoundSurface(placeMesh(readFixture("sound")));

test("a sound mesh passes untouched and without a word", () => {
  expect(sound.findings).toEqual([]);
  expect([...sound.surface.xyz]).toEqual([...readFixture("sound").xyz]);
  expect([...sound.surface.tri]).toEqual([...readFixture("sound").faceVertex]);
});

test.each([
  ["millimetres", { unit: "mm" }],
  ["yUpMillimetres", { unit: "mm", up: "y" }],
] as const)("%s give the same surface to the last bit", (name, own) => {
  const s = buildSoundSurface(placeMesh(readFixture(name), own));
  expect(s.findings).toEqual([]);
  s.surface.xyz.forEach((x, i) => {
    expect(x).toBeCloseTo(sound.surface.xyz[i], 15);
  });
  expect(s.surface.tri).toEqual(sound.surface.tri);
});

test("feet and inches are those of ISO 80000-3:2019 (0.3048 m, 0.0254 m)", () => {
  for (const [unit, metres] of [
    ["ft", 0.3048],
    ["in", 0.0254],
    ["cm", 0.01],
  ] as const) {
    const s = buildSoundSurface(
      placeMesh(
        mapPlaces(readFixture("sound"), (x, y, z) => [x / metres, y / metres, z / metres]),
        { unit },
      ),
    );
    expect(measureArea(s.surface)).toBeCloseTo(measureArea(sound.surface), 10);
    expect(s.findings).toEqual([]);
  }
});

test("a unit that makes a 0.008 m or 8000 m roof is a stop that names the right one", () => {
  for (const [name, unit, better] of [
    ["millimetres", "m", "mm"],
    ["sound", "mm", "m"],
  ] as const) {
    const [f] = buildSoundSurface(placeMesh(readFixture(name), { unit })).findings;
    expect([f.code, f.level, f.where]).toEqual(["mesh-size", "stop", "mesh.unit"]);
    expect(f.remedy).toContain(`"${better}"`);
    expect(f.remedy).toContain("8.000 m across");
  }
});

test("triangles wound against the rest are turned and said", () => {
  const s = buildSoundSurface(placeMesh(readFixture("flipped")));
  expect(s.surface.tri.length).toBe(sound.surface.tri.length);
  expect(buildAdjacency(s.surface).twin.filter((t) => t < 0).length).toBe(32);
  const [f] = s.findings;
  expect([f.code, f.level, f.value]).toEqual(["mesh-winding", "note", 3]);
  expect(f.text).toMatch(/first at vertex \d+ at \(/);
});

test("a soup of triangles is welded", () => {
  const s = buildSoundSurface(placeMesh(readFixture("soup")));
  expect(s.surface.xyz.length).toBe(3 * 81);
  expect(measureArea(s.surface)).toBeCloseTo(measureArea(sound.surface), 12);
  expect(s.findings.map((f) => [f.code, f.value])).toEqual([["mesh-welded", 384 - 81]]);
  expect(s.findings[0].text).toContain("0.012 mm");
});

test("loose, double and flat things go, each with a note", () => {
  const s = buildSoundSurface(placeMesh(readFixture("untidy")));
  expect(measureArea(s.surface)).toBeCloseTo(measureArea(sound.surface), 12);
  expect(s.surface.tri.length).toBe(sound.surface.tri.length);
  expect(Object.fromEntries(s.findings.map((f) => [f.code, f.value]))).toEqual({
    "mesh-welded": 1,
    "mesh-flat-triangles": 1,
    "mesh-double-triangles": 1,
    "mesh-loose-vertices": 1,
  });
});

test("points of a line or a held point beside the surface are not called loose: they are told where they are matched", () => {
  const n = sound.surface.xyz.length / 3;
  const xyz = Float64Array.from([...readFixture("sound").xyz, 1, 1, 9, 2, 2, 9, 3, 3, 9, 4, 4, 9]);
  const lines = [{ name: "mast", vertices: [n, n + 1] }];
  const points = [{ name: "foot", vertices: [n + 2] }];
  const s = buildSoundSurface(placeMesh({ ...readFixture("sound"), xyz, lines, points }));
  expect(s.findings.map((f) => [f.code, f.value])).toEqual([["mesh-loose-vertices", 1]]);
});

test("a triangle without area between two others goes without opening a crack", () => {
  // vertex 4 lies on the side 0–2 of the lower triangle; the flat triangle 0, 2, 4 closes the gap
  const xyz = Float64Array.from([0, 0, 0, 2, -2, 0, 4, 0, 0, 2, 2, 0, 2, 0, 0]);
  const faces = [0, 1, 2, 0, 2, 4, 0, 4, 3, 4, 2, 3];
  const parts = {
    xyz,
    faceStart: Uint32Array.from([0, 3, 6, 9, 12]),
    faceVertex: Uint32Array.from(faces),
    lines: [],
    points: [],
  };
  const s = buildSoundSurface(placeMesh(parts));
  expect(listCodes(s.findings)).toEqual(["mesh-flat-triangles"]);
  expect(measureArea(s.surface)).toBeCloseTo(8, 12);
  expect(buildAdjacency(s.surface).twin.filter((t) => t < 0).length).toBe(4);
});

test("quads and larger polygons keep the area of a level sheet", () => {
  const parts = mapPlaces(readFixture("polygons"), (x, y) => [x, y, 2]);
  const s = buildSoundSurface(placeMesh(parts));
  expect(s.surface.tri.length).toBe(sound.surface.tri.length);
  expect(measureArea(s.surface)).toBeCloseTo(64, 12);
  expect(s.findings).toEqual([]);
});

test("pieces that touch in a point are parted there, pieces that touch nowhere are counted", () => {
  const pinch = buildSoundSurface(placeMesh(readFixture("pinch")));
  expect(listCodes(pinch.findings, "caution")).toEqual(["mesh-pieces", "mesh-pinch"]);
  expect(pinch.surface.xyz.length).toBe(3 * 8);
  expect(pinch.toSource[7]).toBe(2);
  const pieces = buildSoundSurface(placeMesh(readFixture("pieces")));
  expect(pieces.findings.map((f) => [f.code, f.level, f.value])).toEqual([["mesh-pieces", "caution", 2]]);
  expect(pieces.findings[0].text).toContain("vertex 81 at (10.000, 0.000, 0.000) m");
});

test.each([
  ["threeWay", "mesh-three-way-edge", "vertices 40–41", "(0.000, 0.000, 0.000) m"],
  ["oneSided", "mesh-one-sided", "vertex", " m;"],
  ["flatFaces", "mesh-flat", "mesh", "no face"],
])("%s is refused with %s naming the place", (name, code, where, words) => {
  try {
    buildSoundSurface(placeMesh(readFixture(name)));
  } catch (e) {
    const { code: got, where: at, message } = e as { code: string; where: string | string[]; message: string };
    expect(got).toBe(code);
    expect([at].flat()[0]).toContain(where);
    expect(message).toContain(words);
    return;
  }
  throw new Error(`${name} passed`);
});

test("the outer face lies as asked; a vertical tube keeps the mesh's", () => {
  const up = (tri: Uint32Array, xyz: Float64Array) => {
    let z = 0;
    for (let t = 0; t < tri.length; t += 3) {
      const [a, b, c] = [3 * tri[t], 3 * tri[t + 1], 3 * tri[t + 2]];
      z += (xyz[b] - xyz[a]) * (xyz[c + 1] - xyz[a + 1]) - (xyz[b + 1] - xyz[a + 1]) * (xyz[c] - xyz[a]);
    }
    return Math.sign(z);
  };
  const down = mapPlaces(readFixture("sound"), (x, y, z) => [-x, y, z]);
  for (const [outside, sign, codes] of [
    ["up", 1, ["mesh-outer-face"]],
    ["down", -1, []],
    ["normals", -1, []],
  ] as const) {
    const s = buildSoundSurface(placeMesh(down, { outside }));
    expect(up(s.surface.tri, s.surface.xyz)).toBe(sign);
    expect(listCodes(s.findings)).toEqual(codes);
  }
  const tube = buildCatenoid(24, 10, 5, 2);
  const s = buildSoundSurface(placeMesh(tube));
  expect([...s.surface.tri]).toEqual([...tube.faceVertex]);
  expect(listCodes(s.findings)).toEqual(["mesh-outer-face"]);
});

test("needles are counted", () => {
  const s = buildSoundSurface(placeMesh(buildGrid(2, 2, (u, v) => [20 * u, v < 1 ? v * 0.1 : 10, 0])));
  expect(s.findings.map((f) => [f.code, f.value])).toEqual([["mesh-needles", 4]]);
});
