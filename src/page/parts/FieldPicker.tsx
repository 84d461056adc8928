// Which field colours the surface.
import { bookStore, type FieldName } from "../store/bookStore.ts";

const WORDS: Record<FieldName, string> = {
  none: "plain",
  residual: "out of balance",
  curvature: "curvature",
  warp: "warp stress as patterned",
  weft: "weft stress as patterned",
  builtWarp: "warp stress as built",
  builtWeft: "weft stress as built",
};

/** A row of buttons, one pressed. */
export function FieldPicker({ fields, value }: { fields: readonly FieldName[]; value: FieldName }) {
  return (
    <fieldset className="picker">
      <legend>Coloured by</legend>
      {fields.map((f) => (
        <button type="button" key={f} aria-pressed={f === value} onClick={() => bookStore.setState({ field: f })}>
          {WORDS[f]}
        </button>
      ))}
    </fieldset>
  );
}
