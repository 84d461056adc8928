// What a gauge, a tape and a survey read in a state of the rig.
import type { FactsMove, Turnbuckle } from "../../records/rig.ts";
import { buildTriangleRoom, measureLink, measureTriangle } from "../../structure/elements.ts";
import { vertexAt } from "../../surface/measures.ts";
import type { Vec3 } from "../../surface/surface.ts";
import type { Rig, RigCable } from "../build/buildRig.ts";

/** Positions and slack lengths: all that readings depend on. */
export interface Places {
  x: Float64Array<ArrayBuffer>;
  L0: Float64Array<ArrayBuffer>;
}

/** A member with what it may be held to: an adjuster, or a cable or stay by its most pulled link. */
export interface Member {
  id: string;
  /** Its links; the one with the greatest force speaks for it. */
  firstLink: number;
  links: number;
  /** kN; null where the job gives none */
  capacity: number | null;
}

/** All members that carry a capacity or might: adjusters first, then cables and stays, in the rig's order. */
export function listMembers(rig: Rig): Member[] {
  return [
    ...rig.adjusters.map((a) => ({ id: a.id, firstLink: a.link, links: 1, capacity: a.capacity })),
    ...rig.cables.map((c) => ({
      id: c.id,
      firstLink: c.firstLink,
      links: c.nodes.length - 1,
      capacity: c.capacity,
    })),
  ];
}

/** Most pulled link of a member. */
export function findTautest(rig: Rig, state: Places, member: { firstLink: number; links: number }): number {
  let best = member.firstLink;
  let most = -1;
  for (let k = member.firstLink; k < member.firstLink + member.links; k++) {
    const { force } = measureLink(rig.structure, state.x, state.L0, k);
    if (force > most) {
      most = force;
      best = k;
    }
  }
  return best;
}

/** Forces of the adjusters in a state, kN. */
export function readAdjusters(rig: Rig, state: Places): number[] {
  return rig.adjusters.map((a) => measureLink(rig.structure, state.x, state.L0, a.link).force);
}

/** Greatest link force of a cable, kN. */
export function measureCable(rig: Rig, state: Places, cable: RigCable): number {
  const tautest = findTautest(rig, state, { firstLink: cable.firstLink, links: cable.nodes.length - 1 });
  return measureLink(rig.structure, state.x, state.L0, tautest).force;
}

/** Forces of all adjusters, cables and masts in a state, by id, kN; masts are pressed, so below 0. */
export function readForces(rig: Rig, state: Places): Record<string, number> {
  const out: Record<string, number> = {};
  const forces = readAdjusters(rig, state);
  rig.adjusters.forEach((a, i) => {
    out[a.id] = forces[i];
  });
  for (const c of rig.cables) out[c.id] = measureCable(rig, state, c);
  for (const s of rig.struts) out[s.id] = measureLink(rig.structure, state.x, state.L0, s.link).force;
  return out;
}

/** Where the near end of each adjuster stands, by adjuster, m. */
export function readCorners(rig: Rig, state: Places): Record<string, Vec3> {
  const surface = { xyz: state.x, tri: new Uint32Array(0) };
  return Object.fromEntries(rig.adjusters.map((a) => [a.id, vertexAt(surface, a.nodes[0])]));
}

/** Share of the cloth, by flat area, that is wrinkled or slack in a state. */
export function measureSlackCloth(rig: Rig, state: Places): number {
  const { structure: s } = rig;
  const room = buildTriangleRoom();
  let [slack, whole] = [0, 0];
  for (let t = 0; t < s.area.length; t++) {
    whole += s.area[t];
    if (measureTriangle(s, state.x, t, room) !== 0) slack += s.area[t];
  }
  return whole > 0 ? slack / whole : 0;
}

/** What a tape reads between the pins of adjuster i: its stretched length, or its own length where it hangs slack. */
export function measurePins(rig: Rig, state: Places, i: number): number {
  const a = rig.adjusters[i];
  const link = measureLink(rig.structure, state.x, state.L0, a.link);
  return link.force > 0 ? link.length : state.L0[a.link];
}

/** Thread in the body at each threaded end of a turnbuckle this long pin to pin, mm; null where the job does not say. */
export function measureEngaged(t: Turnbuckle, pins: number): number | null {
  if (t.engagement === undefined) return null;
  const out = t.longest - pins;
  return t.engagement + (t.ends === "single" ? out : out / 2);
}

/** What adjuster i has left to turn in a state, and how much of its thread holds. @units mm */
export function measureTravel(rig: Rig, state: Places, i: number) {
  const { turnbuckle } = rig.adjusters[i];
  const pins = 1000 * measurePins(rig, state, i);
  return {
    toShorten: pins - turnbuckle.shortest,
    toLengthen: turnbuckle.longest - pins,
    engaged: measureEngaged(turnbuckle, pins),
  };
}

/**
 * Of members with forces, the one nearest what it may carry: share = force / (limit · its breaking force or capacity), 1 at the
 * limit. Each is judged by its own capacity; those without one only where no member has any, by force, with share 0.
 */
export function pickGreatest(
  members: readonly Member[],
  forces: ArrayLike<number>,
  limit: number,
): FactsMove["greatest"] {
  let greatest = { id: "", kN: 0, share: 0 };
  members.forEach(({ id, capacity }, i) => {
    const kN = forces[i];
    const share = capacity === null ? 0 : kN / (limit * capacity);
    if (greatest.id === "" || share > greatest.share || (share === greatest.share && kN > greatest.kN))
      greatest = { id, kN, share };
  });
  return greatest;
}

/** The member nearest its limit in a state. */
export function findGreatest(rig: Rig, state: Places, limit: number): FactsMove["greatest"] {
  const members = listMembers(rig);
  const forces = members.map((m) => measureLink(rig.structure, state.x, state.L0, findTautest(rig, state, m)).force);
  return pickGreatest(members, forces, limit);
}

/** The one nearer its limit of two. */
export function pickHigher(a: FactsMove["greatest"], b: FactsMove["greatest"]): FactsMove["greatest"] {
  return b.share > a.share || (b.share === a.share && b.kN > a.kN) ? b : a;
}
