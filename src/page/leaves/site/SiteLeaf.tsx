// Site: what does the roof say? Readings typed in on a tablet, with large targets; the log is kept and goes out as a file.

import { setSiteLimit } from "../../actions/site/setSiteLimit.ts";
import { listSteps } from "../../flat/rigSteps.ts";
import { openFiles } from "../../keep/openBook.ts";
import { logFiles, saveFile } from "../../keep/saveFiles.ts";
import { CautionList } from "../../parts/CautionList.tsx";
import { NumberField, TextField } from "../../parts/Fields.tsx";
import { FilePick } from "../../parts/FilePick.tsx";
import { act, bookStore } from "../../store/bookStore.ts";
import { useBook } from "../../store/useBook.ts";
import { LeafFrame } from "../LeafFrame.tsx";
import { Corrections } from "./Corrections.tsx";
import { LogTable } from "./LogTable.tsx";
import { ReadingEntry } from "./ReadingEntry.tsx";
import { SurveyDecisions } from "./SurveyDecisions.tsx";

/** Limits the papers print, by the key they are read under. */
const LIMITS = [
  { key: "windMean", label: "Greatest mean wind (10 min)", unit: "m/s" },
  { key: "windGust", label: "Greatest gust", unit: "m/s" },
  { key: "temperatureLow", label: "Lowest temperature", unit: "°C" },
  { key: "temperatureHigh", label: "Highest temperature", unit: "°C" },
] as const;

function SiteLimits() {
  const site = useBook((b) => b.project?.job.papers?.site);
  return (
    <>
      <p className="hint">
        Set by the engineer of the site. What is left open is printed as “not given: do not start”.
      </p>
      {LIMITS.map(({ key, label, unit }) => (
        <NumberField
          key={key}
          label={label}
          path={`papers.site.${key}`}
          given={site?.[key] !== undefined}
          value={typeof site?.[key] === "number" ? site[key] : null}
          none="not given"
          open
          unit={unit}
          onChange={(value) => act(setSiteLimit, { key, value }, label.toLowerCase())}
        />
      ))}
      <TextField
        label="State that may be left overnight"
        path="papers.site.overnight"
        given={site?.overnight !== undefined}
        value={String(site?.overnight ?? "")}
        none="not given"
        open
        onChange={(value) => act(setSiteLimit, { key: "overnight", value }, "state overnight")}
      />
    </>
  );
}

/** The leaf. */
export function SiteLeaf() {
  const tensioning = useBook((b) => b.facts?.tensioning);
  const stored = useBook((b) => b.project?.log);
  const step = useBook((b) => b.step);
  const log = stored ?? [];
  const readings = log.filter((r) => r.turned === undefined);
  const struck = readings.filter((r) => r.struck).length;
  const steps = tensioning ? listSteps(tensioning) : [];
  const at = Math.min(step, steps.length);
  const now = steps[at - 1] ?? null;
  const stage = tensioning?.stages.find((s) => s.moves.some((m) => m.step === now?.step));
  const go = (i: number) => bookStore.setState({ step: Math.min(Math.max(i, 0), steps.length) });
  return (
    <LeafFrame
      leaf="site"
      station="rig"
      question="What does the roof say?"
      answer={
        readings.length === 0
          ? "No readings yet."
          : `${readings.length} ${readings.length === 1 ? "reading" : "readings"} in the log${struck === 0 ? "" : `, ${struck} of them struck`}.`
      }
      tools={
        <>
          {steps.length > 0 && (
            <fieldset className="picker big">
              <legend>Step of the schedule</legend>
              <button type="button" onClick={() => go(at - 1)} disabled={at === 0}>
                ◂ back
              </button>
              <output>{now === null ? "before the first" : `${now.step} of ${steps.length}, ${now.stage}`}</output>
              <button type="button" onClick={() => go(at + 1)} disabled={at === steps.length}>
                on ▸
              </button>
            </fieldset>
          )}
          <button type="button" disabled={log.length === 0} onClick={() => logFiles(log).slice(0, 1).forEach(saveFile)}>
            Save the log (CSV)
          </button>
          <FilePick label="Take in a log (CSV)" accept=".csv" onPick={openFiles} />
        </>
      }
      stage={
        <div className="readings">
          <CautionList paper="schedule" />
          <ReadingEntry step={now} />
          {now !== null && !now.hold && (
            <p className="hint">
              Corrections are worked out at the end of a stage: here after step{" "}
              {steps.find((s) => s.hold && s.stage === now.stage)?.step}.
            </p>
          )}
          {steps.length > 0 && (now === null || now.hold) && (
            <Corrections
              step={now?.step ?? 0}
              percent={stage === undefined ? null : 100 * stage.fraction}
              stage={stage?.name ?? "the finished roof"}
            />
          )}
          <LogTable log={log} steps={steps} />
        </div>
      }
      decisions={
        <>
          <SiteLimits />
          <SurveyDecisions />
        </>
      }
    />
  );
}
