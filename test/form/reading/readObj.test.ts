import fc from "fast-check";
import { expect, test } from "vitest";
import { createObjReader, readObj } from "../../../src/core/form/reading/readObj.ts";
import { PlanError } from "../../../src/core/problem.ts";

const faces = (m: ReturnType<typeof readObj>) =>
  Array.from({ length: m.faceStart.length - 1 }, (_, f) => [...m.faceVertex.slice(m.faceStart[f], m.faceStart[f + 1])]);

function readError(text: string): PlanError {
  try {
    readObj(text);
  } catch (e) {
    if (e instanceof PlanError) return e;
    throw e;
  }
  throw new Error("read without an error");
}

const SQUARE = "v 0 0 0\nv 1 0 0\nv 1 1 0\nv 0 1 0\n";

// Statement forms: Wavefront, Advanced Visualizer manual, appendix B1.
test("every index style means the same face", () => {
  for (const f of [
    "1 2 3 4",
    "1/1 2/2 3/3 4/4",
    "1//1 2//1 3//1 4//1",
    "1/1/1 2/2/1 3/3/1 4/4/1",
    "-4 -3 -2 -1",
    "-4/-4 -3//2 3 4/",
  ])
    expect(faces(readObj(`${SQUARE}f ${f}\n`))).toEqual([[0, 1, 2, 3]]);
});

test("BOM, CRLF, tabs, comments, exponents, continuation, weights, colours and skipped statements", () => {
  const text = [
    "\ufeff# a form \\",
    "mtllib a\\b.mtl",
    "v\t1e1   -2.5E-1 +.5 # behind",
    "  v 1. 0 \\",
    "  0 0.2 0.3 0.4",
    "v 0 1 0 1.0",
    "vt 0 0",
    "vn 0 0 1",
    "s off",
    "usemtl white",
    "o roof",
    "f 1 \\",
    " 2 3",
    "l 1 2",
    "g ridge_1 cables",
    "l 1/1 2/2 3",
    "g mast",
    "p 1 2 \\",
    "3",
    "o second",
    "p 3",
  ];
  for (const end of ["\r\n", "\n"]) {
    const m = readObj(text.join(end));
    expect([...m.xyz]).toEqual([10, -0.25, 0.5, 1, 0, 0, 0, 1, 0]);
    expect(faces(m)).toEqual([[0, 1, 2]]);
    expect(m.lines).toEqual([
      { name: "roof", vertices: [0, 1] },
      { name: "ridge_1", vertices: [0, 1, 2] },
    ]);
    expect(m.points).toEqual([
      { name: "mast", vertices: [0, 1, 2] },
      { name: "second", vertices: [2] },
    ]);
  }
});

test("a face may come before its vertices; no name is null", () => {
  const m = readObj(`f 1 2 3\n${SQUARE}g\nl 1 2\ng default\np 1`);
  expect(faces(m)).toEqual([[0, 1, 2]]);
  expect(m.lines[0].name).toBeNull();
  expect(m.points[0].name).toBeNull();
});

test.each([
  ["v 0 0 nan\nf 1 2 3", "obj-number", 1, 7],
  ["v 0 0 0\nv 0 1.2.3 0\n", "obj-number", 2, 5],
  ["v 0 1e999 0\n", "obj-number", 1, 5],
  ["v 0 \\\n x 0\n", "obj-number", 2, 2],
  ["v 0 0\n", "obj-number", 1, 6],
  [`${SQUARE}f 1 2 x\n`, "obj-index", 5, 7],
  [`${SQUARE}f 1 2 0\n`, "obj-index", 5, 7],
  [`${SQUARE}f 1 2 2.5\n`, "obj-index", 5, 7],
  [`${SQUARE}f 1 2 3\nf 1 2 5\n`, "obj-index-range", 6, 7],
  [`${SQUARE}f 1 -5 3\n`, "obj-index-range", 5, 5],
  [`${SQUARE}f 1 2\n`, "obj-short", 5, 6],
  [`${SQUARE}f 1 2 3\nl 1\n`, "obj-short", 6, 4],
])("%j is refused with %s at line %d, column %d", (text, code, line, column) => {
  const e = readError(text);
  expect([e.code, e.facts.line, e.facts.column]).toEqual([code, line, column]);
  expect(e.message).toContain(`line ${line}, column ${column}`);
});

test("empty and faceless texts have their own errors", () => {
  expect(readError("").code).toBe("mesh-empty");
  expect(readError("# nothing\n").code).toBe("mesh-empty");
  expect(readError(SQUARE).code).toBe("mesh-no-faces");
});

test("coordinates come out as the language reads them (oracle: Number)", () => {
  fc.assert(
    fc.property(
      fc.array(fc.tuple(fc.double({ noNaN: true, noDefaultInfinity: true }), fc.integer({ min: 0, max: 3 })), {
        minLength: 3,
        maxLength: 3,
      }),
      (row) => {
        const words = row.map(([x, how]) =>
          how === 0 ? String(x) : how === 1 ? x.toExponential(12) : how === 2 ? (x % 1e6).toFixed(9) : x.toPrecision(6),
        );
        const m = readObj(`v ${words.join(" ")}\nv 1 0 0\nv 0 1 0\nf 1 2 3`);
        for (const [k, w] of words.entries()) expect(m.xyz[k]).toBe(Number(w));
      },
    ),
    { seed: 11, numRuns: 500 },
  );
});

test("chunks of any size read as one text", () => {
  const text = `# c\r\n${SQUARE.replaceAll("\n", "\r\n")}g a\r\nl 1 2 \\\r\n 3\r\nf 1 2 3 4\r\np 2`;
  const whole = readObj(text);
  for (let size = 1; size < 40; size++) {
    const reader = createObjReader();
    for (let k = 0; k < text.length; k += size) reader.push(text.slice(k, k + size));
    expect(reader.finish()).toEqual(whole);
  }
});
