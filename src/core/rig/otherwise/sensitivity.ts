// What errors of making and setting out do to the final forces, to first order, and how fine each must be for forces to stay
// within a tenth. Source: tangent at the finished state; own. Errors as usual on site (common practice): 5 mm, 10 mm, 0.2 %.
import type { FactsSensitivity } from "../../records/rig.ts";
import { measureLink } from "../../structure/elements.ts";
import type { EquilibriumSolver } from "../../structure/equilibrium.ts";
import { measureChange, measureResponse, type Otherwise } from "../../structure/influence.ts";
import type { Rig } from "../build/buildRig.ts";
import { findTautest, listMembers } from "../stages/readState.ts";
import type { RigState } from "../stages/solveLengths.ts";
import { growCloth } from "./warmRig.ts";

/** Errors looked at: a cable too long and an anchor out of place, m; cloth cut too small, share. */
export const lookedAt = { cable: 0.005, anchor: 0.01, compensation: 0.002 };

/** Share of their force by which members may be off. */
const allowed = 0.1;

/** First-order changes are measured over this part of the error, so that no member goes slack on the way. */
const part = 1e-3;

/** One line for each cable too long, each adjuster's pin too far in, and the whole cloth cut too small. */
export function measureSensitivity(rig: Rig, solver: EquilibriumSolver, finished: RigState): FactsSensitivity[] {
  const { x, L0 } = finished;
  const members = listMembers(rig);
  const read = members.map((m) => findTautest(rig, finished, m));
  const forces = read.map((k) => measureLink(rig.structure, x, L0, k).force);
  const links = rig.adjusters.map((a) => a.link);
  const response = measureResponse(solver, x, L0, links, { links: read, nodes: [] });
  const line = (what: FactsSensitivity["what"], id: string, change: number, delta: number[]): FactsSensitivity => {
    let greatest = { id: "", share: 0 };
    members.forEach((m, i) => {
      const share = forces[i] > 0 ? Math.abs(delta[i]) / forces[i] : 0;
      if (share > greatest.share) greatest = { id: m.id, share };
    });
    return {
      what,
      id,
      change,
      unit: what === "compensation" ? "%" : "mm",
      forces: Object.fromEntries(members.map((m, i) => [m.id, delta[i]])),
      greatest,
      tolerance: greatest.share > 0 ? Math.abs(change) * (allowed / greatest.share) : null,
    };
  };
  const measure = (change: Otherwise) => measureChange(solver, x, L0, change, read).map((d) => d / part);
  const cables = rig.cables.map((c) => {
    const longer = L0.slice();
    const end = c.firstLink + c.nodes.length - 1;
    const whole = L0.subarray(c.firstLink, end).reduce((sum, l) => sum + l, 0);
    for (let k = c.firstLink; k < end; k++) longer[k] *= 1 + (part * lookedAt.cable) / whole;
    return line("cable-length", c.id, 1000 * lookedAt.cable, measure({ structure: rig.structure, x, L0: longer }));
  });
  const anchors = rig.adjusters.map((a, j) =>
    line(
      "anchor",
      a.id,
      1000 * lookedAt.anchor,
      members.map((_, i) => lookedAt.anchor * response.forces[i * links.length + j]),
    ),
  );
  const share = -part * lookedAt.compensation;
  const smaller = growCloth(rig.structure, { warp: share, weft: share });
  const cloth = line("compensation", "cloth", 100 * lookedAt.compensation, measure({ structure: smaller, x, L0 }));
  return [...cables, ...anchors, cloth];
}
