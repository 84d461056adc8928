// Saves the job as it goes, and says when that fails. Another tab on the same job is noticed; where both have changed it,
// this tab's work goes on as a copy, so neither is lost.
import { bookStore, dismiss, LEAVES, type Leaf, notify, openProject } from "../store/bookStore.ts";
import type { MeshFile, Project } from "../store/project.ts";
import { deleteJob, loadJob, saveJob } from "./jobStore.ts";
import { dropWord, hearWord, leaveWord } from "./lastWord.ts";
import { isSameLine, type Line, lineOf, readLine, renameLine } from "./timeline.ts";

/** Quiet time before an edit is written, ms. */
const QUIET = 400;

/** What is known of the open job in the store: its line as it was kept last, and the count it stands at. */
interface Shelved {
  line: Line | null;
  count: number;
}

let shelved: Shelved = { line: null, count: 0 };
let timer: ReturnType<typeof setTimeout> | undefined;
let writing: Promise<void> = Promise.resolve();
const self = crypto.randomUUID();
const channel = new BroadcastChannel("seamstay-jobs");

/** Name for a new job. */
export function newId(): string {
  return crypto.randomUUID();
}

/**
 * Opens a kept job with all that can be undone.
 * @param leaf to open it on; left out: where it was kept
 * @returns whether it was there
 */
export async function openKept(id: string, leaf?: Leaf): Promise<boolean> {
  flush();
  await writing;
  const found = await loadJob(id);
  if (found === null) return false;
  const last = hearWord(id, found.line);
  // where another tab has saved since the last word was left, the counts differ, and the word goes on as a copy
  shelved = { line: found.whole ? found.line : null, count: last?.count ?? found.count };
  openProject(readLine(last?.line ?? found.line), leaf ?? last?.leaf ?? found.leaf);
  if (last === null) bookStore.setState({ kept: found.savedAt });
  rememberOpen(id);
  return true;
}

/** Opens a job that is not kept yet; it will be. */
export function openNew(project: Project): void {
  flush();
  shelved = { line: null, count: 0 };
  openProject({ project, past: [], future: [] });
  rememberOpen(project.id);
  // its mesh is in no other place: no quiet time for that
  flush();
}

/**
 * Gives the open job the mesh it waited for. It goes on under a new name in the store, with all that can be undone; the one without the
 * mesh is taken out once that is kept, and stays where it cannot be.
 */
export async function completeOpen(mesh: MeshFile): Promise<void> {
  const { project, past, future, leaf } = bookStore.getState();
  if (project === null) return;
  flush();
  const { states, at } = renameLine(lineOf({ project, past, future }), newId(), (p) => p);
  const line = { states: states.map((s) => ({ ...s, project: { ...s.project, mesh } })), at };
  const shelf: Shelved = { line: null, count: 0 };
  shelved = shelf;
  openProject(readLine(line), leaf);
  flush();
  await writing;
  if (shelf.line !== null) await deleteJob(project.id);
}

/** Which job this tab has open, and on which leaf; survives a reload of this tab only. */
export function lastOpen(): { id: string; leaf: Leaf } | null {
  const [id, leaf] = (readSession() ?? "").split(" ");
  return id === "" ? null : { id, leaf: LEAVES.find((l) => l === leaf) ?? "form" };
}

/** A browser that keeps nothing refuses even this; the page works without. */
function readSession(): string | null {
  try {
    return sessionStorage.getItem("seamstay-open");
  } catch {
    return null;
  }
}

function noteOpen(): void {
  const { project, leaf } = bookStore.getState();
  try {
    if (project !== null) sessionStorage.setItem("seamstay-open", `${project.id} ${leaf}`);
  } catch {
    // see readSession
  }
}

function rememberOpen(id: string): void {
  noteOpen();
  channel.postMessage({ kind: "open", id, from: self });
}

/** Writes what is not kept yet, now. */
function flush(): void {
  clearTimeout(timer);
  const { project, past, future, leaf } = bookStore.getState();
  if (project === null) return;
  const shelf = shelved;
  writing = writing.then(() => write(shelf, lineOf({ project, past, future }), leaf));
}

/** The page goes: what the store may have no time to take is left beside it. */
function leave(): void {
  const { project, past, future, leaf } = bookStore.getState();
  if (project === null) return;
  if (shelved.line !== null) leaveWord(lineOf({ project, past, future }), shelved.line, shelved.count, leaf);
  flush();
}

