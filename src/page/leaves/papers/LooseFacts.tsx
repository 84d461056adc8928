// The papers of a facts.json opened by itself, on a sheet over whatever is on the desk: that stays as it is.
import { useEffect, useState } from "react";
import { fileStem, saveFile, zipFiles } from "../../keep/saveFiles.ts";
import { Sheet } from "../../parts/Sheet.tsx";
import type { WrittenPapers } from "../../store/bookStore.ts";
import { useBook } from "../../store/useBook.ts";
import { drawLoosePapers } from "../../worker/loosePapers.ts";
import type { PlanFault } from "../../worker/messages.ts";
import { PaperChoices } from "./PaperChoices.tsx";
import { PaperList } from "./PaperList.tsx";
import { Preview } from "./Preview.tsx";

type Answer = WrittenPapers | PlanFault | "stopped" | null;

/** Writes the papers and again where another choice is made; `again` counts how often it was asked for anew. */
function useLoosePapers(again: number): [Answer, () => void] {
  const loose = useBook((b) => b.loose);
  const choice = useBook((b) => b.choice);
  const [answer, setAnswer] = useState<Answer>(null);
  const [stop, setStop] = useState<() => void>(() => () => {});
  // biome-ignore lint/correctness/useExhaustiveDependencies: asked for anew, it is written anew
  useEffect(() => {
    if (loose === null) return;
    setAnswer(null);
    const end = drawLoosePapers(loose, choice, setAnswer);
    setStop(() => () => {
      end();
      setAnswer("stopped");
    });
    return end;
  }, [loose, choice, again]);
  return [answer, stop];
}

/** The sheet. */
export function LooseFacts() {
  const loose = useBook((b) => b.loose);
  const [again, setAgain] = useState(0);
  const [answer, stop] = useLoosePapers(again);
  const [shown, setShown] = useState<string | null>(null);
  if (loose === null) return null;
  const { title, revision, issue } = loose.facts.job;
  const stops = loose.facts.findings.filter((f) => f.level === "stop").length;
  const files = answer !== null && typeof answer === "object" && "files" in answer ? answer.files : undefined;
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
      {answer === null && (
        <p>
          The papers are being written…{" "}
          <button type="button" onClick={stop}>
            Stop writing
          </button>
        </p>
      )}
      {(answer === "stopped" || (answer !== null && "message" in answer)) && (
        <p role="alert">
          {answer === "stopped" ? "Stopped; nothing was written." : answer.message}{" "}
          <button type="button" onClick={() => setAgain(again + 1)}>
            Write the papers
          </button>
        </p>
      )}
      <PaperChoices />
      {files !== undefined && (
        <>
          <button type="button" className="main" onClick={async () => saveFile(await zipFiles(`${stem}.zip`, files))}>
            Save all papers (zip)
          </button>
          {shown !== null && <Preview file={files.find((f) => f.path === shown)} />}
          <PaperList files={files} shown={shown} onShow={setShown} />
        </>
      )}
    </Sheet>
  );
}
