// OBJ text into mesh parts: one pass over character codes, fed whole or in chunks.
// Reads v, f, l, p, g, o; skips what does not concern a form (s, usemtl, mtllib, vt, vn, curves). Repairs nothing.
import { PlanError } from "../../problem.ts";
import type { MeshSource } from "../../records/job.ts";
import {
  createIndices,
  createReals,
  type GrowingIndices,
  type GrowingReals,
  pushIndexInPlace,
  pushRealInPlace,
} from "./growingArray.ts";
import { readNumberInPlace, type TextCursor } from "./readNumber.ts";

/** What a mesh file holds by itself; unit, axis and outer face are the job's to say. */
export type MeshParts = Omit<MeshSource, "unit" | "up" | "outside">;

/** Reader that takes the text in chunks of any size. */
export interface ObjReader {
  push(chunk: string): void;
  /** @throws PlanError as readObj */
  finish(): MeshParts;
}

interface ObjState extends TextCursor {
  line: number;
  lineStart: number;
  xyz: GrowingReals;
  faceStart: GrowingIndices;
  faceVertex: GrowingIndices;
  lines: MeshParts["lines"];
  points: MeshParts["points"];
  group: string | null;
  object: string | null;
  /** Greatest index used so far, and where. */
  top: { index: number; line: number; column: number };
}

const NEWLINE = 10;
const RETURN = 13;
const BACKSLASH = 92;

function fail(s: ObjState, code: string, text: string, at = s.at): never {
  const column = at - s.lineStart + 1;
  throw new PlanError(code, `mesh line ${s.line}, column ${column}: ${text}`, `mesh line ${s.line}, column ${column}`, {
    line: s.line,
    column,
  });
}

function nextLine(s: ObjState): void {
  s.at++;
  s.line++;
  s.lineStart = s.at;
}

/** Moves over blanks and continued line ends; true while the statement goes on. */
function skipBlanks(s: ObjState): boolean {
  const { text, end } = s;
  while (s.at < end) {
    const c = text.charCodeAt(s.at);
    if (c === NEWLINE || c === 35) return false;
    if (c === 32 || c === 9 || c === RETURN || c === 11 || c === 12 || c === 0xfeff) s.at++;
    else if (c === BACKSLASH) {
      let k = s.at + 1;
      if (k < end && text.charCodeAt(k) === RETURN) k++;
      if (k < end && text.charCodeAt(k) !== NEWLINE) return true;
      s.at = k;
      if (k < end) nextLine(s);
    } else return true;
  }
  return false;
}

/** Index behind the word that starts at the cursor. */
function findWordEnd(s: ObjState): number {
  let k = s.at;
  for (; k < s.end; k++) {
    const c = s.text.charCodeAt(k);
    if (c === 32 || c === 9 || c === NEWLINE || c === RETURN) break;
    if (c === BACKSLASH && (s.text.charCodeAt(k + 1) === NEWLINE || s.text.charCodeAt(k + 1) === RETURN)) break;
  }
  return k;
}

/** To the start of the next statement. A comment is not continued. */
function skipStatement(s: ObjState): void {
  while (skipBlanks(s)) s.at = Math.max(findWordEnd(s), s.at + 1);
  while (s.at < s.end && s.text.charCodeAt(s.at) !== NEWLINE) s.at++;
  if (s.at < s.end) nextLine(s);
}

function readVertex(s: ObjState): void {
  for (let k = 0; k < 3; k++) {
    if (!skipBlanks(s)) fail(s, "obj-number", `a vertex needs 3 coordinates, ${k} given; write v x y z`);
    const start = s.at;
    const value = readNumberInPlace(s);
    const stop = findWordEnd(s);
    if (s.at !== stop || !Number.isFinite(value)) {
      s.at = start;
      const word = s.text.slice(start, Math.max(findWordEnd(s), start + 1));
      fail(s, "obj-number", `"${word}" is no finite number; correct the coordinate or export the mesh anew`);
    }
    pushRealInPlace(s.xyz, value);
  }
}

/** The vertex of v, v/vt, v//vn or v/vt/vn, counted from 0. */
function readReference(s: ObjState): number {
  const start = s.at;
  const value = readNumberInPlace(s);
  const slash = s.text.charCodeAt(s.at) === 47;
  const stop = findWordEnd(s);
  const word = s.text.slice(start, Math.max(stop, start + 1));
  if (
    !Number.isInteger(value) ||
    value === 0 ||
    (!slash && s.at !== stop) ||
    !/^[-+]?\d+(\/[-+]?\d*){0,2}$/.test(word)
  ) {
    s.at = start;
    fail(
      s,
      "obj-index",
      `"${word}" is no vertex index; indices are whole numbers from 1, or negative counted from the last vertex`,
    );
  }
  s.at = stop;
  const count = s.xyz.length / 3;
  const index = value > 0 ? value - 1 : count + value;
  if (index < 0)
    fail(
      s,
      "obj-index-range",
      `index ${value} reaches before the first vertex, ${count} are read so far; correct the index`,
      start,
    );
  if (index > s.top.index) s.top = { index, line: s.line, column: start - s.lineStart + 1 };
  return index;
}

function readReferences(s: ObjState, least: number, what: string): number[] {
  const out: number[] = [];
  while (skipBlanks(s)) out.push(readReference(s));
  if (out.length < least)
    fail(s, "obj-short", `a ${what} needs at least ${least} vertices, ${out.length} given; complete or delete it`);
  return out;
}

