import { expect, test } from "vitest";
import { readMeshJson } from "../../../src/core/form/reading/readMeshJson.ts";

const vertices = [
  [0, 0, 0],
  [1, 0, 0],
  [1, 1, 0.5],
  [0, 1, 0],
];

test("vertices, faces of any size, lines and points", () => {
  const m = readMeshJson(
    {
      vertices,
      faces: [[0, 1, 2, 3]],
      lines: [{ name: "north", vertices: [2, 3] }],
      points: [{ vertex: 1 }, { name: "M1", vertex: 0 }],
    },
    "mesh",
  );
  expect([...m.xyz]).toEqual(vertices.flat());
  expect([...m.faceStart]).toEqual([0, 4]);
  expect([...m.faceVertex]).toEqual([0, 1, 2, 3]);
  expect(m.lines).toEqual([{ name: "north", vertices: [2, 3] }]);
  expect(m.points).toEqual([
    { name: null, vertices: [1] },
    { name: "M1", vertices: [0] },
  ]);
});

test.each([
  [null, "mesh-json", "mesh"],
  [{ vertices: [[0, 0]], triangles: [] }, "mesh-json", "mesh.vertices[0][2]"],
  [{ vertices: [[0, "1", 0]] }, "mesh-json", "mesh.vertices[0][1]"],
  [{ vertices: [] }, "mesh-empty", "mesh"],
  [{ vertices, triangles: [] }, "mesh-no-faces", "mesh"],
  [{ vertices, triangles: [[0, 1, 4]] }, "mesh-json", "mesh.triangles[0][2]"],
  [{ vertices, triangles: [[0, 1]] }, "mesh-json", "mesh.triangles[0]"],
  [{ vertices, triangles: [[0, 1, 2]], lines: [{ name: 3, vertices: [0, 1] }] }, "mesh-json", "mesh.lines[0].name"],
  [{ vertices, triangles: [[0, 1, 2]], points: [{ name: "M", vertex: -1 }] }, "mesh-json", "mesh.points[0].vertex"],
])("%j is refused with %s at %s", (value, code, where) => {
  expect(() => readMeshJson(value, "mesh")).toThrow(expect.objectContaining({ code, where }));
});
