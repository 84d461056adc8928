// The desk before a job is open: drop a form, begin with a starter, go on with a job that is kept here.
import { useEffect, useState } from "react";
import { deleteJob, type KeptJob, listJobs } from "./keep/jobStore.ts";
import { explainFault, openKept, openNew } from "./keep/keepBook.ts";
import { loadFiles, readFiles } from "./keep/openFiles.ts";
import { openStarter, STARTERS } from "./keep/starters.ts";
import { bookStore, notify } from "./store/bookStore.ts";

/** What goes wrong while opening is said, not swallowed. */
export async function tryOpen(open: () => Promise<void>): Promise<void> {
  try {
    await open();
    bookStore.setState((s) => ({ notices: s.notices.filter((n) => n.id !== "open") }));
  } catch (error) {
    const words = error instanceof Error ? error.message : String(error);
    notify("open", error instanceof DOMException ? explainFault(error) : words, true);
  }
}

/** Opens files as a job; a mesh that an open job waits for completes that one. */
export async function openFiles(files: readonly File[]): Promise<void> {
  await tryOpen(async () => {
    const { project } = bookStore.getState();
    const next = readFiles(await loadFiles(files), project);
    openNew(next);
    // The job that waited for its mesh goes on under a new name in the store.
    if (project !== null && next.job === project.job) await deleteJob(project.id);
  });
}

/** The kept jobs. */
export function JobList() {
  const [jobs, setJobs] = useState<KeptJob[] | null>(null);
  const [fault, setFault] = useState("");
  const read = () => {
    listJobs()
      .then(setJobs)
      .catch((error: unknown) => setFault(explainFault(error)));
  };
  useEffect(read, []);
  if (fault !== "") return <p className="hint">{fault}</p>;
  if (jobs === null) return <p className="hint">Looking…</p>;
  if (jobs.length === 0) return <p className="hint">None yet. Whatever you open is kept here as you go.</p>;
  return (
    <ul className="jobs">
      {jobs.map((j) => (
        <li key={j.id}>
          <button type="button" className="open" onClick={() => tryOpen(async () => void (await openKept(j.id)))}>
            {j.title}
          </button>
          <span className="quiet">{j.savedAt.replace("T", " ").slice(0, 16)}</span>
          <button
            type="button"
            aria-label={`Delete ${j.title}`}
            onClick={async () => {
              await deleteJob(j.id);
              read();
            }}
          >
            Delete
          </button>
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
        <label className="filepick">
          <input
            type="file"
            multiple
            accept=".obj,.json,.zip,.csv"
            onChange={(e) => {
              const files = [...(e.target.files ?? [])];
              e.target.value = "";
              if (files.length > 0) void openFiles(files);
            }}
          />
          <span>Choose files</span>
        </label>
      </section>
      <section>
        <h2>Begin with a starter</h2>
        <ul className="starters">
          {STARTERS.map((s) => (
            <li key={s.name}>
              <button
                type="button"
                className="open"
                onClick={() => tryOpen(async () => openNew(await openStarter(s.name)))}
              >
                {s.name.replaceAll("-", " ")}
              </button>
              <p>{s.line}</p>
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
