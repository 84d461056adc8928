// The desk before a job is open: drop a form, begin with a starter, go on with a job that is kept here.
import { useEffect, useState } from "react";
import { deleteJob, type KeptJob, listJobs } from "./keep/jobStore.ts";
import { explainFault, openKept } from "./keep/keepBook.ts";
import { beginStarter, openFiles, tryOpen } from "./keep/openBook.ts";
import { STARTERS } from "./keep/starters.ts";
import { showTime } from "./parts/clock.ts";
import { FilePick } from "./parts/FilePick.tsx";
import { keepTogether } from "./parts/figure.ts";
import { useNextFocus } from "./parts/nextFocus.ts";

/** The kept jobs. */
export function JobList() {
  const [jobs, setJobs] = useState<KeptJob[] | null>(null);
  const [fault, setFault] = useState("");
  // a job that is deleted cannot come back: asked for twice
  const [sure, setSure] = useState<string | null>(null);
  // the button that was pressed goes with the question and with the answer: which one has the focus next
  const focus = useNextFocus();
  const turn = (id: string | null, next: string) => {
    focus.ask(next);
    setSure(id);
  };
  const read = () => {
    listJobs()
      .then(setJobs)
      .catch((error: unknown) => setFault(explainFault(error)));
  };
  useEffect(read, []);
  if (fault !== "") return <p className="hint">{fault}</p>;
  if (jobs === null) return <p className="hint">Looking…</p>;
  if (jobs.length === 0) return <p className="hint">None yet. Whatever you open is kept here as you go.</p>;
  const remove = async (id: string) => {
    turn(null, "list");
    await tryOpen(() => deleteJob(id));
    read();
  };
  return (
    <ul className="jobs" ref={focus.at("list")} tabIndex={-1}>
      {jobs.map((j) => (
        <li key={j.id}>
          <button type="button" className="open" onClick={() => tryOpen(async () => void (await openKept(j.id)))}>
            {j.title}
          </button>
          <span className="quiet">kept {showTime(j.savedAt)}</span>
          {sure === j.id ? (
            <span className="sure">
              <button type="button" aria-label={`Delete for good: ${j.title}`} onClick={() => remove(j.id)}>
                Delete for good
              </button>
              <button type="button" ref={focus.at("keep")} onClick={() => turn(null, j.id)}>
                Keep it
              </button>
            </span>
          ) : (
            <button
              type="button"
              ref={focus.at(j.id)}
              aria-label={`Delete ${j.title}`}
              onClick={() => turn(j.id, "keep")}
            >
              Delete
            </button>
          )}
        </li>
      ))}
    </ul>
  );
}

/** Ways to begin; also on the sheet of jobs. */
export function Beginnings() {
  return (
    <>
      <section className="drop">
        <h2>Open a form or a job</h2>
        <p>Drop an OBJ of the found form anywhere on this page, or a job (JSON) with its mesh, or a zip saved here.</p>
        <FilePick label="Choose files" accept=".obj,.json,.zip,.csv" multiple onPick={openFiles} />
      </section>
      <section>
        <h2>Begin with a starter</h2>
        <ul className="starters">
          {STARTERS.map((s) => (
            <li key={s.name}>
              <button type="button" className="open" onClick={() => beginStarter(s.name)}>
                {s.name.replaceAll("-", " ")}
              </button>
              <p>{keepTogether(s.line)}</p>
            </li>
          ))}
        </ul>
      </section>
      <section>
        <h2>Go on with a job</h2>
        <JobList />
      </section>
    </>
  );
}

/** The desk. */
export function Desk() {
  return (
    <main className="desk">
      <header>
        <h1>Seamstay</h1>
        <p className="lead">
          From a found membrane form to cut cloth and a taut roof. Everything is worked out on this machine; nothing is
          sent anywhere.
        </p>
      </header>
      <div className="ways">
        <Beginnings />
      </div>
      <p className="who">
        Not a design for wind, snow or ponding. Local codes and the licensed engineer decide; nothing leaves the office
        without their word.
      </p>
    </main>
  );
}
