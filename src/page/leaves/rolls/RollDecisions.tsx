// What can be decided about rolls and nesting.
import { addRoll } from "../../actions/rolls/addRoll.ts";
import { removeRoll } from "../../actions/rolls/removeRoll.ts";
import { setNest } from "../../actions/rolls/setNest.ts";
import { setPin } from "../../actions/rolls/setPin.ts";
import { setRoll } from "../../actions/rolls/setRoll.ts";
import { NumberField, SwitchField, TextField } from "../../parts/Fields.tsx";
import { act } from "../../store/bookStore.ts";
import { useBook } from "../../store/useBook.ts";

const FIGURES = [
  { key: "width", label: "Width over all", unit: "mm", factor: 1 },
  { key: "selvedge", label: "Selvedge, each side", unit: "mm", factor: 1 },
  { key: "length", label: "Length on the roll", unit: "m", factor: 1000 },
] as const;

function Stock() {
  const rolls = useBook((b) => b.project?.job.rolls);
  const job = useBook((b) => b.job);
  const fabric = job?.fabric;
  return (
    <div className="group" data-path="rolls">
      <h3>Rolls in store</h3>
      {rolls === undefined && (
        <p className="hint">
          None listed: as many as needed are taken, {fabric?.rollWidth ?? "–"} mm wide
          {fabric ? `, of ${fabric.id}` : ""}.
        </p>
      )}
      {rolls?.map((roll, index) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: a roll is known by its place in the job
        <fieldset key={index} className="edge">
          <legend>{roll.id ?? `R${index + 1}`}</legend>
          {FIGURES.map(({ key, label, unit, factor }) => (
            <NumberField
              key={key}
              label={label}
              path={`rolls[${index}].${key}`}
              given={roll[key] !== undefined}
              value={roll[key] ?? job?.rolls?.[index]?.[key] ?? null}
              unit={unit}
              factor={factor}
              onChange={(value) =>
                act(setRoll, { index, key, value }, `${label.toLowerCase()} of ${roll.id ?? index + 1}`)
              }
            />
          ))}
          <TextField
            label="Batch"
            path={`rolls[${index}].batch`}
            given={typeof roll.batch === "string"}
            value={roll.batch ?? ""}
            none="none"
            onChange={(value) => act(setRoll, { index, key: "batch", value }, `batch of ${roll.id ?? index + 1}`)}
          />
          <button type="button" onClick={() => act(removeRoll, { index }, `roll ${roll.id ?? index + 1} removed`)}>
            Remove roll
          </button>
        </fieldset>
      ))}
      <button
        type="button"
        onClick={() =>
          act(addRoll, { width: fabric?.rollWidth ?? 3000, length: fabric?.rollLength ?? 50_000 }, "roll added")
        }
      >
        Add a roll
      </button>
    </div>
  );
}

function Pins() {
  const pins = useBook((b) => b.project?.job.nest?.pins);
  return (
    <div className="group" data-path="nest.pins">
      <h3>Pinned panels</h3>
      {!pins?.length && (
        <p className="hint">None. Drag a panel on the roll, or move it with the arrow keys, and it stays there.</p>
      )}
      {pins?.map((p) => (
        <p key={p.panel} className="row">
          {p.panel} on {p.roll} at {(p.x / 1000).toFixed(2)} m
          <button type="button" onClick={() => act(setPin, { panel: p.panel, place: null }, `${p.panel} let go`)}>
            Let go
          </button>
        </p>
      ))}
    </div>
  );
}

/** The decisions of the leaf. */
export function RollDecisions() {
  const given = useBook((b) => b.project?.job.nest);
  const nest = useBook((b) => b.job?.nest);
  const number = (
    key: "gap" | "steps" | "seconds" | "bite",
    label: string,
    unit: string,
    none?: string,
    hint?: string,
  ) => (
    <NumberField
      label={label}
      path={`nest.${key}`}
      given={given?.[key] !== undefined && given[key] !== null}
      value={given?.[key] ?? nest?.[key] ?? null}
      unit={unit}
      {...(none === undefined ? {} : { none })}
      {...(hint === undefined ? {} : { hint })}
      onChange={(value) => act(setNest, { key, value }, label.toLowerCase())}
    />
  );
  return (
    <>
      <Stock />
      {number("gap", "Gap between cuts", "mm")}
      {number("bite", "Longest piece the table takes", "mm", "no limit")}
      <SwitchField
        label="Panels may lie turned by 180°"
        path="nest.turn"
        given={given?.turn !== undefined}
        value={given?.turn ?? nest?.turn ?? true}
        onChange={(value) => act(setNest, { key: "turn", value }, "turning panels")}
      />
      {number(
        "steps",
        "Steps of search",
        "",
        undefined,
        "more steps may save cloth; the same steps give the same layout",
      )}
      {number("seconds", "At most", "s", "no limit")}
      <Pins />
    </>
  );
}
