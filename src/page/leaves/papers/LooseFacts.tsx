// The papers of a facts.json opened by itself, on a sheet over whatever is on the desk: that stays as it is.
import { useCallback, useEffect, useRef, useState } from "react";
import { fileStem, saveFile, zipFiles } from "../../keep/saveFiles.ts";
import { PressButton } from "../../parts/PressButton.tsx";
import { Sheet } from "../../parts/Sheet.tsx";
import { bookStore, type WrittenPapers } from "../../store/bookStore.ts";
import { useBook } from "../../store/useBook.ts";
import { drawLoosePapers } from "../../worker/loosePapers.ts";
import type { PlanFault } from "../../worker/messages.ts";
import { PaperChoices } from "./PaperChoices.tsx";
import { PaperList } from "./PaperList.tsx";
import { Preview } from "./Preview.tsx";

type Answer = WrittenPapers | PlanFault | "stopped";

/** Writes the papers, and again where other facts are opened or another choice is made; `answer` null: they are being written. */
function useLoosePapers(): { answer: Answer | null; stop: () => void; write: () => void } {
  const loose = useBook((b) => b.loose);
  const choice = useBook((b) => b.choice);
  const [last, setLast] = useState<{ of: typeof loose; choice: typeof choice; answer: Answer } | null>(null);
  const end = useRef(() => {});
  const tell = useCallback((answer: Answer) => setLast({ of: loose, choice, answer }), [loose, choice]);
  const write = useCallback(() => {
    if (loose === null) return;
    setLast(null);
    end.current = drawLoosePapers(loose, choice, tell);
  }, [loose, choice, tell]);
  useEffect(() => {
    write();
    return () => end.current();
  }, [write]);
  const stop = () => {
    end.current();
    tell("stopped");
  };
  // what was written of other facts, or chosen otherwise, is never shown as theirs
  return { answer: last?.of === loose && last?.choice === choice ? last.answer : null, stop, write };
}

/** What stands in place of papers that are not there; null: they are. */
function tellAnswer(answer: Answer | null): string | null {
  if (answer === null) return "The papers are being written…";
  if (answer === "stopped") return "Stopped; nothing was written.";
  return "message" in answer ? answer.message : null;
}

/** The sheet. */
export function LooseFacts() {
  const loose = useBook((b) => b.loose);
  const { answer, stop, write } = useLoosePapers();
  const [shown, setShown] = useState<string | null>(null);
  // facts of a large roof take tens of megabytes: they go with their sheet
  useEffect(() => () => bookStore.setState({ loose: null }), []);
  if (loose === null) return null;
  const { title, revision, issue } = loose.facts.job;
  const stops = loose.facts.findings.filter((f) => f.level === "stop").length;
  const files = answer !== null && typeof answer === "object" && "files" in answer ? answer.files : undefined;
  const words = tellAnswer(answer);
  const stem = `${fileStem(title)}-${revision}`;
  return (
    <Sheet title={`Papers of ${title}`}>
      <p>
        {loose.name} holds facts alone, of issue {issue}, revision {revision}: what came out of a plan. Its papers are
        written from it as they were. No decision can be changed here; for that, open the job it was planned from. The
        job on your desk stays as it is.
      </p>
      {stops > 0 && (
        <p>
          NOT FOR ISSUE: {stops} {stops === 1 ? "stop is" : "stops are"} open, and every paper says so.
        </p>
      )}
      {words !== null && (
        <p role={answer === null ? undefined : "alert"}>
          {words}{" "}
          <PressButton onPress={answer === null ? stop : write}>
            {answer === null ? "Stop writing" : "Write the papers"}
          </PressButton>
        </p>
      )}
      <PaperChoices />
      {files !== undefined && (
        <>
          <div className="tools">
            <PressButton className="main" onPress={async () => saveFile(await zipFiles(`${stem}.zip`, files))}>
              Save all papers (zip)
            </PressButton>
          </div>
          {shown !== null && <Preview file={files.find((f) => f.path === shown)} />}
          <PaperList files={files} shown={shown} onShow={setShown} />
        </>
      )}
    </Sheet>
  );
}
