// A line of text in the order it is read on paper: letters that run from right to left stand so, numbers and other words among them do not.
// Every line is one from left to right, as the sheets are.
import bidiFactory from "bidi-js";

/** Unicode bidirectional algorithm. @source UAX #9 */
const bidi = bidiFactory();

/** Letters that run from right to left, and the digits that go with them: the blocks of their scripts. */
const TURNED = /[\u0590-\u08ff\ufb1d-\ufdff\ufe70-\ufeff\u{10800}-\u{10fff}\u{1e800}-\u{1efff}]/u;

/** A part of a line that runs one way. */
export interface LineRun {
  /** In the order of speech, brackets turned where the run is. */
  text: string;
  /** Whether it runs from right to left. */
  turned: boolean;
}

/** Marks that set a name apart from its surroundings; none are in a line before. */
const [APART, AGAIN] = ["\u2068", "\u2069"];

/** Whether a text holds letters that run from right to left. */
export function isTurned(text: string): boolean {
  return TURNED.test(text);
}

/** The line with each of the names set apart, so that a number that follows a name does not become part of it. */
function withNamesApart(line: string, names: readonly string[]): string {
  let [out, at] = ["", 0];
  while (at < line.length) {
    const name = names.find((n) => line.startsWith(n, at));
    out += name === undefined ? line[at] : `${APART}${name}${AGAIN}`;
    at += name?.length ?? 1;
  }
  return out;
}

/** The parts of a line from left to right. @shape names: turned ones that the line may hold, the longest first */
export function lineRuns(line: string, names: readonly string[] = []): LineRun[] {
  if (!TURNED.test(line)) return [{ text: line, turned: false }];
  const set = withNamesApart(line, names);
  const embedded = bidi.getEmbeddingLevels(set, "ltr");
  const { levels } = embedded;
  const mirrored = bidi.getMirroredCharactersMap(set, levels);
  const runs: LineRun[] = [];
  let last = -1;
  for (const i of bidi.getReorderedIndices(set, embedded)) {
    const turned = levels[i] % 2 === 1;
    const letter = mirrored.get(i) ?? set[i];
    if (letter === APART || letter === AGAIN) continue;
    const run = runs.at(-1);
    if (run && levels[i] === levels[last] && i === last + (turned ? -1 : 1)) {
      run.text = turned ? letter + run.text : run.text + letter;
    } else runs.push({ text: letter, turned });
    last = i;
  }
  return runs;
}
