// SVG cut files as another program draws them: the pixels of a renderer lie where the outlines of the facts lie, and nowhere else.
import { spawnSync } from "node:child_process";
import { existsSync } from "node:fs";
import { expect, test } from "vitest";
import { writeSvg } from "../../../src/core/papers/cutFiles/svg.ts";
import { withArcs } from "../../../src/core/papers/drawing/arcs.ts";
import { extents } from "../../../src/core/papers/drawing/drawing.ts";
import { panelDrawing, rollDrawing } from "../../../src/core/papers/drawing/rollDrawing.ts";
import type { Vec2 } from "../../../src/core/records/facts.ts";
import { sampleFacts } from "../made/sampleFacts.ts";
import { placedCuts } from "./readDxf.ts";

const has = (tool: string) => ["/usr/bin", "/usr/local/bin", "/bin"].some((d) => existsSync(`${d}/${tool}`));
const missing = ["rsvg-convert", "pngtopnm"].filter((tool) => !has(tool));
const there = missing.length === 0;
const reason = there ? "" : ` (skipped: ${missing.join(", ")} not on this machine)`;
const MARGIN = 20;
const WIDTH = 2000;

/** Red pixels of an SVG as rsvg-convert draws it, at their middles in mm of the file. */
function redPixels(svg: string, width: number): Vec2[] {
  const ppm = spawnSync("sh", ["-c", `rsvg-convert -w ${WIDTH} -b white | pngtopnm`], {
    input: svg,
    maxBuffer: 1 << 28,
  });
  const out = ppm.stdout;
  const head = /^P6\s+(\d+)\s+(\d+)\s+255\s/.exec(out.subarray(0, 40).toString("latin1"));
  if (!head) throw new Error(`no picture: ${ppm.stderr}`);
  const [w, h] = [Number(head[1]), Number(head[2])];
  const at = head[0].length;
  const red: Vec2[] = [];
  for (let y = 0; y < h; y++) {
    for (let x = 0; x < w; x++) {
      const [r, g, b] = [0, 1, 2].map((k) => out[at + 3 * (y * w + x) + k]!) as [number, number, number];
      if (r > 200 && g < 230 && b < 230 && r - g > 25 && r - b > 25)
        red.push([((x + 0.5) * width) / w, ((y + 0.5) * width) / w]);
    }
  }
  return red;
}

function offRing(p: Vec2, ring: readonly Vec2[]): number {
  return Math.min(
    ...ring.map((a, i) => {
      const b = ring[(i + 1) % ring.length]!;
      const d: Vec2 = [b[0] - a[0], b[1] - a[1]];
      const t = Math.max(0, Math.min(1, ((p[0] - a[0]) * d[0] + (p[1] - a[1]) * d[1]) / (d[0] ** 2 + d[1] ** 2 || 1)));
      return Math.hypot(p[0] - a[0] - t * d[0], p[1] - a[1] - t * d[1]);
    }),
  );
}

test.skipIf(!there)(`what is drawn red is the cut outline of the facts, all of it and nothing else${reason}`, () => {
  const facts = sampleFacts({ stop: false });
  const cases = [
    { drawing: rollDrawing(facts, facts.rolls![1]!), rings: placedCuts(facts, 1) },
    { drawing: withArcs(panelDrawing(facts, facts.panels![0]!)), rings: [facts.panels![0]!.cut] },
  ];
  for (const { drawing, rings } of cases) {
    const { min, max } = extents(drawing);
    const width = max[0] - min[0] + 2 * MARGIN;
    const red = redPixels(writeSvg(drawing), width).map(([x, y]): Vec2 => [x + min[0] - MARGIN, max[1] + MARGIN - y]);
    const pixel = width / WIDTH;
    expect(red.length).toBeGreaterThan(1500);
    for (const p of red) expect(Math.min(...rings.map((r) => offRing(p, r)))).toBeLessThan(1.5 * pixel);
    // And the other way: along every outline the red is never missing for longer than two pixels.
    const cells = new Set(red.map((p) => `${Math.round(p[0] / (2 * pixel))} ${Math.round(p[1] / (2 * pixel))}`));
    for (const ring of rings) {
      ring.forEach((a, i) => {
        const b = ring[(i + 1) % ring.length]!;
        for (const t of [0, 0.5]) {
          const [x, y] = [a[0] + t * (b[0] - a[0]), a[1] + t * (b[1] - a[1])].map((v) => Math.round(v / (2 * pixel)));
          const near = [-1, 0, 1].some((dx) => [-1, 0, 1].some((dy) => cells.has(`${x! + dx} ${y! + dy}`)));
          expect(near, `nothing drawn at ${a}`).toBe(true);
        }
      });
    }
  }
});
