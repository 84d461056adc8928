// What can be decided about the pulling up: stages, limit, temperature, turnbuckles.
import { setReadingError } from "../../actions/rig/setReadingError.ts";
import { setRigFigure } from "../../actions/rig/setRigFigure.ts";
import { setStages } from "../../actions/rig/setStages.ts";
import { NumberField, TextField } from "../../parts/Fields.tsx";
import { readEntry } from "../../parts/readEntry.ts";
import { act, notify } from "../../store/bookStore.ts";
import { useBook } from "../../store/useBook.ts";
import { AdjusterDecisions } from "./AdjusterDecisions.tsx";
import { ProofDecisions } from "./ProofDecisions.tsx";

const percent = (shares: readonly number[]) => shares.map((s) => String(Number((100 * s).toPrecision(6)))).join(" ");

/** Shares from a line such as "10 30 60 100"; null where a word is no number. */
function readStages(text: string): number[] | null {
  const read = text
    .split(/[\s;]+/)
    .filter((w) => w !== "")
    .map((word) => readEntry(word, "%"));
  return read.every((n) => typeof n === "number") ? read.map((n) => Number((n / 100).toPrecision(12))) : null;
}

/** The decisions of the leaf. */
export function RigDecisions() {
  const given = useBook((b) => b.project?.job.rig);
  const rig = useBook((b) => b.job?.rig);
  return (
    <>
      <TextField
        label="Stages, % of the target"
        path="rig.stages"
        given={given?.stages !== undefined}
        value={percent(given?.stages ?? rig?.stages ?? [])}
        hint="rising, the last one 100"
        onChange={(text) => {
          const value = text === undefined ? undefined : readStages(text);
          if (value === null)
            notify("stages", `“${text}” are no stages: numbers with spaces between, such as 10 30 60 100`, true);
          else act(setStages, { value }, "stages");
        }}
      />
      <NumberField
        label="No part beyond"
        path="rig.limit"
        given={given?.limit !== undefined}
        value={given?.limit ?? rig?.limit ?? null}
        factor={0.01}
        unit="% of its capacity"
        hint="the weakest of cable, turnbuckle, fitting, anchor"
        onChange={(value) => act(setRigFigure, { key: "limit", value }, "limit of erection")}
      />
      <NumberField
        label="Reference temperature"
        path="rig.temperature"
        given={given?.temperature !== undefined}
        value={given?.temperature ?? rig?.temperature ?? null}
        unit="°C"
        onChange={(value) => act(setRigFigure, { key: "temperature", value }, "reference temperature")}
      />
      <NumberField
        label="A reading may be off by"
        path="rig.reading.error"
        given={given?.reading?.error !== undefined}
        value={given?.reading?.error ?? rig?.readingError ?? null}
        factor={0.01}
        unit="%"
        onChange={(value) => act(setReadingError, { value }, "error of readings")}
      />
      <NumberField
        label="Expansion by heat of what the anchors stand on"
        path="rig.frameAlpha"
        given={given?.frameAlpha !== undefined}
        value={given?.frameAlpha ?? rig?.frameAlpha ?? null}
        factor={1e-6}
        unit="10⁻⁶/K"
        hint="0: the anchors stay where they are; steel about 12"
        onChange={(value) => act(setRigFigure, { key: "frameAlpha", value }, "expansion of the frame")}
      />
      <ProofDecisions />
      <AdjusterDecisions />
    </>
  );
}
