// Flaws of one roll: where no piece may lie.
import { addFlaw, removeFlaw, setFlaw } from "../../actions/rolls/flaws.ts";
import { ChoiceField, NumberField } from "../../parts/Fields.tsx";
import { act } from "../../store/bookStore.ts";
import { useBook } from "../../store/useBook.ts";

const FIGURES = [
  { key: "x", label: "begins", unit: "m", factor: 1000, hint: "along the roll" },
  { key: "y", label: "from the inner selvedge", unit: "mm", factor: 1, hint: undefined },
  { key: "length", label: "is long", unit: "mm", factor: 1, hint: "along the roll" },
  { key: "width", label: "is wide", unit: "mm", factor: 1, hint: undefined },
] as const;

/** The flaws of the roll at a place of the job; `name` as people call it. */
export function FlawDecisions({ roll, name }: { roll: number; name: string }) {
  const flaws = useBook((b) => b.project?.job.rolls?.[roll]?.flaws) ?? [];
  return (
    <div data-path={`rolls[${roll}].flaws`}>
      {flaws.map((f, flaw) => {
        const what = `Flaw ${flaw + 1} of ${name}`;
        const words = `flaw ${flaw + 1} of ${name}`;
        return (
          // biome-ignore lint/suspicious/noArrayIndexKey: a flaw is known by its place in the job
          <div key={flaw} className="flaw" role="group" aria-label={what}>
            {FIGURES.map(({ key, label, unit, factor, hint }) => (
              <NumberField
                key={key}
                label={`${what} ${label}`}
                path={`rolls[${roll}].flaws[${flaw}].${key}`}
                given
                value={f[key]}
                unit={unit}
                factor={factor}
                hint={hint}
                onChange={(value) => act(setFlaw, { roll, flaw, key, value }, words)}
              />
            ))}
            <ChoiceField
              label={`${what} is measured from`}
              path={`rolls[${roll}].flaws[${flaw}].from`}
              given={f.from !== undefined}
              value={f.from ?? "start"}
              choices={[
                { value: "start", words: "the roll's start" },
                { value: "end", words: "the roll's end" },
              ]}
              onChange={(value) => act(setFlaw, { roll, flaw, key: "from", value }, words)}
            />
            <button type="button" onClick={() => act(removeFlaw, { roll, flaw }, `${words} removed`)}>
              Remove flaw {flaw + 1}
            </button>
          </div>
        );
      })}
      <button type="button" onClick={() => act(addFlaw, { roll }, `flaw on ${name}`)}>
        Mark a flaw on {name}
      </button>
    </div>
  );
}
