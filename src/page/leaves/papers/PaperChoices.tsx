// Which papers are written; the words are those of the command line.
import { PAPER_CHOICES, type PaperChoice } from "../../../core/papers/choosePapers.ts";
import { leaveChoice } from "../../keep/paperChoice.ts";
import { SwitchField } from "../../parts/Fields.tsx";
import { bookStore } from "../../store/bookStore.ts";
import { useBook } from "../../store/useBook.ts";

/** All but the zip: what is saved here as one file is one anyway. */
const CHOICES = (Object.keys(PAPER_CHOICES) as PaperChoice[]).filter((c) => c !== "bundle");

function choose(choice: PaperChoice, on: boolean): void {
  const chosen = new Set(bookStore.getState().choice);
  if (on) chosen.add(choice);
  else chosen.delete(choice);
  const next = CHOICES.filter((c) => chosen.has(c));
  leaveChoice(next);
  // what is being written is no longer what is asked for
  bookStore.setState({ choice: next, writing: false, papersFault: null });
}

/** The choice. */
export function PaperChoices() {
  const chosen = useBook((b) => b.choice);
  return (
    <fieldset className="choices">
      <legend>Papers to write</legend>
      {CHOICES.map((c) => (
        <SwitchField
          key={c}
          label={PAPER_CHOICES[c]}
          path={`papers ${c}`}
          given
          value={chosen.includes(c)}
          onChange={(on) => choose(c, on)}
        />
      ))}
    </fieldset>
  );
}

/** The same, folded away under how many are chosen. */
export function FoldedChoices() {
  const chosen = useBook((b) => b.choice);
  return (
    <details className="made">
      <summary>
        Papers to write: {CHOICES.filter((c) => chosen.includes(c)).length} of {CHOICES.length} kinds
      </summary>
      <PaperChoices />
    </details>
  );
}
