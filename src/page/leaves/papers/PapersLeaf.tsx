// Papers: what leaves the office?
import { useEffect, useState } from "react";
import type { Facts } from "../../../core/records/facts.ts";
import { fileStem, packJob, saveFile, zipFiles } from "../../keep/saveFiles.ts";
import { FigureTable } from "../../parts/FigureTable.tsx";
import { PressButton } from "../../parts/PressButton.tsx";
import { Waiting } from "../../parts/Waiting.tsx";
import type { PaperFile } from "../../store/bookStore.ts";
import { useBook } from "../../store/useBook.ts";
import { requestPapers, stopPlan } from "../../worker/planner.ts";
import { LeafFrame } from "../LeafFrame.tsx";
import { FoldedChoices } from "./PaperChoices.tsx";
import { PaperDecisions } from "./PaperDecisions.tsx";
import { PaperList } from "./PaperList.tsx";
import { Preview } from "./Preview.tsx";

/** Which of the papers may be issued; they say the same on every sheet. */
function tellIssue(facts: Facts | null): string {
  const stops = facts?.findings.filter((f) => f.level === "stop").length ?? 0;
  if (stops > 0)
    return `NOT FOR ISSUE: ${stops} ${stops === 1 ? "stop is" : "stops are"} open, and every paper says so.`;
  if (facts?.tensioning?.issuable === false)
    return "Schedule, cables and hardware are NOT FOR ISSUE: they stand on defaults. Nothing stops the others.";
  return "Nothing stops them from being issued.";
}

/** What lies on top before a paper is chosen: sheets that can be printed, the list of them all first. */
function firstToShow(files: readonly PaperFile[]): PaperFile | undefined {
  const found = [/^index\.pdf$/, /\.pdf$/, /\.svg$/].map((kind) => files.find((f) => kind.test(f.path)));
  return found.find((f) => f !== undefined);
}

/** The leaf. */
export function PapersLeaf() {
  const facts = useBook((b) => b.facts);
  const status = useBook((b) => b.status);
  const papers = useBook((b) => b.papers);
  const fault = useBook((b) => b.papersFault);
  const writing = useBook((b) => b.writing);
  const correcting = useBook((b) => b.correcting);
  const project = useBook((b) => b.project);
  const [shown, setShown] = useState<string | null>(null);
  const choice = useBook((b) => b.choice);
  const files = papers?.of === facts && papers?.choice === choice ? papers?.files : undefined;
  useEffect(() => {
    // corrections that are worked out go first: papers would end them
    const idle = status === "done" && !writing && !correcting;
    if (idle && facts !== null && files === undefined && fault === null) requestPapers(facts);
  }, [status, facts, files, writing, correcting, fault]);
  const stem = `${fileStem(facts?.job.title ?? "")}-${facts?.job.revision ?? ""}`;
  const shownFile = files?.find((f) => f.path === shown) ?? (files && firstToShow(files));
  return (
    <LeafFrame
      leaf="papers"
      station="papers"
      question="What leaves the office?"
      answer={
        files === undefined
          ? writing
            ? "The papers are being written…"
            : "No papers yet."
          : `${files.length} files, revision ${facts?.job.revision ?? ""}. ${tellIssue(facts)}`
      }
      tools={
        <>
          <PressButton
            className="main"
            disabled={files === undefined}
            onPress={async () => files && saveFile(await zipFiles(`${stem}.zip`, files))}
          >
            Save all papers (zip)
          </PressButton>
          <PressButton onPress={async () => project && saveFile(await packJob(project))}>
            Save the job with its mesh
          </PressButton>
        </>
      }
      stage={
        files ? (
          <>
            {shownFile && <p className="shown">{shownFile.path}</p>}
            <Preview file={shownFile} />
          </>
        ) : fault ? (
          <>
            <p className="waiting" role="alert">
              {fault.message}
            </p>
            {facts !== null && status === "done" && (
              <PressButton onPress={() => requestPapers(facts)}>Write the papers</PressButton>
            )}
          </>
        ) : writing ? (
          <>
            <p className="waiting">The papers are being written…</p>
            <PressButton onPress={stopPlan}>Stop writing</PressButton>
          </>
        ) : (
          <Waiting what="The papers" />
        )
      }
      figures={
        files && (
          <>
            <PaperList files={files} shown={shownFile?.path ?? null} onShow={setShown} />
            <FigureTable
              caption="Title block"
              rows={[
                {
                  what: "Revision",
                  value: facts?.job.revision ?? "",
                  against: "hash of the job and everything it reads",
                },
                { what: "Issue", value: facts?.job.issue ?? "" },
                ...(papers?.added ?? []).map((f) => ({
                  what: "Names changed on the sheets",
                  value: String(f.value ?? ""),
                  against: `${f.text} ${[f.where].flat().join(", ")}`,
                })),
              ]}
            />
          </>
        )
      }
      decisionsFirst
      decisions={
        <>
          <FoldedChoices />
          <PaperDecisions />
        </>
      }
    />
  );
}
