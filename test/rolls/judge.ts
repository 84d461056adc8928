// The judge of nests in tests: brute force, written apart from the code under test.
import { expect } from "vitest";
import type { NestedRoll, NestPiece } from "../../src/core/records/roll.ts";
import { ringArea } from "../../src/core/surface/ring.ts";

export type Points = [number, number][];

/** The cut outline where it lies. */
export function placedPoints(p: NestPiece, at: { rotation: number; x: number; y: number }): Points {
  const s = at.rotation === 180 ? -1 : 1;
  return Array.from({ length: p.cut.length / 2 }, (_, i) => [s * p.cut[2 * i] + at.x, s * p.cut[2 * i + 1] + at.y]);
}

/** Brute force, written apart from the code under test: all segments against all, and winding of sample points. */
export function oracleGap(a: Points, b: Points): number {
  const inside = (r: Points, [x, y]: [number, number]) => {
    let angle = 0;
    for (let i = 0; i < r.length; i++) {
      const [p, q] = [r[i], r[(i + 1) % r.length]];
      angle += Math.atan2(
        (p[0] - x) * (q[1] - y) - (p[1] - y) * (q[0] - x),
        (p[0] - x) * (q[0] - x) + (p[1] - y) * (q[1] - y),
      );
    }
    return Math.abs(angle) > Math.PI;
  };
  const toSegment = ([x, y]: [number, number], p: [number, number], q: [number, number]) => {
    let best = Infinity;
    const l2 = (q[0] - p[0]) ** 2 + (q[1] - p[1]) ** 2;
    const t = Math.max(0, Math.min(1, ((x - p[0]) * (q[0] - p[0]) + (y - p[1]) * (q[1] - p[1])) / l2));
    best = Math.min(best, Math.hypot(x - p[0] - t * (q[0] - p[0]), y - p[1] - t * (q[1] - p[1])));
    return best;
  };
  const depth = (r: Points, v: [number, number]) =>
    Math.min(...r.map((p, i) => toSegment(v, p, r[(i + 1) % r.length])));
  let gap = Infinity;
  for (const [r, o] of [
    [a, b],
    [b, a],
  ])
    for (let i = 0; i < o.length; i++) {
      const [p, q] = [o[i], o[(i + 1) % o.length]];
      // Points all along the side: a crossing shows as a point that lies deep inside.
      for (let t = 0; t < 1; t += 1 / 64) {
        const v: [number, number] = [p[0] + t * (q[0] - p[0]), p[1] + t * (q[1] - p[1])];
        if (inside(r, v) && depth(r, v) > 0.01) return -1;
      }
      gap = Math.min(gap, depth(r, p));
    }
  return gap;
}

/** Fails where pieces overlap, keep no gap, lie off the cloth, in the trim, on a flaw or another cloth, or a figure of a roll is not true. */
export function judge(rolls: NestedRoll[], pieces: NestPiece[], gap: number): void {
  for (const roll of rolls) {
    const lying = roll.placements.map((at) => ({
      at,
      points: placedPoints(pieces.find((p) => p.id === at.panel)!, at),
    }));
    let reach = 0;
    for (const { points, at } of lying)
      for (const [x, y] of points) {
        reach = Math.max(reach, x);
        expect(x, at.panel).toBeGreaterThan((roll.start ?? 0) - 1e-6);
        expect(x, at.panel).toBeLessThan(roll.length + 1e-6);
        expect(y, at.panel).toBeGreaterThan(-1e-6);
        expect(y, at.panel).toBeLessThan(roll.usableWidth + 1e-6);
      }
    expect(reach).toBeCloseTo(roll.used, 6);
    expect(reach + (roll.remnant ?? 0)).toBeCloseTo(roll.length, 6);
    for (const { at, points } of lying) {
      const own = pieces.find((p) => p.id === at.panel)!;
      expect([own.fabric, own.batch ?? roll.batch], at.panel).toEqual([roll.fabric, roll.batch]);
      for (const { x, y, length, width } of roll.flaws) {
        const flaw: Points = [
          [x, y],
          [x + length, y],
          [x + length, y + width],
          [x, y + width],
        ];
        expect(oracleGap(points, flaw), `${at.panel} and a flaw`).toBeGreaterThanOrEqual(0);
      }
    }
    for (let i = 0; i < lying.length; i++)
      for (let j = 0; j < i; j++)
        expect(
          oracleGap(lying[i].points, lying[j].points),
          `${lying[i].at.panel} and ${lying[j].at.panel}`,
        ).toBeGreaterThanOrEqual(gap - 0.01);
    const area = lying.reduce((sum, l) => sum + ringArea(Float64Array.from(l.points.flat())), 0);
    expect(roll.utilisation).toBeCloseTo(area / (roll.used * roll.width), 9);
    expect(roll.lowerBound).toBeLessThanOrEqual(roll.used + 1e-6);
    expect(roll.lowerBound).toBeGreaterThanOrEqual(area / roll.width - 1e-6);
  }
}
