// The words of a sheet as lines of text: for those who do not see it, and to copy a figure from. Pure.

/** A run of letters as it stands on a sheet. */
export interface PlacedWords {
  text: string;
  /** The six numbers of a PDF text matrix: directions along and across the line, and where it begins, points from below left. */
  at: number[];
  /** Along its line, points. */
  width: number;
}

/** Runs whose feet are this near lie on one line, share of the height of letters. */
const SAME_LINE = 0.4;
/** A gap this wide parts two columns rather than two words, share of the height of letters. */
const COLUMN = 1.2;

interface Run {
  text: string;
  x: number;
  y: number;
  end: number;
  height: number;
}

/** Lines from the top down, each from left to right; what stands upright or askew on the sheet comes after, a line for each run. */
export function readWords(all: readonly PlacedWords[]): string[] {
  const level: Run[] = [];
  const turned: string[] = [];
  for (const { text, at, width } of all) {
    if (text.trim() === "") continue;
    const [a, b, , , x, y] = at;
    if (Math.abs(b) > 1e-3 * Math.abs(a) || a < 0) turned.push(text.trim());
    else level.push({ text, x, y, end: x + width, height: a });
  }
  level.sort((p, q) => q.y - p.y || p.x - q.x);
  const lines: Run[][] = [];
  for (const run of level) {
    const line = lines.at(-1);
    const first = line?.[0];
    if (line !== undefined && first !== undefined && first.y - run.y < SAME_LINE * Math.min(first.height, run.height))
      line.push(run);
    else lines.push([run]);
  }
  return [...lines.map(joinLine), ...turned];
}

function joinLine(line: Run[]): string {
  let text = "";
  let end = Number.NEGATIVE_INFINITY;
  for (const run of [...line].sort((p, q) => p.x - q.x)) {
    const gap = run.x - end;
    if (text !== "") text += gap > COLUMN * run.height ? "  " : gap > 0.1 * run.height ? " " : "";
    text += run.text.trim();
    end = run.end;
  }
  return text;
}
