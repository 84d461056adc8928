// Entry of the page: takes up what was open, plans whenever the job changes, keeps it.
import { createRoot } from "react-dom/client";
import type { JobFile } from "../core/job/jobSchema.ts";
import { App } from "./App.tsx";
import { lastOpen, newId, openKept, openNew, startKeeping } from "./keep/keepBook.ts";
import { goOffline } from "./keep/offline.ts";
import { tryOpen } from "./keep/openBook.ts";
import { readChoice } from "./keep/paperChoice.ts";
import { bookStore } from "./store/bookStore.ts";
import { planOnChange } from "./worker/planOnChange.ts";
import "./style/ink.css";
import "./style/book.css";
import "./style/leaf.css";
import "./style/fields.css";
import "./style/parts.css";
import "./style/drawings.css";
import "./style/site.css";
import "./style/print.css";

/** What `seamstay open JOB` hands over; null where it named none. */
async function fetchOpened(): Promise<{ name: string; job: JobFile; mesh: string | null } | null> {
  try {
    const response = await fetch("./opened.json");
    return response.status === 200 ? await response.json() : null;
  } catch {
    return null;
  }
}

async function takeUp(): Promise<void> {
  const last = lastOpen();
  if (last !== null && (await openKept(last.id, last.leaf))) return;
  const opened = await fetchOpened();
  if (opened === null) return;
  const bytes = opened.mesh === null ? null : new Uint8Array(await (await fetch("./opened-mesh")).arrayBuffer());
  openNew({ id: newId(), job: opened.job, mesh: bytes === null ? null : { name: opened.mesh ?? "", bytes }, log: [] });
}

bookStore.setState({ choice: readChoice() });
startKeeping();
planOnChange();
const root = document.getElementById("book");
if (root !== null) createRoot(root).render(<App />);
void tryOpen(takeUp);
void goOffline();
