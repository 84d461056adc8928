// What each panel is meant to carry: strain from the prestress, the permanent part of a tested compensation, where it is taken back.
// Source: facts.md "Strain and stress"; taking back beside rigid parts: common practice.
import { PlanError } from "../../problem.ts";
import type { ClothStiffness } from "../../structure/cloth.ts";
import { measureEngineeringStrain, measureTargetStrain } from "../../structure/cloth.ts";
import type { LocalStrip } from "./localStrip.ts";

/** Two values, along warp and weft. */
export interface WarpWeft {
  warp: number;
  weft: number;
}

/** Decisions about the flattening. */
export interface FlattenOptions {
  /** kN/m; nuWf: weft strain caused by unit warp strain. */
  fabric: { id: string; Ew: number; Ef: number; nuWf: number; G: number };
  /** kN/m */
  prestress: WarpWeft;
  /** Decisions about single panels; warp: degrees from the warp to the strip's axis. */
  panels: Record<string, { batch?: string; warp?: number; target?: WarpWeft }>;
  /** Engineering strain of the whole compensation by batch, or "default". */
  compensation: Record<string, WarpWeft>;
  /** Fade in m; null: not taken back. */
  decompensation: { clamped: number | null; ring: number | null; cable: number | null };
  /** Ids of clamped edges that close on themselves. */
  rings: readonly string[];
  /** The overlap (m) of seams whose second layer carries too; left out or null: one layer everywhere. */
  lap?: { overlap: number; on: "both" | "one" } | null;
}

/** What one panel is meant to carry. */
export interface PanelTarget {
  batch: string | null;
  /** Degrees. */
  turn: number;
  /** kN/m */
  stress: WarpWeft;
  /** Green strain of the stress. */
  green: WarpWeft;
  /** Engineering strain that is elastic, permanent, and both together. */
  elastic: WarpWeft;
  permanent: WarpWeft;
  compensation: WarpWeft;
  decompensated: { side: number; fade: number }[];
}

/** A tested compensation outside this is a slip of the unit or the point. Common practice: −1 … 6 %. */
const TEST_RANGE = [-0.05, 0.2];

/**
 * What a strip's panel is meant to carry.
 * @throws PlanError compensation-range: a tested compensation below −0.05 or above 0.2
 */
export function buildPanelTarget(strip: LocalStrip, d: ClothStiffness, options: FlattenOptions): PanelTarget {
  const own = options.panels[strip.id] ?? {};
  const stress = own.target ?? options.prestress;
  const green = measureTargetStrain(d, stress);
  const elastic = { warp: measureEngineeringStrain(green.warp), weft: measureEngineeringStrain(green.weft) };
  const batch = own.batch ?? null;
  const name = batch !== null && options.compensation[batch] !== undefined ? batch : "default";
  const test = options.compensation[name];
  if (test !== undefined) {
    for (const way of ["warp", "weft"] as const) {
      if (!(test[way] >= TEST_RANGE[0] && test[way] <= TEST_RANGE[1])) {
        throw new PlanError(
          "compensation-range",
          `compensation of ${name}, ${way}, is ${test[way]}: an engineering strain between ${TEST_RANGE[0]} and ${TEST_RANGE[1]} is expected (1 % is 0.01); correct it in the job`,
          `compensation.${name}.${way}`,
          { value: test[way] },
        );
      }
    }
  }
  const compensation = test ?? elastic;
  // (1 + e_test) = (1 + permanent)(1 + e_elastic)
  const permanent =
    test === undefined
      ? { warp: 0, weft: 0 }
      : {
          warp: (1 + test.warp) / (1 + elastic.warp) - 1,
          weft: (1 + test.weft) / (1 + elastic.weft) - 1,
        };
  return {
    batch,
    turn: own.warp ?? 0,
    stress: { ...stress },
    green,
    elastic,
    permanent,
    compensation: { ...compensation },
    decompensated: listDecompensated(strip, options),
  };
}

