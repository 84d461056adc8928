// A sail with a guyed mast at each of its high corners, as jobs give it: for the small sail of madeRig.ts.
import type { Job, RigJob } from "../../src/core/records/job.ts";
import type { Vec3 } from "../../src/core/surface/surface.ts";

const heads: Record<string, Vec3> = { "corner-se": [5.697, -4.682, 4.622], "corner-nw": [-5.697, 4.682, 4.622] };

/** The heads as far pins of their corners. */
export const guyAnchors: Job["anchors"] = Object.entries(heads).map(([name, support]) => ({ name, support }));

/** Mast and two stays at each head; way: 1 puts the stays' feet behind the mast, -1 under the sail. */
export function guy(way: 1 | -1): Pick<RigJob, "struts" | "stays"> {
  const places = Object.entries(heads);
  const out = ([x, y]: Vec3) => [Math.sign(x), Math.sign(y)];
  return {
    struts: places.map(([corner, at], i) => {
      const [a, b] = out(at);
      return { name: `mast-${i + 1}`, from: [at[0] + 0.3 * a, at[1] + 0.3 * b, 0] as Vec3, to: corner, EA: 630000 };
    }),
    stays: places.flatMap(([corner, at], i) => {
      const [a, b] = out(at);
      return [
        [3.5, 1.2],
        [1.2, 3.5],
      ].map(([dx, dy], k) => ({
        name: `stay-${2 * i + k + 1}`,
        from: corner,
        to: [at[0] + way * a * dx, at[1] + way * b * dy, 0] as Vec3,
        EA: 25000,
        force: null,
        minBreakingForce: 200,
      }));
    }),
  };
}
