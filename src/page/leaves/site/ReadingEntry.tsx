// One reading: at what, how much, by whom. Says at once whether a force lies in the window the schedule gives.
import { useState } from "react";
import { addReading } from "../../actions/site/addReading.ts";
import type { RigStep } from "../../flat/rigSteps.ts";
import { writeTime } from "../../parts/clock.ts";
import { readEntry, refuseEntry } from "../../parts/readEntry.ts";
import { act, bookStore } from "../../store/bookStore.ts";
import type { Reading } from "../../store/project.ts";
import { useBook } from "../../store/useBook.ts";
import { expectReading, judgeReading, tellExpected } from "./expectReading.ts";

type Kind = "force" | "frequency" | "position";

const EMPTY = { force: "", frequency: "", freeLength: "", mass: "", x: "", y: "", z: "", temperature: "" };

interface Entry {
  key: keyof typeof EMPTY;
  label: string;
  unit: string;
}

const ENTRIES: Record<Kind, Entry[]> = {
  force: [{ key: "force", label: "Force", unit: "kN" }],
  frequency: [
    { key: "frequency", label: "Frequency", unit: "Hz" },
    { key: "freeLength", label: "Free length", unit: "m" },
    { key: "mass", label: "Mass", unit: "kg/m" },
  ],
  position: [
    { key: "x", label: "x", unit: "m" },
    { key: "y", label: "y", unit: "m" },
    { key: "z", label: "z", unit: "m" },
  ],
};

const TEMPERATURE: Entry = { key: "temperature", label: "Temperature", unit: "°C" };

/** A reading from what was typed; a sentence where it is none. */
function readReading(kind: Kind, texts: typeof EMPTY, id: string, by: string): Reading | string {
  if (id === "") return "Choose what was read.";
  const read: Record<string, number | null> = {};
  for (const { key, label, unit } of [...ENTRIES[kind], TEMPERATURE]) {
    const value = readEntry(texts[key], unit);
    if (value === null) return `${label}: ${refuseEntry(texts[key], unit)}.`;
    read[key] = value ?? null;
  }
  const missing = ENTRIES[kind].find((e) => read[e.key] === null);
  if (missing !== undefined) return `${missing.label} is missing: type it in ${missing.unit}.`;
  const negative = kind !== "position" && ENTRIES[kind].find((e) => (read[e.key] ?? 0) < 0);
  if (negative)
    return `${negative.label} is ${read[negative.key]} ${negative.unit}: it cannot be below 0. Read again, or type it without the minus.`;
  const of = (key: string, wanted: Kind) => (kind === wanted ? (read[key] ?? null) : null);
  const { x, y, z } = read;
  return {
    time: writeTime(),
    by,
    id,
    force: of("force", "force"),
    frequency: of("frequency", "frequency"),
    freeLength: of("freeLength", "frequency"),
    massPerMetre: of("mass", "frequency"),
    temperature: read.temperature ?? null,
    at: kind === "position" ? [x ?? 0, y ?? 0, z ?? 0] : null,
  };
}

/** What the schedule expects to be read there, and at once whether what is typed lies within it. */
function Window({ step, id, text }: { step: RigStep | null; id: string; text: string }) {
  const facts = useBook((b) => b.facts);
  const expected = facts && step && expectReading(facts, step, id);
  if (!expected) return <p className="window">The schedule gives no force for this here.</p>;
  const value = readEntry(text, "kN");
  const verdict = typeof value === "number" ? judgeReading(expected, value) : null;
  return (
    <p className="window" aria-live="polite">
      {tellExpected(expected)}
      {verdict !== null && <strong className={verdict.fine ? "fine" : "off"}> {verdict.words}</strong>}
    </p>
  );
}

/** Why there is nowhere to read at. */
function tellNothing(kind: Kind, planned: boolean): string {
  if (!planned) return "Where readings are taken stands here once the job is planned.";
  return kind === "position"
    ? "This plan has no anchors whose position is measured."
    : "This plan has nothing to read a force at.";
}

function PlacePicker({ kind, id, onPick }: { kind: Kind; id: string; onPick: (id: string) => void }) {
  const facts = useBook((b) => b.facts);
  const rig = facts?.rig;
  const ids =
    kind === "position"
      ? (facts?.form?.anchors ?? []).slice(0, 60).map((a) => a.id)
      : [...(rig?.adjusters ?? []).map((a) => a.id), ...(facts?.cables ?? []).map((c) => c.id)];
  return (
    <fieldset className="picker big">
      <legend>Read at</legend>
      {ids.map((one) => (
        <button type="button" key={one} aria-pressed={one === id} onClick={() => onPick(one)}>
          {one}
        </button>
      ))}
      {ids.length === 0 && <p className="hint">{tellNothing(kind, facts !== null)}</p>}
    </fieldset>
  );
}

/** The form. */
export function ReadingEntry({ step }: { step: RigStep | null }) {
  // A roof without adjusters and cables has places to survey, no forces to read.
  const [kind, setKind] = useState<Kind>(() => {
    const { facts } = bookStore.getState();
    return (facts?.rig?.adjusters.length ?? 0) + (facts?.cables?.length ?? 0) > 0 ? "force" : "position";
  });
  const [id, setId] = useState("");
  const [texts, setTexts] = useState(EMPTY);
  const [by, setBy] = useState("");
  const [fault, setFault] = useState("");
  const submit = (e: React.FormEvent) => {
    e.preventDefault();
    const reading = readReading(kind, texts, id, by.trim());
    if (typeof reading === "string") return setFault(reading);
    setFault("");
    act(addReading, { reading: { ...reading, step: step?.step ?? 0 } }, `reading of ${id}`);
    setTexts({ ...EMPTY, temperature: texts.temperature });
  };
  const entry = ({ key, label, unit }: Entry) => (
    <label key={key} className="large">
      <span>{label}</span>
      <input
        inputMode="decimal"
        autoComplete="off"
        aria-label={`${label}, ${unit}`}
        value={texts[key]}
        onChange={(e) => setTexts({ ...texts, [key]: e.target.value })}
      />
      <span className="unit">{unit}</span>
    </label>
  );
  return (
    <form className="reading" onSubmit={submit} noValidate>
      <fieldset className="picker big">
        <legend>What was measured</legend>
        {(["force", "frequency", "position"] as const).map((k) => (
          <button type="button" key={k} aria-pressed={k === kind} onClick={() => setKind(k)}>
            {k === "frequency" ? "frequency of a free span" : k}
          </button>
        ))}
      </fieldset>
      <PlacePicker kind={kind} id={id} onPick={setId} />
      {kind === "force" && id !== "" && <Window step={step} id={id} text={texts.force} />}
      <div className="entries">
        {ENTRIES[kind].map(entry)}
        {entry(TEMPERATURE)}
        <label className="large">
          <span>Read by</span>
          <input autoComplete="off" value={by} onChange={(e) => setBy(e.target.value)} />
        </label>
      </div>
      {fault !== "" && (
        <p className="fault" role="alert">
          {fault}
        </p>
      )}
      <button type="submit" className="main">
        Write it into the log
      </button>
    </form>
  );
}
