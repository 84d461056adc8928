// What surveyed pins mean before the rig is solved: how far each lies from where it was drawn.
import { type Finding, PlanError } from "../problem.ts";
import type { FoundForm } from "../records/foundForm.ts";
import type { Job } from "../records/job.ts";
import type { AdjusterDecision } from "../records/rig.ts";
import { drawPin } from "../rig/build/rigNodes.ts";
import { measureDistance, vertexAt } from "../surface/measures.ts";
import type { Vec3 } from "../surface/surface.ts";
import { strayed } from "./surveyedEdges.ts";

/**
 * One finding for each surveyed pin or lone anchor.
 * @throws PlanError survey-place: a place too far from the drawn one
 */
export function tellSurvey(
  drawn: { form: FoundForm; supports: Record<string, Vec3> },
  job: Job,
  adjusters: readonly AdjusterDecision[],
): Finding[] {
  const { form, supports } = drawn;
  return job.survey.flatMap(({ anchor: id, at }): Finding[] => {
    const anchor = form.anchors.find((a) => a.id === id);
    // points of clamped edges are told where the form is moved to them
    if (id === undefined || !anchor?.isolated) return [];
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
      return [
        {
          ...finding,
          code: "survey-pin",
          level: "note",
          limit: null,
          text: `${id}: its far pin stands ${mm} mm from where it is drawn, ${Math.abs(further).toFixed(0)} mm ${further < 0 ? "nearer" : "further out"}; lengths, forces and travel of ${adjuster.name} are those to the surveyed pin`,
          remedy: "nothing to do where reach and travel hold",
        },
      ];
    }
    return [
      {
        ...finding,
        code: "survey-anchor",
        level: "note",
        limit: null,
        text: `${id} stands ${mm} mm from where it is drawn; the finished state and the moves are those with it there`,
        remedy: "nothing to do where targets and travel hold",
      },
    ];
  });
}