function listDecompensated(strip: LocalStrip, options: FlattenOptions): { side: number; fade: number }[] {
  const { clamped, ring, cable } = options.decompensation;
  return strip.sides.flatMap((s, side) => {
    const clamp = options.rings.includes(s.id) ? ring : clamped;
    const fade = s.kind === "clamped" ? clamp : s.kind === "cable" ? cable : null;
    return fade === null ? [] : [{ side, fade }];
  });
}

/** Share of its weight that cloth keeps right beside a decompensated side: what does not fit is left to the fade, not to the panel. */
const FADE_WEIGHT = 0.05;

/** @shape strain 3*nT: E_ww, E_ff, 2E_wf; share nT: of its weight, 1 but within a fade */
export interface TargetField {
  strain: Float64Array<ArrayBuffer>;
  share: Float64Array<ArrayBuffer>;
}

/**
 * Intended strain of each triangle: the panel's own, less the component along decompensated sides,
 * which fades with the distance in the flat as ½(1 + cos(π·distance/fade)).
 * Along such a side the cloth is cut as long as it is erected, so the relaxed cloth is longer by its permanent part.
 * @shape xy 2*n, flat points of the relaxed cloth, m
 */
export function buildTargetField(strip: LocalStrip, target: PanelTarget, xy: Float64Array<ArrayBuffer>): TargetField {
  const { tri } = strip;
  const out = new Float64Array(tri.length);
  const weights = new Float64Array(tri.length / 3).fill(1);
  for (let t = 0; t < tri.length; t += 3) {
    let { warp: ww, weft: ff } = target.green;
    let wf = 0;
    const mx = (xy[2 * tri[t]] + xy[2 * tri[t + 1]] + xy[2 * tri[t + 2]]) / 3;
    const my = (xy[2 * tri[t] + 1] + xy[2 * tri[t + 1] + 1] + xy[2 * tri[t + 2] + 1]) / 3;
    for (const { side, fade } of target.decompensated) {
      const near = findNearestPiece(strip.sides[side].vertices, xy, mx, my);
      if (!(near.distance < fade)) continue;
      const { x, y } = near;
      const length = Math.sqrt((x / (1 + target.permanent.warp)) ** 2 + (y / (1 + target.permanent.weft)) ** 2);
      const wanted = (length * length - 1) / 2;
      const now = x * x * ww + 2 * x * y * wf + y * y * ff;
      const share = 0.5 * (1 + Math.cos((Math.PI * near.distance) / fade));
      const change = share * (wanted - now);
      weights[t / 3] *= 1 - (1 - FADE_WEIGHT) * share;
      ww += change * x * x;
      ff += change * y * y;
      wf += change * x * y;
    }
    out[t] = ww;
    out[t + 1] = ff;
    out[t + 2] = 2 * wf;
  }
  return { strain: out, share: weights };
}

/** Distance of (mx, my) from a polyline and the unit direction of its nearest piece. */
function findNearestPiece(
  path: number[],
  xy: Float64Array<ArrayBuffer>,
  mx: number,
  my: number,
): { distance: number; x: number; y: number } {
  let best = Number.POSITIVE_INFINITY;
  let x = 1;
  let y = 0;
  for (let i = 1; i < path.length; i++) {
    const ax = xy[2 * path[i - 1]];
    const ay = xy[2 * path[i - 1] + 1];
    const dx = xy[2 * path[i]] - ax;
    const dy = xy[2 * path[i] + 1] - ay;
    const l2 = dx * dx + dy * dy;
    const s = Math.min(1, Math.max(0, ((mx - ax) * dx + (my - ay) * dy) / l2));
    const d = (ax + s * dx - mx) ** 2 + (ay + s * dy - my) ** 2;
    if (d < best) {
      best = d;
      x = dx / Math.sqrt(l2);
      y = dy / Math.sqrt(l2);
    }
  }
  return { distance: Math.sqrt(best), x, y };
}
