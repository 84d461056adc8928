// The log of the site: what was read and turned, the latest first, each line to be struck if it was a slip.
import { strikeReading } from "../../actions/site/strikeReading.ts";
import type { RigStep } from "../../flat/rigSteps.ts";
import { showTime } from "../../parts/clock.ts";
import { figure } from "../../parts/figure.ts";
import { act } from "../../store/bookStore.ts";
import type { Reading } from "../../store/project.ts";
import { useBook } from "../../store/useBook.ts";
import { expectReading, judgeReading } from "./expectReading.ts";

function whatWasRead(r: Reading): string {
  if (r.turned !== undefined)
    return `turned: ${r.turned > 0 ? "taken in" : "let out"} ${figure(Math.abs(r.turned), 1)} mm`;
  if (r.force !== null) return `${figure(r.force, 1)} kN`;
  if (r.frequency !== null)
    return `${figure(r.frequency, 2)} Hz on ${figure(r.freeLength ?? 0, 3)} m of ${figure(r.massPerMetre ?? 0, 3)} kg/m`;
  return r.at === null ? "" : `at ${r.at.map((v) => figure(v, 3)).join(", ")} m`;
}

/** After which step it was read, and what it says against the schedule: a reading written down while out of its window stays seen. */
function Verdict({ line, steps }: { line: Reading; steps: readonly RigStep[] }) {
  const facts = useBook((b) => b.facts);
  const step = steps.find((s) => s.step === line.step);
  if (!step || line.struck || line.turned !== undefined) return null;
  const expected = line.force === null || facts === null ? null : expectReading(facts, step, line.id);
  const said = expected && judgeReading(expected, line.force ?? 0);
  return (
    <span className="verdict">
      after step {step.step}
      {said && <strong className={said.fine ? "fine" : "off"}>: {said.words}</strong>}
    </span>
  );
}

/** The lines of the log, with what each says by the schedule as it stands now. */
export function LogTable({ log, steps }: { log: readonly Reading[]; steps: readonly RigStep[] }) {
  if (log.length === 0) return <p className="waiting">No readings yet. The log grows here, the latest first.</p>;
  return (
    <table className="things log">
      <caption>Log, the latest first</caption>
      <thead>
        <tr>
          <th scope="col">When</th>
          <th scope="col">Who</th>
          <th scope="col">What</th>
          <th scope="col">Reading</th>
          <th scope="col">°C</th>
          <th scope="col">A slip?</th>
        </tr>
      </thead>
      <tbody>
        {log
          .map((r, index) => ({ r, index }))
          .reverse()
          .map(({ r, index }) => (
            <tr key={`${r.time} ${index}`} className={r.struck ? "struck" : undefined}>
              <td>{showTime(r.time)}</td>
              <td>{r.by}</td>
              <th scope="row">{r.id}</th>
              <td>
                {whatWasRead(r)}
                <Verdict line={r} steps={steps} />
              </td>
              <td>{r.temperature === null ? "" : figure(r.temperature, 0)}</td>
              <td>
                <button
                  type="button"
                  aria-label={`${r.struck ? "Count again" : "Strike"} the ${r.turned === undefined ? "reading" : "turn"} of ${r.id} of ${r.time}`}
                  onClick={() => act(strikeReading, { index }, r.struck ? "reading counted again" : "reading struck")}
                >
                  {r.struck ? "Count again" : "Strike"}
                </button>
              </td>
            </tr>
          ))}
      </tbody>
    </table>
  );
}