async function write(shelf: Shelved, line: Line, leaf: Leaf): Promise<void> {
  const { project } = line.states[line.at];
  const open = () => shelf === shelved;
  // What was changed while this was written is kept in its own turn.
  const settle = () => {
    bookStore.setState((s) => ({ keeping: open() ? s.project !== project : s.keeping }));
    if (!open() || bookStore.getState().project === project) dropWord(project.id);
  };
  // The whole line: an edit taken back at once stands at the state kept before, but can be done again.
  if (shelf.line !== null && isSameLine(line, shelf.line)) return settle();
  const now = new Date().toISOString();
  try {
    const next = await saveJob(line, shelf.line, leaf, shelf.count, now);
    if (next === null) return open() ? forkCopy() : void (await saveJob(asCopy(line), null, leaf, 0, now));
    Object.assign(shelf, { line, count: next });
    settle();
    if (open()) bookStore.setState({ kept: now });
    // a job that was given its mesh is remembered no sooner: loaded anew, the page is to find the one or the other
    if (open()) noteOpen();
    dismiss("keep");
    channel.postMessage({ kind: "saved", id: project.id, from: self });
  } catch (error) {
    if (open()) bookStore.setState({ kept: null, keeping: false });
    notify("keep", explainFault(error), true);
  }
}

function asCopy(line: Line): Line {
  return renameLine(line, newId(), (p) => ({ ...p, job: { ...p.job, title: `${p.job.title} (copy)` } }));
}

/** The other tab's version stays under the old name, this one goes on under a new one. */
function forkCopy(): void {
  const { project, past, future } = bookStore.getState();
  if (project === null) return;
  const forked = asCopy(lineOf({ project, past, future }));
  const { project: copy } = readLine(forked);
  shelved = { line: null, count: 0 };
  dropWord(project.id);
  bookStore.setState({ ...readLine(forked), planned: null });
  rememberOpen(copy.id);
  notify(
    "tabs",
    `This job was changed in another tab too. That version keeps its name; what you do here goes on as “${copy.job.title}”. Nothing is lost.`,
    true,
  );
}

/** Why nothing is kept, and what to do. */
export function explainFault(error: unknown): string {
  const name = error instanceof DOMException ? error.name : "";
  if (name === "QuotaExceededError") {
    return "The browser's store is full: this job is not being kept. Save it as a file now, then delete jobs from the list.";
  }
  if (name === "VersionError") {
    return "A newer Seamstay has kept jobs in this browser, so this older one leaves its store alone: this job is not being kept. Take the newer one over, or save the job as a file before you close the page.";
  }
  if (name === "InvalidStateError" || name === "SecurityError" || name === "UnknownError") {
    return "This browser keeps nothing here (a private window, or storage is switched off). Save the job as a file before you close the page.";
  }
  return `The job cannot be kept in this browser (${error instanceof Error ? error.message : String(error)}). Save it as a file before you close the page.`;
}

/** Begins to keep whatever is opened, and to listen for other tabs. */
export function startKeeping(): void {
  bookStore.subscribe((now, before) => {
    if (now.leaf !== before.leaf) noteOpen();
    if (now.project === null || now.project === before.project) return;
    clearTimeout(timer);
    bookStore.setState({ keeping: true });
    timer = setTimeout(flush, QUIET);
  });
  addEventListener("pagehide", leave);
  document.addEventListener("visibilitychange", () => {
    if (document.visibilityState === "hidden") flush();
  });
  channel.onmessage = (event: MessageEvent<{ kind: string; id: string; from: string }>) => {
    const { kind, id, from } = event.data;
    const { project } = bookStore.getState();
    if (from === self || project?.id !== id) return;
    if (kind === "open") channel.postMessage({ kind: "here", id, from: self });
    if (kind === "open" || kind === "here") {
      notify(
        "tabs",
        "This job is open in another tab as well. Work in one of them; if both change it, the later one goes on as a copy.",
      );
    }
    if (kind === "saved") {
      notify(
        "tabs",
        "This job was just changed in another tab. If you go on here, your work is kept as a copy; reload to see the other one.",
        true,
      );
    }
  };
}
