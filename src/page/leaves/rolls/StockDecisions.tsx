// The rolls in store: their sizes, the cloth's batch and face, what must be kept clear on them.
import { addRoll } from "../../actions/rolls/addRoll.ts";
import { removeRoll } from "../../actions/rolls/removeRoll.ts";
import { setRoll } from "../../actions/rolls/setRoll.ts";
import { ChoiceField, NumberField, TextField } from "../../parts/Fields.tsx";
import { useNextFocus } from "../../parts/nextFocus.ts";
import { act } from "../../store/bookStore.ts";
import { useBook } from "../../store/useBook.ts";
import { FlawDecisions } from "./FlawDecisions.tsx";

const FIGURES = [
  { key: "width", label: "Width over all", unit: "mm", factor: 1 },
  { key: "selvedge", label: "Selvedge, each side", unit: "mm", factor: 1 },
  { key: "length", label: "Length on the roll", unit: "m", factor: 1000 },
  { key: "start", label: "Trimmed off at the start", unit: "mm", factor: 1 },
] as const;

function Roll({ index, place }: { index: number; place: React.Ref<HTMLFieldSetElement> }) {
  const roll = useBook((b) => b.project?.job.rolls?.[index]);
  const read = useBook((b) => b.job?.rolls?.[index]);
  if (roll === undefined) return null;
  const name = roll.id ?? `R${index + 1}`;
  const path = `rolls[${index}]`;
  return (
    <fieldset ref={place} className="edge" data-path={path}>
      <legend>{name}</legend>
      {FIGURES.map(({ key, label, unit, factor }) => (
        <NumberField
          key={key}
          label={label}
          path={`${path}.${key}`}
          given={roll[key] !== undefined}
          value={roll[key] ?? read?.[key] ?? null}
          unit={unit}
          factor={factor}
          onChange={(value) => act(setRoll, { index, key, value }, `${label.toLowerCase()} of ${name}`)}
        />
      ))}
      <TextField
        label="Batch"
        path={`${path}.batch`}
        given={typeof roll.batch === "string"}
        value={roll.batch ?? ""}
        none="none"
        open
        onChange={(value) => act(setRoll, { index, key: "batch", value }, `batch of ${name}`)}
      />
      <ChoiceField
        label="Face that comes off upward"
        path={`${path}.outerFace`}
        given={roll.outerFace !== undefined}
        value={roll.outerFace ?? read?.outerFace ?? "up"}
        choices={[
          { value: "up", words: "the outer one" },
          { value: "down", words: "the inner one: panels are cut turned over" },
        ]}
        onChange={(value) => act(setRoll, { index, key: "outerFace", value }, `face of ${name}`)}
      />
      <NumberField
        label="Price"
        path={`${path}.price`}
        given={typeof roll.price === "number"}
        value={roll.price ?? null}
        none="not given"
        open
        unit="a m²"
        onChange={(value) => act(setRoll, { index, key: "price", value }, `price of ${name}`)}
      />
      <FlawDecisions roll={index} name={name} />
      <button type="button" onClick={() => act(removeRoll, { index }, `roll ${name} removed`)}>
        Remove roll
      </button>
    </fieldset>
  );
}

/** One group for each roll. */
export function StockDecisions() {
  const rolls = useBook((b) => b.project?.job.rolls);
  const fabric = useBook((b) => b.job?.fabric);
  // of a roll that was just added the width is what is asked next
  const focus = useNextFocus();
  const add = () => {
    focus.ask(String(rolls?.length ?? 0));
    act(addRoll, { width: fabric?.rollWidth ?? 3000, length: fabric?.rollLength ?? 50_000 }, "roll added");
  };
  return (
    <div className="group" data-path="rolls">
      <h3>Rolls in store</h3>
      {rolls === undefined && (
        <p className="hint">
          None listed: as many as needed are taken, {fabric?.rollWidth ?? "–"} mm wide
          {fabric ? `, of ${fabric.id}` : ""}. To take another width, add a roll and change it.
        </p>
      )}
      {rolls?.map((_, index) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: a roll is known by its place in the job
        <Roll key={index} index={index} place={focus.at(String(index))} />
      ))}
      <button type="button" onClick={add}>
        Add a roll
      </button>
    </div>
  );
}
