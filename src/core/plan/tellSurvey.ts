// What surveyed pins mean before the rig is solved: how far each lies from where it was drawn, and what cannot be helped by turning.
import { type Finding, PlanError } from "../problem.ts";
import type { FoundForm } from "../records/foundForm.ts";
import type { Job } from "../records/job.ts";
import type { AdjusterDecision } from "../records/rig.ts";
import { drawPin } from "../rig/build/rigNodes.ts";
import { measureDistance, vertexAt } from "../surface/measures.ts";
import type { Vec3 } from "../surface/surface.ts";

/** Way of an anchor on a clamped edge from which the cloth's stress must be looked at again, m: 10 mm on a clamped roof of 16 m is a fifth of its prestress. */
const clampedWay = 0.005;

/** Way beyond which a surveyed pin is taken for another point, another axis or another unit, m. */
const strayed = 1;

/**
 * One finding for each surveyed pin.
 * @throws PlanError survey-anchor: an anchor the form has not; survey-place: a place too far from the drawn one
 */
export function tellSurvey(
  drawn: { form: FoundForm; supports: Record<string, Vec3> },
  job: Job,
  adjusters: readonly AdjusterDecision[],
): Finding[] {
  const { form, supports } = drawn;
  return job.survey.map(({ anchor: id, at }): Finding => {
    const anchor = form.anchors.find((a) => a.id === id);
    if (!anchor)
      throw new PlanError(
        "survey-anchor",
        `survey: the form has no anchor "${id}"; it has ${form.anchors.map((a) => a.id).join(", ") || "none"}`,
        id,
      );
    const adjuster = adjusters.find((a) => a.anchor === id);
    const corner = vertexAt(form.surface, anchor.vertex);
    const pull = form.reactions.find((r) => r.anchor === id)?.force;
    const place = adjuster && pull ? drawPin({ supports }, id, corner, pull) : corner;
    const way = measureDistance(place, at);
    const mm = (1000 * way).toFixed(0);
    if (way > strayed)
      throw new PlanError(
        "survey-place",
        `survey: ${id} is surveyed ${way.toFixed(2)} m from where it is drawn, more than ${strayed} m: another point, axis or unit`,
        id,
        { way },
      );
    const finding = { station: "rig" as const, where: id, value: 1000 * way, basis: "own argument" };
    if (adjuster) {
      const further = 1000 * (measureDistance(corner, at) - measureDistance(corner, place));
      return {
        ...finding,
        code: "survey-pin",
        level: "note",
        limit: null,
        text: `${id}: its far pin stands ${mm} mm from where it is drawn, ${Math.abs(further).toFixed(0)} mm ${further < 0 ? "nearer" : "further out"}; lengths, forces and travel of ${adjuster.name} are those to the surveyed pin`,
        remedy: "nothing to do where reach and travel hold",
      };
    }
    if (!anchor.isolated && way > clampedWay)
      return {
        ...finding,
        code: "survey-clamped",
        level: "caution",
        limit: 1000 * clampedWay,
        text: `${id} on a clamped edge stands ${mm} mm from where it is drawn; no turnbuckle takes that up, and the stress of the cloth changes with it`,
        remedy:
          "before cutting: put the surveyed edge into the mesh and plan anew; after cutting: set the edge right, or let the engineer judge the stress as built",
      };
    return {
      ...finding,
      code: "survey-anchor",
      level: "note",
      limit: null,
      text: `${id} stands ${mm} mm from where it is drawn; the finished state and the moves are those with it there`,
      remedy: "nothing to do where targets and travel hold",
    };
  });
}
