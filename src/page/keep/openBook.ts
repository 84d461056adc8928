// What a person opens: files, a starter, a kept job. What goes wrong on the way is said, not swallowed.
import { takeLog } from "../actions/site/takeLog.ts";
import { act, bookStore, notify } from "../store/bookStore.ts";
import { completeOpen, explainFault, openNew } from "./keepBook.ts";
import { findLogTables, type LoadedFile, loadFiles, readFiles, readLog, readLooseFacts } from "./openFiles.ts";
import { openStarter } from "./starters.ts";

/** Opens, and says what went wrong. */
export async function tryOpen(open: () => Promise<void>): Promise<void> {
  try {
    await open();
    bookStore.setState((s) => ({ notices: s.notices.filter((n) => n.id !== "open") }));
  } catch (error) {
    const words = error instanceof Error ? error.message : String(error);
    notify("open", error instanceof DOMException ? explainFault(error) : words, true);
  }
}

/** The starter whose mesh is on its way. */
let coming: string | null = null;

/** Begins a job with a starter; pressed again while its mesh is on its way, it is still one job. */
export async function beginStarter(name: string): Promise<void> {
  if (coming === name) return;
  coming = name;
  await tryOpen(async () => openNew(await openStarter(name)));
  coming = null;
}

/** Readings dropped onto an open job go into its log. @returns whether they were that */
function takeReadings(files: readonly LoadedFile[]): boolean {
  const { project } = bookStore.getState();
  const log = files.every((f) => /\.csv$/i.test(f.name)) ? readLog(files) : null;
  if (project === null || log === null) return false;
  const before = project.log.length;
  act(takeLog, log, "log taken in");
  const now = bookStore.getState().project?.log.length ?? 0;
  notify(
    "log",
    log.whole
      ? `The log is now that of the file: ${now} lines, ${before} before. Undo takes it back.`
      : `${now - before} of ${log.lines.length} readings were new and are in the log.`,
  );
  return true;
}

/** Opens files as a job; a mesh that an open job waits for completes that one, readings go into its log. */
export async function openFiles(files: readonly File[]): Promise<void> {
  await tryOpen(async () => {
    const { project } = bookStore.getState();
    const loaded = await loadFiles(files);
    if (takeReadings(loaded)) return;
    const loose = readLooseFacts(loaded);
    if (loose !== null) {
      const left = findLogTables(loaded).map((f) => f.name);
      if (left.length > 0)
        notify("log", `${left.join(", ")}: not taken in beside facts; open the job, then drop them alone.`, true);
      return bookStore.setState({ loose, sheet: "facts" });
    }
    let fault = "";
    const next = readFiles(loaded, project, ({ message }) => {
      fault = message;
    });
    if (project !== null && next.job === project.job && next.mesh !== null) return completeOpen(next.mesh);
    openNew(next);
    if (fault !== "")
      notify(
        "log",
        `The job is open without the log that lies beside it. ${fault}. Mend that table and drop all tables of the log here.`,
        true,
      );
  });
}
