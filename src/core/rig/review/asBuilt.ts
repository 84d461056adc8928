// What the assembled roof really carries at its finished state, beside what was intended.
import type { FactsAsBuilt } from "../../records/rig.ts";
import { buildTriangleRoom, measureTriangle } from "../../structure/elements.ts";
import type { Rig } from "../build/buildRig.ts";
import { readForces } from "../stages/readState.ts";
import type { RigState } from "../stages/solveLengths.ts";

/** As-built stress (kN/m, weighted by flat area), greatest way of a node from the form (m), forces (kN). */
export function measureAsBuilt(rig: Rig, state: RigState): FactsAsBuilt {
  const { structure: s } = rig;
  let displacementMax = 0;
  for (let v = 0; v < state.x.length; v += 3)
    displacementMax = Math.max(
      displacementMax,
      Math.hypot(state.x[v] - s.xyz[v], state.x[v + 1] - s.xyz[v + 1], state.x[v + 2] - s.xyz[v + 2]),
    );
  const room = buildTriangleRoom();
  const figures = [0, 1].map(() => ({ min: Infinity, mean: 0, max: -Infinity }));
  let area = 0;
  let slack = 0;
  for (let t = 0; t < s.area.length; t++) {
    const taut = measureTriangle(s, state.x, t, room) === 0;
    area += s.area[t];
    if (!taut) slack += s.area[t];
    figures.forEach((f, k) => {
      f.min = Math.min(f.min, room.stress[k]);
      f.max = Math.max(f.max, room.stress[k]);
      f.mean += s.area[t] * room.stress[k];
    });
  }
  for (const f of figures) f.mean /= area;
  return {
    displacementMax,
    forces: readForces(rig, state),
    stress: { warp: figures[0], weft: figures[1] },
    compressedShare: slack / area,
  };
}
