// Where the names over the surface stand: at their places, or a little off them where a grip, another name or the side of the drawing is
// in the way.
import { shortName } from "../parts/shortName.ts";
import type { Model } from "./buildModel.ts";
import type { Project } from "./scene.ts";

/** Half height of a name, and of a grip, px. */
const HALF_NAME = 9;
const HALF_GRIP = 10;
/** Half width of a letter, and what is added to a name on either side, px. */
const HALF_LETTER = 3.6;
const PAD = 5;
/** Letters of a name shown over the surface. */
const NAME = 24;

/** What is written for a name. */
export const writtenName = (id: string) => shortName(id, NAME);

interface Box {
  x: number;
  y: number;
  halfWide: number;
  halfHigh: number;
}

/** Ways off its place a name may give, in its half size and a grip's together: up and down, then sideways. */
const WAYS = [
  [0, 0],
  [0, -1],
  [0, 1],
  [1, 0],
  [-1, 0],
  [2, 0],
  [-2, 0],
] as const;

const meets = (a: Box, b: Box) =>
  Math.abs(a.x - b.x) < a.halfWide + b.halfWide && Math.abs(a.y - b.y) < a.halfHigh + b.halfHigh;

/**
 * Middles of the names, in order; the first wins where two would overlap, and one that finds no room is left out. `wide`: of the drawing.
 * @shape names id as written and place on the drawing, spots middles of grips -> one place or null for each name
 * @units px, y down
 */
export function findPlaces(
  names: readonly { id: string; x: number; y: number }[],
  spots: readonly { x: number; y: number }[],
  wide = Number.POSITIVE_INFINITY,
): ({ x: number; y: number } | null)[] {
  const taken: Box[] = spots.map(({ x, y }) => ({ x, y, halfWide: HALF_GRIP, halfHigh: HALF_GRIP }));
  return names.map(({ id, x, y }) => {
    const halfWide = HALF_LETTER * id.length + PAD;
    // moved inwards so far that it is not cut off at a side; what is turned out of sight is not brought back
    const seen = x >= 0 && x <= wide;
    const held = (at: number) => (seen ? Math.max(Math.min(at, wide - halfWide), halfWide) : at);
    for (const [u, v] of WAYS) {
      const box: Box = {
        x: held(held(x) + u * (halfWide + HALF_GRIP + 1)),
        y: y + v * (HALF_NAME + HALF_GRIP + 1),
        halfWide,
        halfHigh: HALF_NAME,
      };
      if (taken.some((other) => meets(box, other))) continue;
      taken.push(box);
      return { x: box.x, y: box.y };
    }
    return null;
  });
}

/** Moves the names to where their places are drawn, clear of the grips. */
export function placeNames(
  box: HTMLElement | null,
  labels: Model["labels"],
  project: Project,
  spots: readonly { x: number; y: number }[],
): void {
  if (box === null) return;
  const places = findPlaces(
    labels.map(({ id, at }) => ({ id: writtenName(id), ...project(at) })),
    spots,
    project.wide,
  );
  places.forEach((place, i) => {
    const element = box.children[i];
    if (!(element instanceof HTMLElement)) return;
    element.hidden = place === null;
    if (place !== null)
      element.style.transform = `translate(-50%, -50%) translate(${place.x.toFixed(1)}px, ${place.y.toFixed(1)}px)`;
  });
}
