// Saves the job as it goes, and says when that fails. Another tab on the same job is noticed; where both have changed it,
// this tab's work goes on as a copy, so neither is lost.
import { bookStore, notify, openProject } from "../store/bookStore.ts";
import type { Project } from "../store/project.ts";
import { loadJob, saveJob } from "./jobStore.ts";

/** Quiet time before an edit is written, ms. */
const QUIET = 400;

let saved: Project | null = null;
let count = 0;
let timer: ReturnType<typeof setTimeout> | undefined;
let writing: Promise<void> = Promise.resolve();
const self = crypto.randomUUID();
const channel = new BroadcastChannel("seamstay-jobs");

/** Name for a new job. */
export function newId(): string {
  return crypto.randomUUID();
}

/** Opens a kept job. @returns whether it was there */
export async function openKept(id: string): Promise<boolean> {
  const found = await loadJob(id);
  if (found === null) return false;
  await writing;
  saved = found.project;
  count = found.count;
  openProject(found.project, found.leaf);
  rememberOpen(id);
  return true;
}

/** Opens a job that is not kept yet; it will be. */
export function openNew(project: Project): void {
  saved = null;
  count = 0;
  openProject(project);
  rememberOpen(project.id);
}

/** Which job this tab has open; survives a reload of this tab only. */
export function lastOpen(): string | null {
  return sessionStorage.getItem("seamstay-open");
}

export function rememberOpen(id: string | null): void {
  if (id === null) sessionStorage.removeItem("seamstay-open");
  else {
    sessionStorage.setItem("seamstay-open", id);
    channel.postMessage({ kind: "open", id, from: self });
  }
}

async function write(): Promise<void> {
  const { project, leaf } = bookStore.getState();
  if (project === null || project === saved) return;
  try {
    const next = await saveJob(project, leaf, count, new Date().toISOString());
    if (next === null) return forkCopy(project);
    saved = project;
    count = next;
    bookStore.setState({ kept: new Date().toISOString() });
    bookStore.setState((s) => ({ notices: s.notices.filter((n) => n.id !== "keep") }));
    channel.postMessage({ kind: "saved", id: project.id, from: self });
  } catch (error) {
    bookStore.setState({ kept: null });
    notify("keep", explain(error), true);
  }
}

/** The other tab's version stays under the old name, this one goes on under a new one. */
function forkCopy(project: Project): void {
  const copy: Project = { ...project, id: newId(), job: { ...project.job, title: `${project.job.title} (copy)` } };
  count = 0;
  saved = null;
  bookStore.setState({ project: copy, planned: null });
  rememberOpen(copy.id);
  notify(
    "tabs",
    `This job was changed in another tab too. That version keeps its name; what you do here goes on as “${copy.job.title}”. Nothing is lost.`,
    true,
  );
}

function explain(error: unknown): string {
  const name = error instanceof DOMException ? error.name : "";
  if (name === "QuotaExceededError") {
    return "The browser's store is full: this job is not being kept. Save it as a file now, then delete jobs from the list.";
  }
  if (name === "InvalidStateError" || name === "SecurityError" || name === "UnknownError") {
    return "This browser keeps nothing here (a private window, or storage is switched off). Save the job as a file before you close the page.";
  }
  return `The job cannot be kept in this browser (${error instanceof Error ? error.message : String(error)}). Save it as a file before you close the page.`;
}

/** Begins to keep whatever is opened, and to listen for other tabs. */
export function startKeeping(): void {
  bookStore.subscribe((now, before) => {
    if (now.project === null || now.project === before.project) return;
    clearTimeout(timer);
    timer = setTimeout(flush, QUIET);
  });
  const flush = () => {
    clearTimeout(timer);
    writing = writing.then(write);
  };
  addEventListener("pagehide", flush);
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