function readFace(s: ObjState): void {
  let n = 0;
  while (skipBlanks(s)) {
    pushIndexInPlace(s.faceVertex, readReference(s));
    n++;
  }
  if (n < 3) fail(s, "obj-short", `a face needs at least 3 vertices, ${n} given; complete or delete it`);
  pushIndexInPlace(s.faceStart, s.faceVertex.length);
}

/** First name of the statement, null where there is none or the format's own "default". */
function readName(s: ObjState): string | null {
  if (!skipBlanks(s)) return null;
  const stop = findWordEnd(s);
  const name = s.text.slice(s.at, stop);
  s.at = stop;
  return name === "" || name === "default" ? null : name;
}

/** Small letter of a statement that is read, 0 of any other. Capitals mean the same; fo is the old word for f. */
function readKeyword(s: ObjState, stop: number): number {
  const letter = s.text.charCodeAt(s.at) | 32;
  if (stop - s.at === 1) return letter;
  return stop - s.at === 2 && letter === 102 && (s.text.charCodeAt(s.at + 1) | 32) === 111 ? letter : 0;
}

function readStatement(s: ObjState): void {
  if (skipBlanks(s)) {
    const stop = findWordEnd(s);
    const word = readKeyword(s, stop);
    s.at = word === 0 ? s.at : stop;
    if (word === 118) readVertex(s);
    else if (word === 102) readFace(s);
    else if (word === 108) s.lines.push({ name: s.group ?? s.object, vertices: readReferences(s, 2, "line") });
    else if (word === 112) s.points.push({ name: s.group ?? s.object, vertices: readReferences(s, 1, "point") });
    else if (word === 103) s.group = readName(s);
    else if (word === 111) {
      s.object = readName(s);
      s.group = null;
    }
  }
  skipStatement(s);
}

/** Where the last complete statement of the text ends; the rest waits for the next chunk. */
function findLastStatement(text: string): number {
  for (let k = text.length - 1; k >= 0; k--) {
    if (text.charCodeAt(k) !== NEWLINE) continue;
    const before = text.charCodeAt(k - 1) === RETURN ? k - 2 : k - 1;
    if (text.charCodeAt(before) !== BACKSLASH) return k + 1;
  }
  return 0;
}

function finishMesh(s: ObjState): MeshParts {
  const nV = s.xyz.length / 3;
  const nF = s.faceStart.length - 1;
  const count = `${nV} vertices, ${s.lines.length} lines, ${s.points.length} points`;
  if (nV === 0)
    throw new PlanError(
      "mesh-empty",
      "the mesh has no vertices: nothing to plan; check that it is an OBJ text with v and f lines",
      "mesh",
    );
  if (nF === 0)
    throw new PlanError(
      "mesh-no-faces",
      `the mesh has no faces (${count}); export the surface with its faces (f lines)`,
      "mesh",
      { vertices: nV },
    );
  if (s.top.index >= nV) {
    const { index, line, column } = s.top;
    throw new PlanError(
      "obj-index-range",
      `mesh line ${line}, column ${column}: index ${index + 1} is out of range, the mesh has ${nV} vertices; correct the index or add the vertex`,
      `mesh line ${line}, column ${column}`,
      { line, column, index: index + 1, vertices: nV },
    );
  }
  return {
    xyz: s.xyz.data.slice(0, s.xyz.length),
    faceStart: s.faceStart.data.slice(0, s.faceStart.length),
    faceVertex: s.faceVertex.data.slice(0, s.faceVertex.length),
    lines: s.lines,
    points: s.points,
  };
}

/**
 * A reader to be fed with chunks, for files too long to hold as one text.
 * A name is the latest g, else the latest o; an o ends the group before it.
 */
export function createObjReader(): ObjReader {
  const s: ObjState = {
    text: "",
    at: 0,
    end: 0,
    line: 1,
    lineStart: 0,
    xyz: createReals(),
    faceStart: createIndices(),
    faceVertex: createIndices(),
    lines: [],
    points: [],
    group: null,
    object: null,
    top: { index: -1, line: 0, column: 0 },
  };
  pushIndexInPlace(s.faceStart, 0);
  let rest = "";
  let started = false;
  const readTo = (text: string, end: number) => {
    s.text = text;
    s.at = 0;
    s.lineStart = 0;
    s.end = end;
    while (s.at < end) readStatement(s);
  };
  return {
    push(chunk) {
      // a byte order mark is no column of the first line
      const own = !started && chunk.charCodeAt(0) === 0xfeff ? chunk.slice(1) : chunk;
      started ||= chunk !== "";
      const text = rest === "" ? own : rest + own;
      const end = findLastStatement(text);
      readTo(text, end);
      rest = text.slice(end);
    },
    finish() {
      readTo(rest, rest.length);
      rest = "";
      return finishMesh(s);
    },
  };
}

/**
 * Mesh parts of an OBJ text: polygons of any size, indices from 0, names of lines and points kept.
 * @throws PlanError obj-number, obj-index, obj-index-range, obj-short (each with line and column), mesh-empty, mesh-no-faces
 * @source Wavefront, Advanced Visualizer manual, appendix B1 "Object files" (statements v, f, l, p, g, o, "\" continuation)
 */
export function readObj(text: string): MeshParts {
  const reader = createObjReader();
  reader.push(text);
  return reader.finish();
}
