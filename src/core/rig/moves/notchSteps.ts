// Small changes of rounded lengths: one notch at each of a few adjusters at once. Lengths are rounded by trying them all again and again.

/** Adjusters that are changed together, each with its way, 1 or -1 notch. */
export type NotchStep = readonly (readonly [adjuster: number, way: number])[];

/** Adjusters up to which three are changed against each other; beyond, pairs must do. */
export const triedByThree = 10;

/** All changes of up to `most` of n adjusters by a notch each, fewest adjusters first. */
export function listSteps(n: number, most: number): NotchStep[] {
  const out: NotchStep[] = [];
  const grow = (step: NotchStep, from: number) => {
    for (let i = from; i < n; i++)
      for (const way of [1, -1]) {
        const longer = [...step, [i, way] as const];
        out.push(longer);
        if (longer.length < most) grow(longer, i + 1);
      }
  };
  grow([], 0);
  return out.sort((p, q) => p.length - q.length);
}
