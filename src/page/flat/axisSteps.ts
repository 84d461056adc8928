// Where an axis of numbers is ruled: at round numbers.

/** From 0 by steps of 1, 2 or 5 times a power of ten, at most six of them, up to the greatest; most > 0. */
export function axisSteps(most: number): number[] {
  const power = 10 ** Math.floor(Math.log10(most / 3));
  const step = [1, 2, 5, 10].map((k) => k * power).find((s) => most / s <= 6) ?? most;
  return Array.from({ length: Math.floor(most / step + 1e-9) + 1 }, (_, i) => i * step);
}
