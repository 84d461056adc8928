// Hostile and odd OBJ texts, each a few lines: what is read, or which error at which line and column.
// Statement forms: Wavefront, Advanced Visualizer manual, appendix B1 "Object files".
import { expect, test } from "vitest";
import { createObjReader, type MeshParts, readObj } from "../../../src/core/form/reading/readObj.ts";
import { runForm } from "../../../src/core/form/runForm.ts";
import { PlanError } from "../../../src/core/problem.ts";
import { buildJob, placeMesh } from "../formJob.ts";

interface Read {
  faces: number[][];
  lines: [string | null, ...number[]][];
  points: [string | null, ...number[]][];
  count: number;
}

function list(m: MeshParts): Read {
  return {
    faces: Array.from({ length: m.faceStart.length - 1 }, (_, f) => [
      ...m.faceVertex.slice(m.faceStart[f], m.faceStart[f + 1]),
    ]),
    lines: m.lines.map((l) => [l.name, ...l.vertices]),
    points: m.points.map((p) => [p.name, ...p.vertices]),
    count: m.xyz.length / 3,
  };
}

/** The text's mesh, or "code line:column" of its error. */
function outcome(read: () => MeshParts): Read | string {
  try {
    return list(read());
  } catch (e) {
    if (!(e instanceof PlanError)) throw e;
    expect(e.message).toContain(`line ${e.facts.line}, column ${e.facts.column}`);
    return `${e.code} ${e.facts.line}:${e.facts.column}`;
  }
}

const V = "v 0 0 0\nv 4 0 0\nv 4 4 1\nv 0 4 0\n";
const plain: Read = { faces: [[0, 1, 2, 3]], lines: [], points: [], count: 4 };
const blanks = " ".repeat(70_000);

test.each<[string, string, Partial<Read> | string]>([
  ["weight behind a vertex", `${V.replaceAll("\n", " 1.0\n")}f 1 2 3 4`, {}],
  ["colours behind a vertex", `${V.replaceAll("\n", " 0.1 0.2 0.3\n")}f 1 2 3 4`, {}],
  ["weight and colours, of which more than needed", `${V.replaceAll("\n", " 1 0.1 0.2 0.3 1\n")}f 1 2 3 4`, {}],
  ["v/vt with more vt than v", `${V}${"vt 0 0\n".repeat(9)}f 1/9 2/8 3/7 4/6`, {}],
  ["v//vn", `${V}vn 0 0 1\nf 1//1 2//1 3//1 4//1`, {}],
  ["v/vt/vn, negative of each kind", `${V}vt 0 0\nvn 0 0 1\nf -4/-1/-1 -3/-1/-1 -2/-1/-1 -1/-1/-1`, {}],
  [
    "negative counts from where it stands",
    `v 0 0 0\nv 4 0 0\nv 4 4 1\nf -3 -2 -1\nv 0 4 0\nf -4 -2 -1`,
    {
      faces: [
        [0, 1, 2],
        [0, 2, 3],
      ],
    },
  ],
  ["continued face before CRLF", `${V}f 1 2 \\\r\n3 4\r\n`, {}],
  ["continued right behind a word", `${V}f 1 2\\\n 3\\\r\n 4`, {}],
  ["continued into the end of the text", `${V}f 1 2 3 4 \\`, {}],
  ["a comment is not continued", `# roof \\\r\n${V}# cloth \\\nf 1 2 3 4 # one \\\nl 1 2`, { lines: [[null, 0, 1]] }],
  ["a skipped statement is", `${V}vt 0 \\\nf 1 2 3\nf 1 2 3 4`, {}],
  ["BOM", `\ufeff${V}f 1 2 3 4`, {}],
  [
    "tabs, trailing blanks, empty lines",
    `\n\t\n${V.replaceAll(" ", "\t").replaceAll("\n", " \t\n\n")}\tf\t1 2\t3  4 \t`,
    {},
  ],
  ["exponents and bare points", "v 0e0 -0 .0\nv +4E0 0. 0\nv 400e-2 .04E+2 1\nv 0 4 0\nf 1 2 3 4", {}],
  [
    "several lines with vt",
    `${V}vt 0 0\nf 1 2 3 4\nl 1/1 2/1\nl -1/-1 -2/-1`,
    {
      lines: [
        [null, 0, 1],
        [null, 3, 2],
      ],
    },
  ],
  ["several points in one p", `${V}f 1 2 3 4\ng mast\np 1 -1 3`, { points: [["mast", 0, 3, 2]] }],
  ["g with several names takes the first", `${V}f 1 2 3 4\ng ridge cables all\nl 1 3`, { lines: [["ridge", 0, 2]] }],
  [
    "o ends the group, s and usemtl do not",
    `${V}f 1 2 3 4\ng a\ns off\nusemtl b\nl 1 2\no c\nl 2 3`,
    {
      lines: [
        ["a", 0, 1],
        ["c", 1, 2],
      ],
    },
  ],
  [
    "curves and surfaces are skipped whole",
    `${V}vp 0.5 0.5\ncstype bspline\ndeg 3\ncurv 0 1 1 2 \\\n 3 4\nparm u 0 \\\n 1\nend\nf 1 2 3 4`,
    {},
  ],
  [
    "names of the language's own objects",
    `${V}f 1 2 3 4\ng __proto__\nl 1 2\ng constructor\np 1`,
    { lines: [["__proto__", 0, 1]], points: [["constructor", 0]] },
  ],
  ["very long lines", `#${"x".repeat(70_000)}\n${V}f 1 ${blanks}2 3 4${blanks}\ng ${"n".repeat(70_000)} b`, {}],
  [
    "upper-case keywords",
    `${V.replaceAll("v", "V")}VT 0 0\nVN 0 0 1\nF 1 2 3 4\nG a\nL 1 2\nO b\nP 1`,
    { lines: [["a", 0, 1]], points: [["b", 0]] },
  ],
  ["face outline, the old word for a face", `${V}fo 1 2 3 4`, {}],
  [
    "repeated vertices and faces stay for the repair to say",
    `${V}f 1 1 2 3 4\nf 1 2 3 4\nf 2 3 4 1`,
    {
      faces: [
        [0, 0, 1, 2, 3],
        [0, 1, 2, 3],
        [1, 2, 3, 0],
      ],
    },
  ],
  ["index 0", `${V}f 1 2 0 4`, "obj-index 5:7"],
  ["index 0 behind a continued line", `${V}f 1 2 \\\r\n  0 4`, "obj-index 6:3"],
  ["index of a fraction", `${V}f 1 2.0 3`, "obj-index 5:5"],
  ["index with an exponent", `${V}f 1 2e0 3`, "obj-index 5:5"],
  ["index above all counting", `${V}f 1 2 4294967297`, "obj-index-range 5:7"],
  ["index of four parts", `${V}f 1/1/1/1 2 3`, "obj-index 5:3"],
  ["texture index without a vertex", `${V}f /1 2 3`, "obj-index 5:3"],
  ["negative before the first", `v 0 0 0\nf -1 -2 -3\n${V}`, "obj-index-range 2:6"],
  ["line of one vertex", `${V}f 1 2 3\nl 1 # 2`, "obj-short 6:5"],
  ["point of none", `${V}f 1 2 3\np`, "obj-short 6:2"],
  ["comma for a point", `${V}v 1,5 0 0\nf 1 2 3`, "obj-number 5:3"],
  ["the column does not count the BOM", `\ufeffv 0 x 0`, "obj-number 1:5"],
  ["tabs count one column", `\tv\t0\tx 0`, "obj-number 1:6"],
])("%s", (_, text, expected) => {
  const whole = typeof expected === "string" ? expected : { ...plain, ...expected };
  expect(outcome(() => readObj(text))).toEqual(whole);
  // and the same in chunks that part any word
  const reader = createObjReader();
  const step = text.length > 1000 ? 9973 : 3;
  expect(
    outcome(() => {
      for (let k = 0; k < text.length; k += step) reader.push(text.slice(k, k + step));
      return reader.finish();
    }),
  ).toEqual(whole);
});

