// Limits on the way: every member at every step against what it may carry, and what the anchors are pulled with beside the end.
import type { Check, Finding } from "../../problem.ts";
import { measureForces, measureLink } from "../../structure/elements.ts";
import type { Rig } from "../build/buildRig.ts";
import type { RigInput } from "../rigInput.ts";
import { findTautest, listMembers, type Member } from "../stages/readState.ts";
import type { RigState } from "../stages/solveLengths.ts";

/** Share of its limit from which on a member is near it. */
const nearShare = 0.9;

/**
 * How far the pull on an anchor or a mast's foot may be from its finished one on the way: its size, as a share of the finished one;
 * its direction, degrees, once it is more than half of the finished one. own default: foundations are made for the finished pull
 */
export const pullLimits = { over: 1.1, turned: 10, from: 0.5 };

interface Worst {
  member: Member;
  kN: number;
  share: number;
  step: number;
}

/** Greatest share of its own limit each member comes to, over all steps; members without a capacity are left out. */
function findWorst(rig: Rig, states: readonly RigState[], limit: number): Worst[] {
  return listMembers(rig).flatMap((member): Worst[] => {
    const { capacity } = member;
    if (capacity === null) return [];
    let worst: Worst = { member, kN: 0, share: 0, step: 0 };
    states.forEach((state, k) => {
      const { force: kN } = measureLink(rig.structure, state.x, state.L0, findTautest(rig, state, member));
      const share = kN / (limit * capacity);
      if (share > worst.share) worst = { member, kN, share, step: k + 1 };
    });
    return [worst];
  });
}

/** Members past their limit at any step as stops, those near it as cautions. @shape states: after step 1, 2, … */
export function reviewLimits(rig: Rig, states: readonly RigState[], limit: number): Finding[] {
  return findWorst(rig, states, limit).flatMap(({ member: { id }, kN, share, step }): Finding[] => {
    const whole = kN / share;
    const basis = "limit as given in the job";
    if (share > 1)
      return [
        {
          code: "limit-passed",
          level: "stop",
          station: "rig",
          where: id,
          value: kN,
          limit: whole,
          text: `${id} carries ${kN.toFixed(1)} kN after step ${step}; its limit is ${whole.toFixed(1)} kN (${(100 * limit).toFixed(0)} % of its weakest part, ${nameWeakest(rig, id)})`,
          remedy: "take stronger parts or a lower prestress; the engineer decides",
          basis,
        },
      ];
    if (share <= nearShare) return [];
    return [
      {
        code: "limit-near",
        level: "caution",
        station: "rig",
        where: id,
        value: share,
        limit: 1,
        text: `${id} comes to ${(100 * share).toFixed(0)} % of its limit at step ${step}: ${kN.toFixed(1)} of ${whole.toFixed(1)} kN (weakest part: ${nameWeakest(rig, id)})`,
        remedy: "watch its gauge at that step and turn by sixths; nobody in its line",
        basis,
      },
    ];
  });
}

/** Whose capacity a member's limit is. */
function nameWeakest(rig: Rig, id: string): string {
  const adjuster = rig.adjusters.find((a) => a.id === id);
  if (adjuster) return adjuster.weakest ?? "none given";
  const cable = rig.cables.find((c) => c.id === id);
  return cable && cable.capacity !== cable.minBreakingForce ? "its end fitting" : "the rope";
}

/** Held nodes that something hangs on, with the names of it. */
function listSupports(input: RigInput, rig: Rig): Map<number, string[]> {
  const { held } = rig.structure;
  const out = new Map<number, string[]>();
  const add = (node: number, name: string) => {
    if (held[3 * node]) out.set(node, [...(out.get(node) ?? []), name]);
  };
  for (const a of rig.adjusters) add(a.nodes[1], a.id);
  for (const c of rig.cables) {
    if (c.edge === null) for (const v of [c.nodes[0], c.nodes[c.nodes.length - 1]]) add(v, c.id);
  }
  for (const s of rig.struts) for (const v of s.nodes) add(v, s.id);
  for (const a of input.form.anchors) if (a.isolated && !out.has(a.vertex)) add(a.vertex, a.id);
  return out;
}

interface Pull {
  names: string[];
  /** Greatest size over the finished one, and at which step. */
  over: number;
  kN: number;
  finished: number;
  step: number;
  /** Greatest way of its direction, degrees. */
  turned: number;
}

function measurePulls(input: RigInput, rig: Rig, finished: RigState, states: readonly RigState[]): Pull[] {
  const read = (state: RigState) => measureForces(rig.structure, state.x, state.L0).force;
  const [end, way] = [read(finished), states.map(read)];
  const at = (force: ArrayLike<number>, v: number) => [force[3 * v], force[3 * v + 1], force[3 * v + 2]];
  return [...listSupports(input, rig)].flatMap(([v, names]): Pull[] => {
    const last = at(end, v);
    const whole = Math.hypot(...last);
    if (!(whole > 0)) return [];
    const pull: Pull = { names, over: 0, kN: 0, finished: whole, step: 0, turned: 0 };
    way.forEach((force, k) => {
      const now = at(force, v);
      const size = Math.hypot(...now);
      if (size / whole > pull.over) Object.assign(pull, { over: size / whole, kN: size, step: k + 1 });
      if (size < pullLimits.from * whole) return;
      const cos = now.reduce((sum, q, i) => sum + q * last[i], 0) / (size * whole);
      pull.turned = Math.max(pull.turned, (Math.acos(Math.min(1, Math.max(-1, cos))) * 180) / Math.PI);
    });
    return [pull];
  });
}

/** Anchors and feet pulled on the way by more than at the end, or another way: checks against the stated limits, and a caution each. */
export function reviewPulls(
  input: RigInput,
  rig: Rig,
  finished: RigState,
  states: readonly RigState[],
): { findings: Finding[]; checks: Check[] } {
  const pulls = measurePulls(input, rig, finished, states);
  if (pulls.length === 0) return { findings: [], checks: [] };
  const [over, turned] = [Math.max(...pulls.map((p) => p.over)), Math.max(...pulls.map((p) => p.turned))];
  const check = (text: string, value: number, limit: number) =>
    ({ station: "rig", text, value, limit, holds: value <= limit }) as const;
  return {
    checks: [
      check("anchors and feet on the way: greatest pull over the finished one", over, pullLimits.over),
      check(
        "anchors and feet on the way: greatest turn of a pull from its finished line, degrees",
        turned,
        pullLimits.turned,
      ),
    ],
    findings: pulls
      .filter((p) => p.over > pullLimits.over || p.turned > pullLimits.turned)
      .map((p) => ({
        code: "anchor-pull",
        level: "caution",
        station: "rig",
        where: p.names,
        value: p.over > pullLimits.over ? p.over : p.turned,
        limit: p.over > pullLimits.over ? pullLimits.over : pullLimits.turned,
        text: `the anchor of ${p.names.join(", ")} is out of balance on the way: pulled with up to ${p.kN.toFixed(1)} kN (step ${p.step}) where the finished roof pulls with ${p.finished.toFixed(1)} kN, up to ${p.turned.toFixed(0)}° off the finished line`,
        remedy: "the engineer says whether anchor and foundation bear that, or guys it for the time of tensioning",
        basis: "own default: a tenth over the finished pull, 10° off its line",
      })),
  };
}
