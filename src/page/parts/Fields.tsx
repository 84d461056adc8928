// Fields to decide in: a number with its unit, a choice, a line of text, a yes or no. Each shows what holds now and whether
// the job says so or a default; emptied, the default holds again. A change is handed on when the field is left or Enter pressed; Escape takes it back.
// An input says by `data-taken` that it holds nothing the job does not have.
import { useId, useState } from "react";
import { readEntry, refuseEntry } from "./readEntry.ts";

interface Common {
  label: string;
  /** Path in the job: findings lead here by it. */
  path: string;
  /** Whether the job itself gives the value. */
  given: boolean;
  /** Nothing holds where the job gives nothing, so no default is marked: what stands in the empty field says so. */
  open?: boolean;
  /** What the value does or stands on, in a few words. */
  hint?: string | undefined;
}

/** Marks what a default decides. */
function Taken({ given, open = false }: Pick<Common, "given" | "open">) {
  return given || open ? null : <span className="taken"> default</span>;
}

/** Words longer than this get a line of their own below their label, so that they are not cut off. */
const LONG_WORDS = 22;

function Frame(props: Common & { id: string; fault?: string | null; long?: boolean; children: React.ReactNode }) {
  const { id, label, path, hint, fault, long = false, children } = props;
  return (
    <div className={long ? "field long" : "field"} data-path={path}>
      <label htmlFor={id}>
        {label}
        <Taken {...props} />
      </label>
      <div className="entry">{children}</div>
      {hint !== undefined && (
        <p className="hint" id={`${id}-hint`}>
          {hint}
        </p>
      )}
      {fault && (
        <p className="fault" role="alert">
          {fault}
        </p>
      )}
    </div>
  );
}

/** A number with its unit. `factor`: what is shown times factor is what the job has (per cent: 0.01). */
export function NumberField(
  props: Common & {
    value: number | null;
    unit: string;
    factor?: number;
    none?: string | undefined;
    onChange: (value: number | undefined) => void;
  },
) {
  const { value, unit, factor = 1, none = "", onChange } = props;
  const id = useId();
  const shown = value === null ? "" : String(Number((value / factor).toPrecision(12)));
  const [text, setText] = useState<string | null>(null);
  const [fault, setFault] = useState<string | null>(null);
  const commit = () => {
    if (text === null) return;
    const read = readEntry(text, unit);
    if (read === null) return setFault(refuseEntry(text, unit));
    setFault(null);
    setText(null);
    if (text !== shown) onChange(read === undefined ? undefined : Number((read * factor).toPrecision(15)));
  };
  return (
    <Frame {...props} id={id} fault={fault}>
      <input
        id={id}
        inputMode="decimal"
        autoComplete="off"
        value={text ?? shown}
        placeholder={none}
        aria-describedby={props.hint === undefined ? undefined : `${id}-hint`}
        aria-invalid={fault !== null}
        data-taken={text === null || undefined}
        onChange={(e) => setText(e.target.value)}
        onBlur={commit}
        onKeyDown={(e) => {
          if (e.key === "Enter") commit();
          if (e.key === "Escape") {
            setText(null);
            setFault(null);
          }
        }}
      />
      {unit !== "" && <span className="unit">{unit}</span>}
    </Frame>
  );
}

/** One of several words. */
export function ChoiceField<T extends string>(
  props: Common & { value: T; choices: readonly { value: T; words: string }[]; onChange: (value: T) => void },
) {
  const id = useId();
  return (
    <Frame {...props} id={id} long={props.choices.some((c) => c.words.length > LONG_WORDS)}>
      <select id={id} value={props.value} onChange={(e) => props.onChange(e.target.value as T)}>
        {props.choices.map((c) => (
          <option key={c.value} value={c.value}>
            {c.words}
          </option>
        ))}
      </select>
    </Frame>
  );
}

/** One line of text. */
export function TextField(
  props: Common & { value: string; none?: string | undefined; onChange: (value: string | undefined) => void },
) {
  const { value, onChange } = props;
  const id = useId();
  const [text, setText] = useState<string | null>(null);
  const commit = () => {
    if (text !== null && text !== value) onChange(text.trim() === "" ? undefined : text.trim());
    setText(null);
  };
  return (
    <Frame {...props} id={id}>
      <input
        id={id}
        className="wide"
        autoComplete="off"
        value={text ?? value}
        placeholder={props.none}
        data-taken={text === null || undefined}
        onChange={(e) => setText(e.target.value)}
        onBlur={commit}
        onKeyDown={(e) => {
          if (e.key === "Enter") commit();
          if (e.key === "Escape") setText(null);
        }}
      />
    </Frame>
  );
}

/** Yes or no. */
export function SwitchField(props: Common & { value: boolean; onChange: (value: boolean) => void }) {
  const id = useId();
  const { label, path, given, hint, value, onChange } = props;
  return (
    <div className="field switch" data-path={path}>
      <input id={id} type="checkbox" checked={value} onChange={(e) => onChange(e.target.checked)} />
      <label htmlFor={id}>
        {label}
        <Taken given={given} />
      </label>
      {hint !== undefined && <p className="hint">{hint}</p>}
    </div>
  );
}
