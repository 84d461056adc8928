// A place in space: three numbers in metres, z up. Handed on when all three are there; emptied, the default holds again.
import { useId, useState } from "react";
import { readEntry, refuseEntry } from "./readEntry.ts";

type Point = [number, number, number];

const AXES = ["x", "y", "z"] as const;

function readPoint(texts: readonly string[]): Point | undefined | string {
  const read = texts.map((text) => readEntry(text, "m"));
  const wrong = read.indexOf(null);
  if (wrong >= 0) return `${AXES[wrong]}: ${refuseEntry(texts[wrong], "m")}`;
  const [x, y, z] = read;
  if (typeof x === "number" && typeof y === "number" && typeof z === "number") return [x, y, z];
  if (read.every((n) => n === undefined)) return undefined;
  const missing = AXES.filter((_, k) => read[k] === undefined).join(" and ");
  return `${missing} is missing: give all three of x, y and z, in m, or empty all three`;
}

/** The field. */
export function PointField(props: {
  label: string;
  path: string;
  given: boolean;
  value: readonly number[] | null;
  hint?: string | undefined;
  onChange: (value: Point | undefined) => void;
}) {
  const { label, path, given, value, hint, onChange } = props;
  const id = useId();
  const shown = AXES.map((_, k) => (value === null ? "" : String(value[k])));
  const [texts, setTexts] = useState<string[] | null>(null);
  const [fault, setFault] = useState<string | null>(null);
  const commit = () => {
    if (texts === null) return;
    const read = readPoint(texts);
    if (typeof read === "string") return setFault(read);
    setFault(null);
    setTexts(null);
    if (texts.join() !== shown.join()) onChange(read);
  };
  return (
    <div
      className="field"
      data-path={path}
      role="group"
      aria-labelledby={id}
      onBlur={(e) => !e.currentTarget.contains(e.relatedTarget) && commit()}
    >
      <span id={id} className="label">
        {label}
        {!given && <span className="taken"> default</span>}
      </span>
      <div className="entry point">
        {AXES.map((axis, k) => (
          <label key={axis}>
            {axis}
            <input
              inputMode="decimal"
              autoComplete="off"
              aria-label={`${label}, ${axis}`}
              aria-invalid={fault !== null}
              data-taken={texts === null || undefined}
              value={(texts ?? shown)[k]}
              onChange={(e) => setTexts((texts ?? shown).with(k, e.target.value))}
              onKeyDown={(e) => {
                if (e.key === "Enter") commit();
                if (e.key === "Escape") {
                  setTexts(null);
                  setFault(null);
                }
              }}
            />
          </label>
        ))}
        <span className="unit">m</span>
      </div>
      {hint !== undefined && <p className="hint">{hint}</p>}
      {fault !== null && (
        <p className="fault" role="alert">
          {fault}
        </p>
      )}
    </div>
  );
}
