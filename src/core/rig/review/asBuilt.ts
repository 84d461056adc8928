// What the assembled roof really carries at its finished state, beside what was intended. Judges nothing: reviewBuilt.ts does.
import type { FactsAsBuilt } from "../../records/rig.ts";
import { buildTriangleRoom, measureTriangle } from "../../structure/elements.ts";
import type { Rig } from "../build/buildRig.ts";
import type { RigInput } from "../rigInput.ts";
import { measureSlackCloth, type Places, readForces } from "../stages/readState.ts";

/** Share of the roof's size that a point may move where the job sets no limit. own: sight, not strength */
const MOVED_SHARE = 1 / 500;

const WAYS = ["warp", "weft"] as const;

/** Longest diagonal of the box round the cloth, m. */
function measureSize(rig: Rig): number {
  const { tri, xyz } = rig.structure;
  const low = [Infinity, Infinity, Infinity];
  const high = [-Infinity, -Infinity, -Infinity];
  for (const v of tri)
    for (let k = 0; k < 3; k++) {
      low[k] = Math.min(low[k], xyz[3 * v + k]);
      high[k] = Math.max(high[k], xyz[3 * v + k]);
    }
  return Math.hypot(...high.map((h, k) => h - low[k]));
}

function measureDisplacement(rig: Rig, x: Float64Array): number {
  const { xyz } = rig.structure;
  let most = 0;
  for (let v = 0; v < x.length; v += 3)
    most = Math.max(most, Math.hypot(x[v] - xyz[v], x[v + 1] - xyz[v + 1], x[v + 2] - xyz[v + 2]));
  return most;
}

/** Stress (kN/m, weighted by flat area, error against the intended one), greatest way of a node from the form (m), forces (kN). */
export function measureAsBuilt(rig: Rig, state: Places, input: Pick<RigInput, "form" | "proof">): FactsAsBuilt {
  const { structure: s } = rig;
  const intended = input.form.stress;
  const room = buildTriangleRoom();
  const figures = WAYS.map(() => ({ min: Infinity, mean: 0, max: -Infinity, rmsError: 0 }));
  const own = new Map<string, { area: number; error: [number, number] }>();
  let area = 0;
  for (let t = 0; t < s.area.length; t++) {
    measureTriangle(s, state.x, t, room);
    const a = s.area[t];
    area += a;
    const panel = own.get(rig.panelOf[t]) ?? { area: 0, error: [0, 0] };
    own.set(rig.panelOf[t], panel);
    panel.area += a;
    WAYS.forEach((way, k) => {
      const f = figures[k];
      // What both layers carry together where seams lap.
      const stress = s.layers[t] * room.stress[k];
      f.min = Math.min(f.min, stress);
      f.max = Math.max(f.max, stress);
      f.mean += a * stress;
      panel.error[k] += a * (stress - intended[way]) ** 2;
    });
  }
  figures.forEach((f, k) => {
    f.mean /= area;
    let error = 0;
    for (const panel of own.values()) error += panel.error[k];
    f.rmsError = Math.sqrt(error / area);
  });
  const forces: Record<string, number> = Object.create(null);
  for (const a of rig.adjusters) forces[a.id] = a.target;
  for (const c of rig.cables) forces[c.id] = c.force;
  const panels: Record<string, number> = Object.create(null);
  for (const [id, p] of own)
    panels[id] = Math.max(...WAYS.map((way, k) => Math.sqrt(p.error[k] / p.area) / intended[way]));
  const moved = input.proof.moved === null ? MOVED_SHARE * measureSize(rig) : input.proof.moved / 1000;
  return {
    displacementMax: measureDisplacement(rig, state.x),
    forces: readForces(rig, state),
    stress: { warp: figures[0], weft: figures[1] },
    compressedShare: measureSlackCloth(rig, state),
    intended: { stress: { ...intended }, forces },
    limits: { ...input.proof, moved },
    panels,
  };
}
