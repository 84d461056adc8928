// Arcs in cut files, read by two readers that are not ours: ezdxf flattens them, dxf-parser hands their bulges on.
import { spawnSync } from "node:child_process";
import { mkdtempSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import DxfParser from "dxf-parser";
import { expect, test } from "vitest";
import { writeDxf2000 } from "../../../src/core/papers/cutFiles/dxf2000.ts";
import { writeDxfR12 } from "../../../src/core/papers/cutFiles/dxfR12.ts";
import { writeSvg } from "../../../src/core/papers/cutFiles/svg.ts";
import { ARC_TOLERANCE, withArcs } from "../../../src/core/papers/drawing/arcs.ts";
import { addStrokeInPlace, type Drawing, emptyDrawing, extents } from "../../../src/core/papers/drawing/drawing.ts";
import { panelDrawing } from "../../../src/core/papers/drawing/rollDrawing.ts";
import type { Vec2 } from "../../../src/core/records/facts.ts";
import { sampleFacts } from "../made/sampleFacts.ts";
import { apart, flattened, hasEzdxf, PYTHON } from "./readDxf.ts";

/** A lens of two arcs of 5 m and 3 m, with a corner, a straight and a wavy side: what an arc can and cannot stand for. */
function shapes(): Drawing {
  const drawing = emptyDrawing("shapes");
  const arc = (r: number, from: number, to: number, n: number, x: number, y: number) =>
    Array.from({ length: n + 1 }, (_, i): Vec2 => {
      const a = from + ((to - from) * i) / n;
      return [x + r * Math.cos(a), y + r * Math.sin(a)];
    });
  const wave = Array.from({ length: 60 }, (_, i): Vec2 => [3000 - 50 * i, 3000 + 2 * Math.sin(i)]);
  addStrokeInPlace(drawing, { layer: "cut", points: [...arc(5000, -2, -1.2, 80, 0, 5000), ...wave], closed: true });
  addStrokeInPlace(drawing, { layer: "cut", points: arc(3000, 0, -2.9, 200, 20000, 0), closed: true });
  addStrokeInPlace(drawing, { layer: "mark", points: arc(800, 3, 1, 70, 9000, 0), closed: false });
  return drawing;
}

const drawings = [shapes(), ...sampleFacts().panels!.map((p) => panelDrawing(sampleFacts(), p))];

test("arcs stand for curves: far fewer points, nowhere farther than 0.1 mm, corners kept", () => {
  for (const drawing of drawings) {
    const curved = withArcs(drawing);
    expect(curved.strokes).toHaveLength(drawing.strokes.length);
    curved.strokes.forEach((s, i) => {
      const was = drawing.strokes[i]!;
      expect([s.layer, s.closed]).toEqual([was.layer, was.closed]);
      const off = apart(
        flattened(s.points, s.bulges ?? [], s.closed),
        s.closed ? was.points : [...was.points, ...was.points.slice(1, -1).reverse()],
      );
      if (s.closed) expect(off).toBeLessThanOrEqual(ARC_TOLERANCE);
    });
    const [a, b] = [extents(drawing), extents(curved)];
    for (const k of [0, 1] as const) {
      expect(Math.abs(a.min[k] - b.min[k])).toBeLessThanOrEqual(ARC_TOLERANCE);
      expect(Math.abs(a.max[k] - b.max[k])).toBeLessThanOrEqual(ARC_TOLERANCE);
    }
  }
  const [lens, ring] = withArcs(shapes()).strokes;
  // 80 pieces of one arc become one; the wave of 2 mm every 50 mm is no arc of 0.1 mm.
  expect(lens!.points.length).toBeLessThan(80);
  expect(lens!.points[0]).toEqual(shapes().strokes[0]!.points[0]);
  expect(4 * Math.atan(lens!.bulges![0]!)).toBeCloseTo(0.8, 3);
  expect(ring!.points.length).toBeLessThan(5);
  expect(Math.min(...ring!.bulges!)).toBeLessThan(0);
});

test("dxf-parser reads the bulges of both dialects, the straight files have none", () => {
  const curved = withArcs(drawings[0]!);
  for (const write of [writeDxfR12, writeDxf2000]) {
    const cuts = (d: Drawing) =>
      new DxfParser().parseSync(write(d))!.entities.filter((e) => e.layer === "CUT") as unknown as {
        vertices: { x: number; y: number; bulge?: number }[];
      }[];
    cuts(curved).forEach((cut, i) => {
      const s = curved.strokes.filter((q) => q.layer === "cut")[i]!;
      cut.vertices.forEach((v, k) => {
        expect(v.bulge ?? 0).toBeCloseTo(s.bulges?.[k] ?? 0, 8);
      });
    });
    expect(cuts(drawings[0]!).every((c) => c.vertices.every((v) => !v.bulge))).toBe(true);
  }
});

test("SVG arcs turn the right way: their radius and sweep give the same curve", () => {
  const curved = withArcs(drawings[0]!);
  const text = writeSvg(curved);
  const arcs = [...text.matchAll(/([\d.]+ [\d.]+) A ([\d.]+) \2 0 0 ([01]) ([\d.]+ [\d.]+)/g)];
  expect(arcs.length).toBeGreaterThan(1);
  const wanted = curved.strokes.flatMap((s) => (s.bulges ?? []).filter((b) => b !== 0));
  expect(text.match(/ A /g)).toHaveLength(wanted.length);
  // The first cut begins with its arc of 5 m, counter-clockwise with y up: sweep 0 with y down.
  const first = arcs.find((m) => Math.abs(Number(m[2]) - 5000) < 5)!;
  expect(first[3]).toBe("0");
});

const skipped = hasEzdxf ? "" : " (skipped: this Python has no ezdxf)";
test.skipIf(!hasEzdxf)(`ezdxf flattens them to the straight outlines within 0.1 mm, audit clean${skipped}`, () => {
  const folder = mkdtempSync(join(tmpdir(), "arcs-"));
  for (const [name, write] of [
    ["r12", writeDxfR12],
    ["2000", writeDxf2000],
  ] as const) {
    drawings.forEach((d, i) => {
      writeFileSync(join(folder, `${name}-${i}.dxf`), write(withArcs(d)));
    });
  }
  const script = [
    "import sys, json, glob, os, ezdxf",
    "out = {}",
    // Pieces as lines and arcs, arcs cut up to 0.005 mm; a path would turn them into splines, which are not exact.
    "def points(e):",
    "  for p in e.virtual_entities():",
    "    if p.dxftype() == 'LINE': yield [p.dxf.start.x, p.dxf.start.y]; yield [p.dxf.end.x, p.dxf.end.y]",
    "    else:",
    "      run = [[v.x, v.y] for v in p.flattening(0.005)]",
    "      yield from run if not out_ or abs(run[0][0] - out_[-1][0]) + abs(run[0][1] - out_[-1][1]) < 0.01 else run[::-1]",
    "for f in glob.glob(sys.argv[1] + '/*.dxf'):",
    "  d = ezdxf.readfile(f); a = d.audit(); m = d.modelspace(); cuts = []",
    "  for e in m.query('POLYLINE LWPOLYLINE'):",
    "    if e.dxf.layer != 'CUT': continue",
    "    first = next(iter(e.vertices)).dxf.location if e.dxftype() == 'POLYLINE' else e[0]",
    "    out_ = [[first[0], first[1]]]",
    "    for p in points(e): out_.append(p)",
    "    cuts.append(out_)",
    "  out[os.path.basename(f)] = {'bad': len(a.errors) + len(a.fixes), 'cuts': cuts}",
    "print(json.dumps(out))",
  ].join("\n");
  const run = spawnSync(PYTHON, ["-c", script, folder], { encoding: "utf8", maxBuffer: 1 << 28 });
  expect(run.stderr).toBe("");
  const seen = JSON.parse(run.stdout) as Record<string, { bad: number; cuts: Vec2[][] }>;
  expect(Object.keys(seen)).toHaveLength(2 * drawings.length);
  for (const [file, { bad, cuts }] of Object.entries(seen)) {
    const straight = drawings[Number(/-(\d+)\./.exec(file)![1])]!.strokes.filter((s) => s.layer === "cut");
    expect([bad, cuts.length], file).toEqual([0, straight.length]);
    cuts.forEach((cut, i) => {
      expect(apart(cut, straight[i]!.points), file).toBeLessThanOrEqual(ARC_TOLERANCE);
    });
  }
});
