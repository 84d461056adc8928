// The rig at another temperature: free strain on slack lengths and flat shapes. Anchors stay where they are, or move with a frame
// that warms alike: all of them away from their middle.
import type { Structure } from "../../structure/structure.ts";
import type { Rig } from "../build/buildRig.ts";

/** Expansion of adjusters and masts, carbon steel, 1/K (EN 1993-1-11:2006 3.3, from memory). */
export const steelExpansion = 12e-6;

/** 1/K of every cable in the order of rig.cables, and of the cloth. */
export interface Expansion {
  cables: number[];
  cloth: number;
  /** Of the frame that carries the anchors; 0: they stay. */
  frame: number;
}

/** Slack lengths at a temperature `step` K above the reference, m. */
export function warmLengths(
  rig: Rig,
  lengths: Float64Array,
  expansion: Expansion,
  step: number,
): Float64Array<ArrayBuffer> {
  const L0 = Float64Array.from(lengths);
  for (const a of rig.adjusters) L0[a.link] *= 1 + steelExpansion * step;
  for (const s of [...rig.struts, ...rig.braces]) L0[s.link] *= 1 + steelExpansion * step;
  rig.cables.forEach((c, k) => {
    for (let i = 0; i + 1 < c.nodes.length; i++) L0[c.firstLink + i] *= 1 + expansion.cables[k] * step;
  });
  return L0;
}

/** Positions with the held nodes where the frame takes them at `step` K above the reference, m. */
export function warmAnchors(
  rig: Rig,
  x: Float64Array<ArrayBuffer>,
  expansion: Expansion,
  step: number,
): Float64Array<ArrayBuffer> {
  const y = x.slice();
  if (expansion.frame === 0 || step === 0) return y;
  const { held } = rig.structure;
  for (let k = 0; k < 3; k++) {
    let [sum, count] = [0, 0];
    for (let c = k; c < x.length; c += 3) if (held[c]) [sum, count] = [sum + x[c], count + 1];
    for (let c = k; c < x.length; c += 3) if (held[c]) y[c] += (x[c] - sum / count) * expansion.frame * step;
  }
  return y;
}

/** The structure with its cloth grown by a share both ways: warmer, or cut larger. */
export function growCloth(structure: Structure, share: { warp: number; weft: number }): Structure {
  const { warp, weft } = share;
  return {
    ...structure,
    shape: structure.shape.map((g, i) => g / (1 + (i % 2 === 0 ? warp : weft))),
    area: structure.area.map((a) => a * (1 + warp) * (1 + weft)),
  };
}
