// Lines of a chart that run one over the other, as one line that bears all their names.

/** A line of a chart: whose it is, and how high it runs at each place of the axis. */
export interface Trace {
  ids: string[];
  ys: number[];
}

/** Lines nowhere further apart than this are seen as one, px. */
const APART = 1.5;

/** Lines to draw, in the order given; each is drawn as the first of its names runs. @units px */
export function joinTraces(lines: readonly { id: string; ys: readonly number[] }[]): Trace[] {
  const traces: Trace[] = [];
  for (const { id, ys } of lines) {
    const same = traces.find((t) => t.ys.every((y, i) => Math.abs(y - ys[i]) <= APART));
    if (same !== undefined) same.ids.push(id);
    else traces.push({ ids: [id], ys: [...ys] });
  }
  return traces;
}
