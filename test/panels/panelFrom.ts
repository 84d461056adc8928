// A flat panel made from the points of its sides, without triangles: enough for outlines and marks.
import type { FlatPanel, PanelSide } from "../../src/core/records/flatPanel.ts";

export type Part = { kind: PanelSide["kind"]; id: string; points: [number, number][] };

/** A panel from its sides' points (the last point of a side is the first of the next). */
export function panelFrom(parts: Part[], id = "P1"): FlatPanel {
  const flat: number[] = [];
  const starts: number[] = [];
  for (const part of parts) {
    starts.push(flat.length / 2);
    for (const p of part.points) flat.push(...p);
  }
  const n = flat.length / 2;
  const sides = parts.map((part, k): PanelSide => {
    const vertices = part.points.map((_, i) => starts[k] + i);
    const line = [...vertices, k + 1 < parts.length ? starts[k + 1] : 0];
    let length = 0;
    for (let i = 1; i < line.length; i++)
      length += Math.hypot(
        flat[2 * line[i]] - flat[2 * line[i - 1]],
        flat[2 * line[i] + 1] - flat[2 * line[i - 1] + 1],
      );
    return { kind: part.kind, id: part.id, vertices: line, lengthErected: length / 1000, lengthFlat: length };
  });
  const figures = { min: 0, mean: 0, max: 0, rmsError: 0 };
  const erected = new Float64Array(3 * n);
  for (let v = 0; v < n; v++) erected.set([flat[2 * v] / 1000, flat[2 * v + 1] / 1000, 0], 3 * v);
  return {
    id,
    fabric: "job",
    batch: null,
    surfaceVertex: Uint32Array.from({ length: n }, (_, v) => v),
    erected,
    flat: Float64Array.from(flat),
    tri: new Uint32Array(0),
    axis: { from: [0], to: [1], turn: 0 },
    sides,
    target: { warp: 2, weft: 2 },
    compensation: { warp: 0, weft: 0 },
    permanent: { warp: 0, weft: 0 },
    decompensated: [],
    stress: { warp: figures, weft: figures, compressedShare: 0, warpDeviation: 0 },
  };
}
