// The frame of every leaf: its question, the thing itself large, the margin with figures and decisions beside it.
import type { Station } from "../../core/problem.ts";
import { CheckTable } from "../parts/CheckTable.tsx";
import { FindingList } from "../parts/FindingList.tsx";
import { leafOfFinding } from "../parts/jump.ts";
import { LastChange } from "../parts/LastChange.tsx";
import type { Leaf } from "../store/bookStore.ts";
import { useShownFacts } from "../store/useShown.ts";

/** A leaf; `stage` is left out until the plan has come that far. */
export function LeafFrame(props: {
  leaf: Leaf;
  station: Station;
  question: string;
  /** One sentence that answers it for now. */
  answer: string;
  tools?: React.ReactNode;
  stage: React.ReactNode;
  /** Left out, null or false where there are none yet. */
  figures?: React.ReactNode;
  decisions: React.ReactNode;
  /** Where they make what the figures list: they stand over it. */
  decisionsFirst?: boolean;
}) {
  const facts = useShownFacts(props.leaf);
  const findings = facts?.findings;
  const decisions = (
    <div className="card decisions">
      <h2>Decisions</h2>
      {props.decisions}
    </div>
  );
  const own = findings?.filter((f) => leafOfFinding(f) === props.leaf && f.level !== "note") ?? [];
  return (
    <div className={`leaf leaf-${props.leaf}`}>
      <header className="ask">
        <h1 tabIndex={-1}>{props.question}</h1>
        <p className="answer">
          {props.answer}
          <LastChange />
        </p>
      </header>
      <section className="stage" aria-label="The thing itself">
        {props.tools !== undefined && <div className="tools">{props.tools}</div>}
        {props.stage}
      </section>
      <section className="margin" aria-label="Figures and decisions" tabIndex={0}>
        {own.length > 0 && (
          <div className="card">
            <h2>To look at</h2>
            <FindingList findings={own} />
          </div>
        )}
        {props.decisionsFirst && decisions}
        {props.figures != null && props.figures !== false && (
          <div className="card">
            <h2>Figures</h2>
            {props.figures}
            <CheckTable checks={facts?.checks.filter((c) => c.station === props.station) ?? []} />
          </div>
        )}
        {!props.decisionsFirst && decisions}
      </section>
    </div>
  );
}
