// From a mesh as a program wrote it to a surface the stations can stand on; every repair is a finding.
// Knows nothing of edges, anchors or forces.
import { type Finding, PlanError } from "../../problem.ts";
import type { MeshSource } from "../../records/job.ts";
import { measureAreas } from "../../surface/measures.ts";
import type { Surface } from "../../surface/surface.ts";
import { buildFormFinding, describePlace, describeVertex } from "../formFinding.ts";
import { cleanTriangles } from "./cleanTriangles.ts";
import { findSelfContact } from "./findSelfContact.ts";
import { checkSize, convertToMetres, measureExtent } from "./meshSize.ts";
import { type Orientation, orientTrianglesInPlace } from "./orientTriangles.ts";
import { partPinches } from "./partPinches.ts";
import { splitPolygons } from "./splitPolygons.ts";
import { splitTees } from "./splitTees.ts";
import { findWelds } from "./weldVertices.ts";

/** Vertices closer than this share of the bounding box diagonal are one; triangles no higher than that have no area. */
export const WELD = 1e-6;

/** Height over longest side below which a triangle is called a needle. */
const NEEDLE = 0.01;

/** A surface without flaws that matter, and the way back to the mesh file. */
export interface SoundSurface {
  surface: Surface;
  /** Vertices of the mesh file in metres, z up. @shape 3*nSource */
  sourceXyz: Float64Array<ArrayBuffer>;
  /** Surface vertex of each vertex of the file, -1 where no face uses it. */
  fromSource: Int32Array<ArrayBuffer>;
  /** Vertex of the file of each surface vertex. */
  toSource: Uint32Array<ArrayBuffer>;
  /** Piece of each surface vertex. */
  piece: Int32Array<ArrayBuffer>;
  nPieces: number;
  /** Bounding box diagonal, m. */
  diagonal: number;
  findings: Finding[];
}

/** "12 vertices", "1 vertex". */
function countWords(n: number, one: string, many: string): string {
  return `${n} ${n === 1 ? one : many}`;
}

function reportRepairs(
  x: Float64Array<ArrayBuffer>,
  tolerance: number,
  found: [string, number[], string, number?][],
): Finding[] {
  return found
    .filter(([, at]) => at.length > 0)
    .map(([code, at, text, worst]) =>
      buildFormFinding("note", {
        code,
        where: `vertex ${worst ?? at[0]}`,
        value: at.length,
        limit: tolerance,
        text: `${text}, ${worst === undefined ? "first" : "worst at"} ${describeVertex(x, worst ?? at[0])} (vertices counted from 0)`,
        remedy: "nothing to do if this is meant; else correct the mesh and import it again",
      }),
    );
}

function reportOrientation(
  x: Float64Array<ArrayBuffer>,
  tri: Uint32Array<ArrayBuffer>,
  o: Orientation,
  outside: string,
): Finding[] {
  const findings: Finding[] = [];
  const say = (code: string, value: number, where: string, text: string, remedy: string) =>
    findings.push(buildFormFinding("note", { code, where, value, text, remedy }));
  if (o.turned.length > 0) {
    const v = tri[3 * o.turned[0]];
    say(
      "mesh-winding",
      o.turned.length,
      `vertex ${v}`,
      `${countWords(o.turned.length, "triangle was", "triangles were")} wound against the rest and turned, first at ${describeVertex(x, v)}`,
      "nothing to do",
    );
  }
  if (o.turnedPieces.length > 0)
    say(
      "mesh-outer-face",
      o.turnedPieces.length,
      "mesh.outside",
      `the mesh's normals point ${outside === "down" ? "up" : "down"}; the outer face was set ${outside} as mesh.outside says`,
      'if the mesh\'s own normals show the outer face, set mesh.outside to "normals"',
    );
  if (o.undecided.length > 0)
    say(
      "mesh-outer-face",
      o.undecided.length,
      "mesh.outside",
      `no face of the form is its upper one, so the outer face is the one the mesh's normals show, not "${outside}"`,
      "look at the form's outer face; if it is the wrong one, turn the mesh's normals",
    );
  return findings;
}

