// Papers: what leaves the office?
import { useEffect, useMemo, useState } from "react";
import { setHead } from "../../actions/papers/setHead.ts";
import { setPapers } from "../../actions/papers/setPapers.ts";
import { blobOf, fileStem, packJob, saveFile, zipFiles } from "../../keep/saveFiles.ts";
import { ChoiceField, TextField } from "../../parts/Fields.tsx";
import { FigureTable } from "../../parts/FigureTable.tsx";
import { Waiting } from "../../parts/Waiting.tsx";
import { act, type PaperFile } from "../../store/bookStore.ts";
import { useBook } from "../../store/useBook.ts";
import { requestPapers } from "../../worker/planner.ts";
import { LeafFrame } from "../LeafFrame.tsx";

const WHAT: [RegExp, string][] = [
  [/^facts\.json$/, "the whole plan as data"],
  [/^rolls\/.*\.dxf$/, "cut file of a roll"],
  [/^rolls\/.*\.svg$/, "drawing of a roll"],
  [/^panels\/.*\.dxf$/, "cut file of a panel"],
  [/^panels\/.*\.svg$/, "drawing of a panel"],
  [/\.csv$/, "list for a table program"],
  [/panel-cards/, "a card for each panel: lengths to check, marks, sides"],
  [/findings/, "what was checked, against what, what is open"],
  [/schedule|tension/, "moves with the force to read after each"],
  [/cable/, "cable lengths and marks"],
  [/hardware/, "hardware to order"],
  [/\.pdf$/, "sheets to print"],
];

const whatIs = (path: string) => WHAT.find(([kind]) => kind.test(path))?.[1] ?? "";
const sizeOf = (n: number) =>
  n < 1024 ? `${n} B` : n < 1024 * 1024 ? `${(n / 1024).toFixed(0)} kB` : `${(n / 1024 / 1024).toFixed(1)} MB`;

/** A drawing for the table has hairlines; on a screen they are drawn a pixel wide. Only for looking at. */
function thicken(file: PaperFile): PaperFile {
  const style = "<style>path{vector-effect:non-scaling-stroke;stroke-width:1.3px}</style>";
  const text = new TextDecoder().decode(file.bytes).replace("</title>", `</title>${style}`);
  return { path: file.path, bytes: new TextEncoder().encode(text) };
}

function Preview({ file }: { file: PaperFile | undefined }) {
  const url = useMemo(() => (file?.path.endsWith(".svg") ? URL.createObjectURL(blobOf(thicken(file))) : null), [file]);
  useEffect(
    () => () => {
      if (url !== null) URL.revokeObjectURL(url);
    },
    [url],
  );
  if (file === undefined) return <p className="waiting">Choose a paper from the list to look at it.</p>;
  if (url !== null)
    return (
      <div
        className={file.path.startsWith("rolls/") ? "preview roomy" : "preview"}
        tabIndex={0}
        role="group"
        aria-label={`Drawing ${file.path}`}
      >
        <img src={url} alt={`Drawing ${file.path}`} />
      </div>
    );
  if (/\.csv$/.test(file.path)) {
    const rows = new TextDecoder()
      .decode(file.bytes)
      .replace(/^\uFEFF/, "")
      .trimEnd()
      .split(/\r?\n/);
    return (
      <pre className="preview" tabIndex={0}>
        {rows.slice(0, 200).join("\n")}
      </pre>
    );
  }
  return (
    <p className="waiting">{file.path} is opened by its own program: save it, then open or print it from there.</p>
  );
}

