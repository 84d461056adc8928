// The open job: head with its name and state, the spine with the leaves, the leaf itself.
import { FormLeaf } from "./leaves/form/FormLeaf.tsx";
import { PanelsLeaf } from "./leaves/panels/PanelsLeaf.tsx";
import { PapersLeaf } from "./leaves/papers/PapersLeaf.tsx";
import { RigLeaf } from "./leaves/rig/RigLeaf.tsx";
import { RollsLeaf } from "./leaves/rolls/RollsLeaf.tsx";
import { SeamsLeaf } from "./leaves/seams/SeamsLeaf.tsx";
import { SiteLeaf } from "./leaves/site/SiteLeaf.tsx";
import { countFindings } from "./parts/FindingList.tsx";
import { jumpTo, leafOfFinding, leafOfPath } from "./parts/jump.ts";
import { turnTheme } from "./parts/keys.ts";
import { PressButton } from "./parts/PressButton.tsx";
import { placeOfFault } from "./parts/placeOfFault.ts";
import { type Book as BookState, bookStore, LEAVES, type Leaf, redo, undo } from "./store/bookStore.ts";
import { useBook } from "./store/useBook.ts";
import { requestPlan, stopPlan } from "./worker/planner.ts";

const PAGES: Record<Leaf, () => React.ReactNode> = {
  form: FormLeaf,
  seams: SeamsLeaf,
  panels: PanelsLeaf,
  rolls: RollsLeaf,
  rig: RigLeaf,
  papers: PapersLeaf,
  site: SiteLeaf,
};

const NAMES: Record<Leaf, string> = {
  form: "Form",
  seams: "Seams",
  panels: "Panels",
  rolls: "Rolls",
  rig: "Rig",
  papers: "Papers",
  site: "Site",
};

function Spine() {
  const leaf = useBook((b) => b.leaf);
  const findings = useBook((b) => b.facts?.findings);
  return (
    <nav className="spine" aria-label="Leaves">
      <ol>
        {LEAVES.map((l, i) => {
          const told = countFindings(findings?.filter((f) => leafOfFinding(f) === l) ?? [], false);
          return (
            <li key={l}>
              <button
                type="button"
                aria-current={l === leaf ? "page" : undefined}
                onClick={() => bookStore.setState({ leaf: l })}
              >
                <span className="ordinal" aria-hidden="true">
                  {i + 1}
                </span>
                <span className="word">{NAMES[l]}</span>
                {told !== "" && <span className="told">{told}</span>}
              </button>
            </li>
          );
        })}
      </ol>
    </nav>
  );
}

/** The station by its leaf's name, and what is done in it. */
function tellProgress({ station, words }: BookState["progress"]): string {
  if (station === "job") return words;
  return words === "" ? NAMES[station] : `${NAMES[station]}: ${words}`;
}

function PlanState() {
  const status = useBook((b) => b.status);
  const progress = useBook((b) => b.progress);
  const project = useBook((b) => b.project);
  const facts = useBook((b) => b.facts);
  const findings = useBook((b) => b.facts?.findings);
  if (status === "running") {
    return (
      <div className="state">
        <progress max={1} value={progress.share} aria-label="Planning" />
        <span className="doing">{tellProgress(progress)}</span>
        <PressButton onPress={stopPlan}>Stop</PressButton>
      </div>
    );
  }
  const count = findings === undefined ? "" : countFindings(findings, true);
  return (
    <div className="state">
      {facts !== null && status === "done" && <span>Planned, revision {facts.job.revision}</span>}
      {status === "stopped" && <span>Stopped</span>}
      {status === "failed" && (
        <button type="button" onClick={() => document.getElementById("fault")?.scrollIntoView()}>
          Failed: why?
        </button>
      )}
      {(status === "stopped" || status === "failed") && project !== null && (
        <PressButton onPress={() => requestPlan(project)}>Plan again</PressButton>
      )}
      {count !== "" && (
        <button type="button" onClick={() => bookStore.setState({ sheet: "findings" })}>
          {count}
        </button>
      )}
    </div>
  );
}

function Head() {
  const title = useBook((b) => b.project?.job.title);
  const past = useBook((b) => b.past);
  const future = useBook((b) => b.future);
  const theme = useBook((b) => b.theme);
  const kept = useBook((b) => b.kept);
  const keeping = useBook((b) => b.keeping);
  const before = past.at(-1)?.words;
  const next = future[0]?.words;
  return (
    <header className="head">
      <button
        type="button"
        className="title"
        onClick={() => bookStore.setState({ sheet: "jobs" })}
        aria-label={`Seamstay ${title ?? ""}, open the list of jobs`}
      >
        <span className="brand">Seamstay</span> {title}
      </button>
      <PlanState />
      <div className="acts">
        <button
          type="button"
          onClick={undo}
          disabled={before === undefined}
          aria-label={before === undefined ? "Undo" : `Undo ${before}`}
          title={before}
        >
          ↶ Undo
        </button>
        <button
          type="button"
          onClick={redo}
          disabled={next === undefined}
          aria-label={next === undefined ? "Redo" : `Redo ${next}`}
          title={next}
        >
          ↷ Redo
        </button>
        <button type="button" onClick={turnTheme}>
          Colours: {theme === "system" ? "as the system" : theme}
        </button>
        <button type="button" onClick={() => bookStore.setState({ sheet: "jobs" })}>
          Jobs
        </button>
        <button type="button" onClick={() => bookStore.setState({ sheet: "keys" })}>
          Keys
        </button>
        <span className="kept" role="status">
          {keeping ? "keeping…" : kept === null ? "not kept" : `kept ${new Date(kept).toTimeString().slice(0, 5)}`}
        </span>
      </div>
    </header>
  );
}

function Fault() {
  const fault = useBook((b) => b.fault);
  const first = useBook((b) => b.past.length === 0);
  const job = useBook((b) => b.project?.job);
  if (fault === null) return null;
  const place = job && placeOfFault(fault, job);
  return (
    <div id="fault" className="banner grave" role="alert">
      <div>
        <strong>Not planned.</strong>{" "}
        {fault.message.split("\n").map((line) => (
          <p key={line}>{line}</p>
        ))}
        <p className="basis">{fault.code}</p>
      </div>
      {place && (
        <button type="button" onClick={() => jumpTo(leafOfPath(place) ?? "form", place)}>
          Show me
        </button>
      )}
      {(first || /^(obj|mesh)-/.test(fault.code)) && (
        // nothing was changed here, or nothing here changes it: what is wrong came with the files
        <button type="button" onClick={() => bookStore.setState({ sheet: "jobs" })}>
          Open another
        </button>
      )}
      {!first && (
        <button type="button" onClick={undo}>
          Undo
        </button>
      )}
    </div>
  );
}

/** The book. */
export function Book() {
  const leaf = useBook((b) => b.leaf);
  const running = useBook((b) => b.status === "running");
  const Page = PAGES[leaf];
  return (
    <div className="book">
      <Head />
      <Spine />
      <main className="paper" aria-busy={running}>
        <Fault />
        <Page key={leaf} />
      </main>
    </div>
  );
}