function reportPieces(s: { xyz: Float64Array<ArrayBuffer>; tri: Uint32Array<ArrayBuffer> }, o: Orientation): Finding[] {
  if (o.nPieces < 2) return [];
  const area = new Float64Array(o.nPieces);
  const first = new Int32Array(o.nPieces).fill(-1);
  measureAreas(s).forEach((a, t) => {
    area[o.piece[t]] += a;
    if (first[o.piece[t]] < 0) first[o.piece[t]] = s.tri[3 * t];
  });
  const order = Array.from(area.keys()).sort((p, q) => area[q] - area[p] || p - q);
  const shown = order.slice(0, 5).map((p) => `${area[p].toFixed(2)} m² at ${describeVertex(s.xyz, first[p])}`);
  return [
    buildFormFinding("caution", {
      code: "mesh-pieces",
      where: order.slice(0, 5).map((p) => `vertex ${first[p]}`),
      value: o.nPieces,
      limit: 1,
      text: `the mesh falls into ${o.nPieces} pieces that share no side: ${shown.join("; ")}${order.length > 5 ? "; …" : ""}`,
      remedy: "join them in the mesh if they are one roof, delete what is left over, or plan each in a job of its own",
    }),
  ];
}

function findNeedles(s: Surface, toSource: Uint32Array<ArrayBuffer>): Finding[] {
  const { xyz: x, tri } = s;
  const area = measureAreas(s);
  let count = 0;
  let worst = NEEDLE;
  let at = -1;
  for (let t = 0; t < area.length; t++) {
    let longest = 0;
    for (let k = 0; k < 3; k++) {
      const a = 3 * tri[3 * t + k];
      const b = 3 * tri[3 * t + ((k + 1) % 3)];
      longest = Math.max(longest, (x[a] - x[b]) ** 2 + (x[a + 1] - x[b + 1]) ** 2 + (x[a + 2] - x[b + 2]) ** 2);
    }
    const ratio = (2 * area[t]) / longest;
    if (ratio >= NEEDLE) continue;
    count++;
    if (ratio >= worst) continue;
    worst = ratio;
    at = tri[3 * t];
  }
  if (count === 0) return [];
  const vertex = `vertex ${toSource[at]}`;
  return [
    buildFormFinding("note", {
      code: "mesh-needles",
      where: vertex,
      value: count,
      limit: NEEDLE,
      text: `${countWords(count, "triangle is a needle", "triangles are needles")} (height below ${NEEDLE} of the longest side), worst at ${vertex} at ${describePlace(x, at)}`,
      remedy: "balance and stress are less exact there; a more even mesh helps",
    }),
  ];
}

/** Drops what no triangle uses, in the order of the file. */
function compact(
  x: Float64Array<ArrayBuffer>,
  tri: Uint32Array<ArrayBuffer>,
): { surface: Surface; kept: Uint32Array<ArrayBuffer>; index: Int32Array<ArrayBuffer> } {
  const nV = x.length / 3;
  const used = new Uint8Array(nV);
  for (const v of tri) used[v] = 1;
  const index = new Int32Array(nV).fill(-1);
  let n = 0;
  for (let v = 0; v < nV; v++) if (used[v]) index[v] = n++;
  const kept = new Uint32Array(n);
  const xyz = new Float64Array(3 * n);
  for (let v = 0; v < nV; v++) {
    if (index[v] < 0) continue;
    kept[index[v]] = v;
    xyz.set(x.subarray(3 * v, 3 * v + 3), 3 * index[v]);
  }
  return { surface: { xyz, tri: tri.map((v) => index[v]) }, kept, index };
}

/** Vertices nothing uses. Points of lines and held points off the surface are told where they are matched with it. */
function findLoose(source: MeshSource, target: Uint32Array<ArrayBuffer>, index: Int32Array<ArrayBuffer>): number[] {
  const named = new Set([...source.lines, ...source.points].flatMap((l) => l.vertices.map((v) => target[v])));
  return Array.from(target.keys()).filter((v) => target[v] === v && index[v] < 0 && !named.has(v));
}

/**
 * The surface of a mesh: metres, z up, triangles, each vertex once, wound one way, outer face as asked.
 * @throws PlanError mesh-flat (no triangle has area), mesh-three-way-edge, mesh-one-sided
 */