function PaperList({
  files,
  shown,
  onShow,
}: {
  files: readonly PaperFile[];
  shown: string | null;
  onShow: (path: string) => void;
}) {
  return (
    <table className="things papers">
      <caption>Papers of this plan</caption>
      <thead>
        <tr>
          <th scope="col">Paper</th>
          <th scope="col">Size</th>
          <th scope="col">Save</th>
        </tr>
      </thead>
      <tbody>
        {files.map((f) => (
          <tr key={f.path} className={f.path === shown ? "lit" : undefined}>
            <th scope="row">
              <button type="button" className="place" onClick={() => onShow(f.path)}>
                {f.path}
              </button>
              <span className="against">{whatIs(f.path)}</span>
            </th>
            <td>{sizeOf(f.bytes.length)}</td>
            <td>
              <button type="button" aria-label={`Save ${f.path}`} onClick={() => saveFile(f)}>
                Save
              </button>
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}

function PaperDecisions() {
  const given = useBook((b) => b.project?.job);
  if (given === undefined) return null;
  const papers = given.papers ?? {};
  const line = (key: "date" | "drawnBy" | "checkedBy" | "supersedes", label: string) => (
    <TextField
      label={label}
      path={`papers.${key}`}
      given={papers[key] !== undefined}
      value={papers[key] ?? ""}
      none="left open"
      open
      onChange={(value) => act(setPapers, { key, value }, label.toLowerCase())}
    />
  );
  return (
    <>
      <TextField
        label="Title"
        path="title"
        given
        value={given.title}
        onChange={(value) => value !== undefined && act(setHead, { key: "title", value }, "title")}
      />
      <TextField
        label="Issue"
        path="issue"
        given={given.issue !== undefined}
        value={given.issue ?? "A"}
        onChange={(value) => act(setHead, { key: "issue", value }, "issue letter")}
      />
      {line("supersedes", "Takes the place of issue")}
      {line("date", "Date")}
      {line("drawnBy", "Drawn by")}
      {line("checkedBy", "Checked by")}
      <ChoiceField
        label="Sheet"
        path="papers.sheet"
        given={papers.sheet !== undefined}
        value={papers.sheet ?? "A4"}
        choices={["A4", "A3", "Letter", "Tabloid"].map((v) => ({ value: v, words: v }))}
        onChange={(value) => act(setPapers, { key: "sheet", value }, "sheet")}
      />
      <ChoiceField
        label="Units on paper"
        path="papers.units"
        given={papers.units !== undefined}
        value={papers.units ?? "metric"}
        choices={[
          { value: "metric", words: "metric" },
          { value: "imperial", words: "imperial" },
        ]}
        onChange={(value) => act(setPapers, { key: "units", value }, "units on paper")}
      />
    </>
  );
}

/** The leaf. */
export function PapersLeaf() {
  const facts = useBook((b) => b.facts);
  const status = useBook((b) => b.status);
  const papers = useBook((b) => b.papers);
  const fault = useBook((b) => b.papersFault);
  const writing = useBook((b) => b.writing);
  const project = useBook((b) => b.project);
  const [shown, setShown] = useState<string | null>(null);
  const files = papers?.of === facts ? papers?.files : undefined;
  useEffect(() => {
    if (status === "done" && facts !== null && files === undefined && !writing && fault === null) requestPapers(facts);
  }, [status, facts, files, writing, fault]);
  const stops = facts?.findings.filter((f) => f.level === "stop").length ?? 0;
  const stem = `${fileStem(facts?.job.title ?? "")}-${facts?.job.revision ?? ""}`;
  const shownFile = files?.find((f) => f.path === shown) ?? files?.find((f) => /^panels\/.*\.svg$/.test(f.path));
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
          : `${files.length} files, revision ${facts?.job.revision ?? ""}. ${stops > 0 ? `NOT FOR ISSUE: ${stops} ${stops === 1 ? "stop is" : "stops are"} open, and every paper says so.` : "Nothing stops them from being issued."}`
      }
      tools={
        <>
          <button
            type="button"
            className="main"
            disabled={files === undefined}
            onClick={async () => files && saveFile(await zipFiles(`${stem}.zip`, files))}
          >
            Save all papers (zip)
          </button>
          <button type="button" onClick={async () => project && saveFile(await packJob(project))}>
            Save the job with its mesh
          </button>
        </>
      }
      stage={
        files ? (
          <Preview file={shownFile} />
        ) : fault ? (
          <p className="waiting" role="alert">
            {fault.message}
          </p>
        ) : writing ? (
          <p className="waiting">The papers are being written…</p>
        ) : (
          <Waiting what="The papers" />
        )
      }
      figures={
        files && (
          <>
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
            <PaperList files={files} shown={shownFile?.path ?? null} onShow={setShown} />
          </>
        )
      }
      decisions={<PaperDecisions />}
    />
  );
}
