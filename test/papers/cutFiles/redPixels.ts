// Cut lines of an SVG as another program draws them, beside the outlines they stand for.
import { spawnSync } from "node:child_process";
import { existsSync } from "node:fs";
import { type Drawing, extents } from "../../../src/core/papers/drawing/drawing.ts";
import type { Vec2 } from "../../../src/core/records/facts.ts";

const has = (tool: string) => ["/usr/bin", "/usr/local/bin", "/bin"].some((d) => existsSync(`${d}/${tool}`));
const missing = ["rsvg-convert", "pngtopnm"].filter((tool) => !has(tool));
export const hasRaster = missing.length === 0;
export const rasterReason = hasRaster ? "" : ` (skipped: ${missing.join(", ")} not on this machine)`;
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

function offRun(p: Vec2, run: readonly Vec2[]): number {
  let least = Infinity;
  for (let i = 1; i < run.length; i++) {
    const [a, b] = [run[i - 1]!, run[i]!];
    const d: Vec2 = [b[0] - a[0], b[1] - a[1]];
    const t = Math.max(0, Math.min(1, ((p[0] - a[0]) * d[0] + (p[1] - a[1]) * d[1]) / (d[0] ** 2 + d[1] ** 2 || 1)));
    least = Math.min(least, Math.hypot(p[0] - a[0] - t * d[0], p[1] - a[1] - t * d[1]));
  }
  return least;
}

/**
 * Where the picture of a cut file and the cut lines wanted differ: red that lies on none of them, within one and a half pixels, and
 * lines where nothing is drawn. A line finer than a pixel is drawn thicker, so that it is seen.
 * @shape closed outlines and open slits, mm
 */
export function redFaults(
  svg: string,
  drawing: Drawing,
  outlines: readonly Vec2[][],
  slits: readonly Vec2[][] = [],
): string[] {
  const { min, max } = extents(drawing);
  const width = max[0] - min[0] + 2 * MARGIN;
  const pixel = width / WIDTH;
  const seen = svg.replace(
    'stroke="#ff0000" stroke-width="1.5"',
    `stroke="#ff0000" stroke-width="${Math.max(1.5, pixel)}"`,
  );
  const red = redPixels(seen, width).map(([x, y]): Vec2 => [x + min[0] - MARGIN, max[1] + MARGIN - y]);
  const runs = [...outlines.map((r) => [...r, r[0]!]), ...slits];
  const faults = red
    .filter((p) => Math.min(...runs.map((r) => offRun(p, r))) >= 1.5 * pixel)
    .map((p) => `red at ${p} lies on no cut line`);
  // And the other way: along every line the red is never missing for longer than two pixels.
  const cells = new Set(red.map((p) => `${Math.round(p[0] / (2 * pixel))} ${Math.round(p[1] / (2 * pixel))}`));
  for (const run of runs) {
    for (let i = 1; i < run.length; i++) {
      const [a, b] = [run[i - 1]!, run[i]!];
      const steps = Math.max(2, Math.ceil(Math.hypot(b[0] - a[0], b[1] - a[1]) / (2 * pixel)));
      for (let k = 0; k < steps; k++) {
        const at: Vec2 = [a[0] + (k / steps) * (b[0] - a[0]), a[1] + (k / steps) * (b[1] - a[1])];
        const [x, y] = at.map((v) => Math.round(v / (2 * pixel)));
        const near = [-1, 0, 1].some((dx) => [-1, 0, 1].some((dy) => cells.has(`${x! + dx} ${y! + dy}`)));
        if (!near) faults.push(`nothing is drawn at ${at}`);
      }
    }
  }
  return faults;
}