export function buildSoundSurface(source: MeshSource): SoundSurface {
  const x = convertToMetres(source);
  const nSource = x.length / 3;
  const { diagonal, extent } = measureExtent(x, source.faceVertex);
  const tolerance = WELD * diagonal;
  const target = findWelds(x, tolerance);
  const welded = Array.from(target.keys()).filter((v) => target[v] !== v);
  const gap = (v: number) => Math.sqrt([0, 1, 2].reduce((s, k) => s + (x[3 * v + k] - x[3 * target[v] + k]) ** 2, 0));
  const farthest = welded.reduce((w, v) => (gap(v) > gap(w) ? v : w), welded[0] ?? 0);
  const split = splitPolygons(x, source, target);
  const { tri: clean, flatAt, doubledAt } = cleanTriangles(x, split.tri, tolerance);
  const { tri, ...tees } = splitTees(x, clean, tolerance);
  if (tri.length === 0)
    throw new PlanError(
      "mesh-flat",
      `no face of the mesh has an area: all ${source.faceStart.length - 1} are points or lines within ${tolerance.toPrecision(2)} m; export the surface anew`,
      "mesh",
      { faces: source.faceStart.length - 1 },
    );
  const orientation = orientTrianglesInPlace(x, tri, source.outside);
  const parted = partPinches(tri, nSource);
  const wide = new Float64Array(3 * (nSource + parted.copyOf.length));
  wide.set(x);
  parted.copyOf.forEach((v, i) => {
    wide.set(x.subarray(3 * v, 3 * v + 3), 3 * (nSource + i));
  });
  const { surface, kept, index } = compact(wide, parted.tri);
  const fromSource = new Int32Array(nSource);
  for (let v = 0; v < nSource; v++) fromSource[v] = index[target[v]];
  const loose = findLoose(source, target, index);
  const piece = new Int32Array(kept.length);
  surface.tri.forEach((v, h) => {
    piece[v] = orientation.piece[Math.floor(h / 3)];
  });
  const toSource = kept.map((v) => (v < nSource ? v : parted.copyOf[v - nSource]));
  const within = `within ${(1000 * tolerance).toPrecision(2)} mm (a millionth of the form's diagonal)`;
  const doubled = [...split.doubled, ...doubledAt];
  const vanished = split.vanished.map((f) => source.faceVertex[source.faceStart[f]]);
  const findings = [
    ...checkSize(extent, source.unit),
    ...reportRepairs(x, tolerance, [
      [
        "mesh-welded",
        welded,
        `${countWords(welded.length, "vertex lies", "vertices lie")} on another ${within}, ${(1000 * gap(farthest)).toPrecision(2)} mm at most, and became one with it`,
        farthest,
      ],
      [
        "mesh-flat-triangles",
        [...vanished, ...flatAt],
        `${countWords(vanished.length + flatAt.length, "face has", "faces have")} no area ${within} and went`,
      ],
      [
        "mesh-double-triangles",
        doubled,
        `${countWords(doubled.length, "triangle was", "triangles were")} given twice and went`,
      ],
      [
        "mesh-tees",
        tees.at,
        `${countWords(tees.at.length, "vertex lies", "vertices lie")} on the side of a triangle (up to ${(1000 * tees.farthest.distance).toPrecision(2)} mm off it), which was split there`,
        tees.farthest.vertex,
      ],
      [
        "mesh-loose-vertices",
        loose,
        `${countWords(loose.length, "vertex belongs", "vertices belong")} to no face, line or point and went`,
      ],
    ]),
    ...reportOrientation(x, tri, orientation, source.outside),
    ...parted.copyOf.slice(0, 1).map((v) =>
      buildFormFinding("caution", {
        code: "mesh-pinch",
        where: [...new Set(parted.copyOf)].slice(0, 5).map((p) => `vertex ${p}`),
        value: parted.copyOf.length,
        limit: 0,
        text: `${countWords(parted.copyOf.length, "place hangs", "places hang")} together in a single point, first ${describeVertex(x, v)}; the cloth was parted there and carries nothing across`,
        remedy: "fix the point if it is a corner of two roofs, else join the faces along a side",
      }),
    ),
    ...reportPieces({ xyz: x, tri }, orientation),
    ...findNeedles(surface, toSource),
    ...findSelfContact(surface, toSource),
  ];
  return { surface, sourceXyz: x, fromSource, toSource, piece, nPieces: orientation.nPieces, diagonal, findings };
}
