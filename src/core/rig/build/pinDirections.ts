// Where the far pins of adjusters lie beside the line in which the form pulls: a little off is a caution, on the cloth's side a stop.
import type { Finding } from "../../problem.ts";
import type { RigInput } from "../rigInput.ts";

/** Angle off the pull from which on a pin is a caution, and at which the corner can no longer go taut, degrees. */
const limits = { off: 3, behind: 90 };

/** An adjuster with its near and its far node. */
interface PinnedLink {
  id: string;
  anchor: string;
  nodes: readonly [number, number];
}

interface PinAngle {
  id: string;
  anchor: string;
  angle: number;
}

/** Angle between the form's pull and the way to the far pin, degrees; adjusters at corners only. @shape xyz 3 a node */
function measureAngles(
  input: Pick<RigInput, "form">,
  xyz: ArrayLike<number>,
  adjusters: readonly PinnedLink[],
): PinAngle[] {
  const pulls = new Map(input.form.reactions.map((r) => [r.anchor, r.force]));
  return adjusters.flatMap(({ id, anchor, nodes: [near, far] }): PinAngle[] => {
    const pull = pulls.get(anchor);
    if (!pull) return [];
    const way = [0, 1, 2].map((k) => xyz[3 * far + k] - xyz[3 * near + k]);
    const cos = way.reduce((sum, q, k) => sum - q * pull[k], 0) / (Math.hypot(...way) * Math.hypot(...pull));
    return [{ id, anchor, angle: (Math.acos(Math.min(1, Math.max(-1, cos))) * 180) / Math.PI }];
  });
}

/** Pins on the cloth's side of their corner: no length makes it taut, so that the rig is not worked out. */
export function findPinsBehind(
  input: Pick<RigInput, "form">,
  xyz: ArrayLike<number>,
  adjusters: readonly PinnedLink[],
): Finding[] {
  return measureAngles(input, xyz, adjusters).flatMap(({ id, anchor, angle }): Finding[] => {
    if (angle < limits.behind) return [];
    return [
      {
        code: "pin-behind",
        level: "stop",
        station: "rig",
        where: id,
        value: angle,
        limit: limits.behind,
        text: `${id}: its far pin lies on the cloth's side of ${anchor}, ${angle.toFixed(0)}° off the line of the form's pull; the corner cannot go taut. The rig is not worked out; the cloth can be cut`,
        remedy:
          "give the pin's place outside the corner (anchors.support, survey): a wrong sign or two names exchanged are the usual cause",
        basis: "an adjuster only pulls",
      },
    ];
  });
}

/** Pins off the line of the pull, as cautions. */
export function findPinsOff(
  input: Pick<RigInput, "form">,
  xyz: ArrayLike<number>,
  adjusters: readonly PinnedLink[],
): Finding[] {
  return measureAngles(input, xyz, adjusters).flatMap(({ id, angle }): Finding[] => {
    if (angle <= limits.off) return [];
    return [
      {
        code: "pin-direction",
        level: "caution",
        station: "rig",
        where: id,
        value: angle,
        limit: limits.off,
        text: `the far pin of ${id} lies ${angle.toFixed(1)}° off the line of the form's pull`,
        remedy: "move the pin into the line of pull, or let the form be found with the pin where it is",
        basis: "own argument: the corner would move until it lines up",
      },
    ];
  });
}