// Areas by hand: an L of 3 squares of side 4; a square of side 4 whose corner is lifted by 3: along the
// diagonal beside it the fold is 46.7°, through it 50.2°, so 8 + 2·sqrt(34).
test.each<[string, string, number, [string, number][]]>([
  ["concave polygon", "v 0 0 0\nv 8 0 0\nv 8 4 0\nv 4 4 0\nv 4 8 0\nv 0 8 0\nf 1 2 3 4 5 6", 48, []],
  ["concave polygon from its notch", "v 0 0 0\nv 8 0 0\nv 8 4 0\nv 4 4 0\nv 4 8 0\nv 0 8 0\nf 4 5 6 1 2 3", 48, []],
  ["repeated vertex in a face", "v 0 0 0\nv 4 0 0\nv 4 4 0\nv 0 4 0\nf 1 1 2 3 3 4", 16, []],
  [
    "faces given twice, once turned",
    "v 0 0 0\nv 4 0 0\nv 4 4 0\nv 0 4 0\nf 1 2 3 4\nf 2 3 4 1\nf 4 3 2 1",
    16,
    [["mesh-double-triangles", 4]],
  ],
  ["face without area", "v 0 0 0\nv 4 0 0\nv 4 4 0\nv 0 4 0\nf 1 2 3 4\nf 1 2 2", 16, [["mesh-flat-triangles", 1]]],
  ["one corner up", "v 0 0 0\nv 4 0 0\nv 4 4 3\nv 0 4 0\nf 1 2 3 4", 8 + 2 * Math.sqrt(34), []],
])("%s: area and repairs said", (_, text, area, repairs) => {
  const { output, findings } = runForm(placeMesh(readObj(text)), buildJob(), {});
  expect(output.area).toBeCloseTo(area, 9);
  expect(findings.filter((f) => f.code.startsWith("mesh-")).map((f) => [f.code, f.value])).toEqual(repairs);
});
