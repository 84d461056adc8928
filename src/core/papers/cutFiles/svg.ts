// Cut files as SVG at true size: width and height in mm, the viewBox the same numbers, so one unit is one millimetre in every
// reader whatever pixel it believes in. One group a layer; y is flipped here and nowhere else.
// Source: SVG recommendation, units and viewport chapters (check-values 8.2).

import type { Vec2 } from "../../records/facts.ts";
import { arcRadius } from "../drawing/bulge.ts";
import { type Drawing, extents, LAYER_NAMES, LAYERS, type Layer, type Stroke } from "../drawing/drawing.ts";
import { decimal } from "../words/decimal.ts";

const MARGIN = 20;
// Told apart by width and by the name of the group as well as by colour.
const PENS: Readonly<Record<Layer, string>> = {
  bed: 'stroke="#777777" stroke-width="0.5"',
  mark: 'stroke="#0000ff" stroke-width="1"',
  text: 'stroke="none"',
  cut: 'stroke="#ff0000" stroke-width="1.5"',
};
const INKS: Readonly<Record<Layer, string>> = { bed: "#777777", mark: "#0000ff", text: "#007700", cut: "#ff0000" };

function escaped(text: string): string {
  return text.replace(/[&<>"']/g, (c) => `&#${c.charCodeAt(0)};`);
}

const n3 = (value: number) => decimal(value, 3);

/** Straight pieces and arcs; with y down a counter-clockwise arc runs against the positive angle. */
function pathText(stroke: Stroke, at: (p: Vec2) => string): string {
  const { points, bulges, closed } = stroke;
  const pieces = points.map((p, i) => {
    if (i === 0) return `M ${at(p)}`;
    return pieceText(points[i - 1], p, bulges?.[i - 1] ?? 0, at);
  });
  const last = points.length - 1;
  if (closed && bulges?.[last]) pieces.push(pieceText(points[last], points[0], bulges[last], at));
  return `${pieces.join(" ")}${closed ? " Z" : ""}`;
}

function pieceText(a: Vec2, b: Vec2, bulge: number, at: (p: Vec2) => string): string {
  if (bulge === 0) return `L ${at(b)}`;
  const r = n3(arcRadius(a, b, bulge));
  return `A ${r} ${r} 0 0 ${bulge > 0 ? 0 : 1} ${at(b)}`;
}

/** The drawing as an SVG file. */
export function writeSvg(drawing: Drawing): string {
  const { min, max } = extents(drawing);
  const left = min[0] - MARGIN;
  const top = max[1] + MARGIN;
  const width = n3(max[0] - min[0] + 2 * MARGIN);
  const height = n3(max[1] - min[1] + 2 * MARGIN);
  const px = (x: number) => n3(x - left);
  const py = (y: number) => n3(top - y);
  const lines = [
    '<?xml version="1.0" encoding="UTF-8"?>',
    `<svg xmlns="http://www.w3.org/2000/svg" width="${width}mm" height="${height}mm" viewBox="0 0 ${width} ${height}">`,
    `<title>${escaped(drawing.name)}</title>`,
  ];
  for (const layer of LAYERS) {
    lines.push(`<g id="${LAYER_NAMES[layer]}" fill="none" ${PENS[layer]}>`);
    for (const s of drawing.strokes) {
      if (s.layer !== layer) continue;
      lines.push(`<path d="${pathText(s, (p) => `${px(p[0])} ${py(p[1])}`)}"/>`);
    }
    for (const l of drawing.labels) {
      if (l.layer !== layer) continue;
      const turn = `translate(${px(l.at[0])} ${py(l.at[1])}) rotate(${n3(-l.rotation)})`;
      // Capitals of common sans faces stand about 0.72 of the size high: the size that gives the wanted height.
      const size = n3(l.height / 0.72);
      lines.push(
        `<text transform="${turn}" y="${n3(l.height / 2)}" font-family="sans-serif" font-size="${size}" text-anchor="${l.anchor}" fill="${INKS[layer]}" stroke="none">${escaped(l.text)}</text>`,
      );
    }
    lines.push("</g>");
  }
  lines.push("</svg>", "");
  return lines.join("\n");
}
