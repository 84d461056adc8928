// A piece as the nest sees it in one rotation: its ring with the box at 0, 0, thinned outward-safe where it has very many
// points, and its grown columns. Does not: place. Source: own.
import { isSimpleRing, type PlaneRing, ringArea, ringBox } from "../surface/ring.ts";
import { simplifyRing } from "../surface/simplifyRing.ts";
import { buildColumns, type Columns } from "./columns.ts";
import { risingOrders } from "./slideRoom.ts";

/** A piece in one rotation. */
export interface NestShape {
  rotation: number;
  ring: PlaneRing;
  /** Extents along and across the roll. */
  length: number;
  height: number;
  /** A point of the ring is R·(cut point) − offset. */
  offset: [number, number];
  /** The true outline lies within this of the ring. */
  slack: number;
  /** Points in rising order of x, and of y. */
  rising: [Uint32Array<ArrayBuffer>, Uint32Array<ArrayBuffer>];
  /** Equal keys: equal ring, so what one could not find the other cannot either. */
  key: string;
}

/** Rings with more points than this are thinned before they are searched with. */
const MANY = 320;
/** Shares of the size that thinning begins with, and gives up beyond. */
const FINE = 3e-6;
const COARSE = 2e-3;

/** cos and sin of whole degrees, quarter turns exact. */
function turnOf(degrees: number): [number, number] {
  const d = ((degrees % 360) + 360) % 360;
  const exact: Record<number, [number, number]> = { 0: [1, 0], 90: [0, 1], 180: [-1, 0], 270: [0, -1] };
  return exact[d] ?? [Math.cos((d * Math.PI) / 180), Math.sin((d * Math.PI) / 180)];
}

/** A ring turned about the origin. @units degrees, counter-clockwise */
export function turnRing(ring: PlaneRing, degrees: number): PlaneRing {
  const [c, s] = turnOf(degrees);
  const out = new Float64Array(ring.length);
  for (let i = 0; i < ring.length; i += 2) {
    out[i] = c * ring[i] - s * ring[i + 1];
    out[i + 1] = s * ring[i] + c * ring[i + 1];
  }
  return out;
}

/** Convex hull, counter-clockwise (monotone chain, Andrew 1979). */
export function hullRing(ring: PlaneRing): PlaneRing {
  const points = Array.from({ length: ring.length / 2 }, (_, i) => [ring[2 * i], ring[2 * i + 1]]);
  points.sort((p, q) => p[0] - q[0] || p[1] - q[1]);
  const half = (run: number[][]) => {
    const chain: number[][] = [];
    for (const p of run) {
      while (chain.length > 1) {
        const [a, b] = chain.slice(-2);
        if ((b[0] - a[0]) * (p[1] - a[1]) - (b[1] - a[1]) * (p[0] - a[0]) > 0) break;
        chain.pop();
      }
      chain.push(p);
    }
    return chain.slice(0, -1);
  };
  return Float64Array.from([...half(points), ...half(points.reverse())].flat());
}

/** A ring with at most MANY points, and how far the true one may lie from it; null where that takes more than COARSE. */
function thinWithin(ring: PlaneRing, size: number): { ring: PlaneRing; slack: number } | null {
  if (ring.length / 2 <= MANY) return { ring, slack: 0 };
  for (let within = FINE * size; within < COARSE * size; within *= 3) {
    const thin = simplifyRing(ring, within);
    if (thin.length / 2 <= MANY && isSimpleRing(thin)) return { ring: thin, slack: within };
  }
  return null;
}

/** The ring with few points; of one too ragged for that, its hull, which is thinned with ease. */
function thinRing(ring: PlaneRing): { ring: PlaneRing; slack: number } {
  const box = ringBox(ring);
  const size = Math.hypot(box.x1 - box.x0, box.y1 - box.y0);
  const thin = thinWithin(ring, size);
  if (thin) return thin;
  const hull = hullRing(ring);
  return thinWithin(hull, size) ?? { ring: hull, slack: 0 };
}

/** A piece in one rotation. */
export function buildShape(cut: PlaneRing, rotation: number, key: string): NestShape {
  const turned = turnRing(cut, rotation);
  const box = ringBox(turned);
  const thin = thinRing(turned);
  const ring = thin.ring.map((v, i) => v - (i % 2 === 0 ? box.x0 : box.y0));
  return {
    rotation,
    ring,
    length: box.x1 - box.x0,
    height: box.y1 - box.y0,
    offset: [box.x0, box.y0],
    slack: thin.slack,
    rising: risingOrders(ring),
    key: `${key}/${rotation}`,
  };
}

/** Where the reference point of the cut outline lies when the shape's box begins at x, y. */
export function placementOf(shape: NestShape, x: number, y: number): { x: number; y: number } {
  return { x: x - shape.offset[0], y: y - shape.offset[1] };
}

/** Columns of a shape at 0, 0, grown by the gap it must keep. */
export function searchColumns(shape: NestShape, dx: number, gap: number): Columns {
  return buildColumns(shape.ring, 0, dx, gap);
}

/** Area of a ring whichever way it runs. */
export function clothArea(ring: PlaneRing): number {
  return Math.abs(ringArea(ring));
}
