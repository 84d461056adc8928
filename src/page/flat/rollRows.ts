// A roll shown like a text: in rows of equal length, read from the left. Pure numbers.

/** One row of a roll: the stretch from..to of it, mm. */
export interface RollRow {
  from: number;
  to: number;
}

/** A kilometre of the narrowest tape still shows as more than a line. */
const MOST = 80;

/** Rows that show `used` mm of roll so that they fill a stage of the given shape (height over width) best. */
export function rollRows(used: number, width: number, shape: number): RollRow[] {
  const length = Math.max(used, width);
  let best = 1;
  let scale = 0;
  for (let n = 1; n <= MOST; n++) {
    const row = length / n;
    const fit = Math.min(1 / row, shape / (n * width * 1.3));
    if (fit > scale * 1.001) {
      scale = fit;
      best = n;
    }
  }
  const row = Math.ceil(length / best / 500) * 500;
  return Array.from({ length: Math.ceil(length / row) }, (_, i) => ({ from: i * row, to: (i + 1) * row }));
}
