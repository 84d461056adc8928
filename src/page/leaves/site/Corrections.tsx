// What to turn after the readings: the state that fits them best, the moves, what every gauge will read after them.
import { partSiteLog } from "../../../core/plan/siteLog.ts";
import { addTurns } from "../../actions/site/addTurns.ts";
import { writeTime } from "../../parts/clock.ts";
import { FindingList } from "../../parts/FindingList.tsx";
import { figure } from "../../parts/figure.ts";
import { PressButton } from "../../parts/PressButton.tsx";
import { act } from "../../store/bookStore.ts";
import { useBook } from "../../store/useBook.ts";
import { requestCorrection, stopPlan } from "../../worker/planner.ts";

/** Turns as a hand sets them: whole ones and sixths. */
function turnsInWords(turns: number): string {
  const sixths = Math.round(6 * Math.abs(turns));
  return `${Math.floor(sixths / 6)} ${sixths % 6}/6 turns`;
}

function Result({ step }: { step: number }) {
  const corrected = useBook((b) => b.corrected);
  const log = useBook((b) => b.project?.log);
  if (corrected === null) return null;
  const { correction, findings } = corrected.plan;
  const stopped = findings.some((f) => f.level === "stop");
  return (
    <>
      {corrected.of.log !== log && <p className="fault">The log has changed since: work the corrections out again.</p>}
      <FindingList findings={findings.filter((f) => f.level !== "note")} />
      {stopped && <p className="fault">Do not turn anything: ask the engineer.</p>}
      <p>
        {correction.moves.length === 0
          ? "Nothing to turn: forces and corners are within their windows."
          : `Held against the end of stage ${correction.stage}. Turn one after the other, and read after each:`}
      </p>
      {correction.moves.length > 0 && (
        <table className="things">
          <caption>Corrections</caption>
          <thead>
            <tr>
              <th scope="col">Step</th>
              <th scope="col">Adjuster</th>
              <th scope="col">Turn</th>
              <th scope="col">Then it reads, kN</th>
            </tr>
          </thead>
          <tbody>
            {correction.moves.map((m) => (
              <tr key={m.step}>
                <td>{m.step}</td>
                <th scope="row">{m.adjuster}</th>
                <td>
                  {m.travel > 0 ? "take in" : "let out"} {figure(Math.abs(m.travel), 1)} mm ({turnsInWords(m.turns)})
                </td>
                <td>
                  {figure(m.expect, 1)}, between {figure(m.low, 1)} and {figure(m.high, 1)}
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      )}
      {correction.moves.length > 0 && !stopped && corrected.of.log === log && (
        <button
          type="button"
          onClick={() => act(addTurns, { moves: correction.moves, step, time: writeTime() }, "turns made")}
        >
          These turns were made: write them into the log
        </button>
      )}
      <table className="things">
        <caption>What the readings say, and the forecast</caption>
        <thead>
          <tr>
            <th scope="col">Adjuster</th>
            <th scope="col">Now, kN</th>
            <th scope="col">Off the plan, mm</th>
            <th scope="col">After, kN</th>
          </tr>
        </thead>
        <tbody>
          {correction.fitted.map((f) => (
            <tr key={f.adjuster}>
              <th scope="row">{f.adjuster}</th>
              <td>{figure(f.force, 1)}</td>
              <td>
                {figure(f.off, 1)} ± {figure(f.sure, 1)}
              </td>
              <td>{figure(correction.forecast.forces[f.adjuster] ?? Number.NaN, 1)}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </>
  );
}

/** Where the crew stands: a step of the schedule, and the stage that ends with it in per cent; null: the finished roof. */
export interface CorrectionPlace {
  step: number;
  percent: number | null;
  stage: string;
}

/** The button and what comes of it. */
export function Corrections({ step, percent, stage }: CorrectionPlace) {
  const project = useBook((b) => b.project);
  const status = useBook((b) => b.status);
  const correcting = useBook((b) => b.correcting);
  const fault = useBook((b) => b.correctFault);
  const words = useBook((b) => b.progress.words);
  if (project === null || project.log.every((r) => r.struck)) return null;
  const { text, kept } = partSiteLog(project.log, step);
  return (
    <section className="corrections" aria-label="Corrections">
      {correcting ? (
        <p className="row" role="status">
          Working out what to turn{words && `: ${words}`}
          <PressButton onPress={stopPlan}>Stop</PressButton>
        </p>
      ) : text === null ? (
        <p className="hint">
          {kept.length > 0
            ? "The turns are in the log. Read all adjusters again, then the next corrections are worked out from both rounds."
            : `No reading of the log was taken here, at the end of ${stage}.`}
        </p>
      ) : (
        <PressButton
          className="main"
          disabled={status === "running"}
          onPress={() => requestCorrection(project, step, percent)}
        >
          Work out corrections, read at the end of {stage}
          {kept.length > 0 && `, with ${kept.length === 1 ? "the round" : `${kept.length} rounds`} before`}
        </PressButton>
      )}
      {fault !== null && (
        <p className="fault" role="alert">
          {fault.message}
        </p>
      )}
      <Result step={step} />
    </section>
  );
}
