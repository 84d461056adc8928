// The page as a whole: desk or book, notices, sheets, and what is dropped onto it.
import { useEffect, useState } from "react";
import { Book } from "./Book.tsx";
import { Beginnings, Desk } from "./Desk.tsx";
import { takeUpdate } from "./keep/offline.ts";
import { openFiles } from "./keep/openBook.ts";
import { LooseFacts } from "./leaves/papers/LooseFacts.tsx";
import { FindingList } from "./parts/FindingList.tsx";
import { holdFocus } from "./parts/holdFocus.ts";
import { hearKeys, KEY_SHEET } from "./parts/keys.ts";
import { Sheet } from "./parts/Sheet.tsx";
import { dismiss } from "./store/bookStore.ts";
import { useBook } from "./store/useBook.ts";

function Notices() {
  const notices = useBook((b) => b.notices);
  return (
    <div className="notices">
      {notices.map((n) => (
        <div key={n.id} className={n.grave ? "banner grave" : "banner"} role={n.grave ? "alert" : "status"}>
          <p>{n.text}</p>
          {n.id === "update" && (
            <button type="button" onClick={takeUpdate}>
              Take it over
            </button>
          )}
          <button type="button" onClick={() => dismiss(n.id)}>
            Close
          </button>
        </div>
      ))}
    </div>
  );
}

function Sheets() {
  const sheet = useBook((b) => b.sheet);
  const findings = useBook((b) => b.facts?.findings);
  if (sheet === "findings") {
    return (
      <Sheet title="Findings">
        <FindingList findings={findings ?? []} />
      </Sheet>
    );
  }
  if (sheet === "jobs") {
    return (
      <Sheet title="Jobs">
        <div className="ways">
          <Beginnings />
        </div>
      </Sheet>
    );
  }
  if (sheet === "facts") return <LooseFacts />;
  if (sheet === "keys") {
    return (
      <Sheet title="Keys">
        <dl className="keys">
          {KEY_SHEET.map((k) => (
            <div key={k.keys}>
              <dt>{k.keys}</dt>
              <dd>{k.words}</dd>
            </div>
          ))}
        </dl>
        <p>
          <a href="./third-party.txt" target="_blank" rel="noreferrer">
            Packages this page is built with, and their licences
          </a>
        </p>
      </Sheet>
    );
  }
  return null;
}

/** Files dropped anywhere are opened. */
function useDrop(): boolean {
  const [over, setOver] = useState(false);
  useEffect(() => {
    const drag = (e: DragEvent) => {
      if (!e.dataTransfer?.types.includes("Files")) return;
      e.preventDefault();
      setOver(true);
    };
    const leave = (e: DragEvent) => {
      if (e.relatedTarget === null) setOver(false);
    };
    const drop = (e: DragEvent) => {
      e.preventDefault();
      setOver(false);
      const files = [...(e.dataTransfer?.files ?? [])];
      if (files.length > 0) void openFiles(files);
    };
    addEventListener("dragover", drag);
    addEventListener("dragleave", leave);
    addEventListener("drop", drop);
    return () => {
      removeEventListener("dragover", drag);
      removeEventListener("dragleave", leave);
      removeEventListener("drop", drop);
    };
  }, []);
  return over;
}

/** The page. */
export function App() {
  const open = useBook((b) => b.project !== null);
  const theme = useBook((b) => b.theme);
  const over = useDrop();
  useEffect(() => {
    if (theme === "system") delete document.documentElement.dataset.theme;
    else document.documentElement.dataset.theme = theme;
  }, [theme]);
  useEffect(hearKeys, []);
  useEffect(holdFocus, []);
  return (
    <>
      <Notices />
      {open ? <Book /> : <Desk />}
      <Sheets />
      {over && (
        <div className="catch" aria-hidden="true">
          Let go to open
        </div>
      )}
    </>
  );
}
