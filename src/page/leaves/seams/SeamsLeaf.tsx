// Seams: where do they run?
import { useEffect } from "react";
import { setLayout } from "../../actions/seams/setLayout.ts";
import { PairSheet } from "../../flat/PairSheet.tsx";
import { ChoiceField, NumberField, SwitchField, TextField } from "../../parts/Fields.tsx";
import { FigureTable } from "../../parts/FigureTable.tsx";
import { figure } from "../../parts/figure.ts";
import { Waiting } from "../../parts/Waiting.tsx";
import { LazySolid } from "../../solid/LazySolid.tsx";
import { act, bookStore } from "../../store/bookStore.ts";
import { isSameWork } from "../../store/hand.ts";
import { useBook } from "../../store/useBook.ts";
import { useShownFacts, useShownFields } from "../../store/useShown.ts";
import { watchSeams, weighLayouts } from "../../worker/dragger.ts";
import { LeafFrame } from "../LeafFrame.tsx";
import { LayoutCards } from "./LayoutCards.tsx";
import { SeamEnds } from "./SeamEnds.tsx";

const LAYOUTS = [
  { value: "auto", words: "automatic: fewest strips that fit" },
  { value: "bands", words: "bands between two edges" },
  { value: "gores", words: "gores from a ring or peak" },
  { value: "pairs", words: "by hand: given pairs" },
] as const;

function EdgeChoice({ side }: { side: "from" | "to" }) {
  const edges = useBook((b) => b.facts?.form?.edges);
  const value = useBook((b) => b.project?.job.seams?.[side]);
  const choices = [
    { value: "", words: "chosen by the plan" },
    ...(edges ?? []).map((e) => ({ value: e.id, words: e.id })),
  ];
  return (
    <ChoiceField
      label={side === "from" ? "From edge" : "To edge"}
      path={`seams.${side}`}
      given={value !== undefined}
      value={value ?? ""}
      choices={choices}
      onChange={(v) => act(setLayout, { key: side, value: v === "" ? undefined : v }, `seams ${side}`)}
    />
  );
}

function SeamDecisions() {
  const given = useBook((b) => b.project?.job.seams);
  const job = useBook((b) => b.job);
  const layout = given?.layout ?? (given?.pairs === undefined ? "auto" : "pairs");
  return (
    <>
      {layout !== "pairs" && (
        <>
          <ChoiceField
            label="Layout"
            path="seams.layout"
            given={given?.layout !== undefined}
            value={layout}
            choices={LAYOUTS.filter((l) => l.value !== "pairs")}
            onChange={(value) => act(setLayout, { key: "layout", value }, "layout of seams")}
          />
          <NumberField
            label="Number of strips"
            path="seams.count"
            given={typeof given?.count === "number"}
            value={typeof given?.count === "number" ? given.count : null}
            none="fewest"
            unit=""
            onChange={(value) =>
              act(
                setLayout,
                { key: "count", value: value === undefined ? undefined : Math.round(value) },
                "number of strips",
              )
            }
          />
          <EdgeChoice side="from" />
          <EdgeChoice side="to" />
        </>
      )}
      <NumberField
        label="Widest strip"
        path="seams.maxWidth"
        given={given?.maxWidth !== undefined}
        value={given?.maxWidth ?? null}
        none={job?.seams.maxWidth == null ? "usable roll" : ""}
        unit="mm"
        hint="flat, with allowances"
        onChange={(value) => act(setLayout, { key: "maxWidth", value }, "widest strip")}
      />
      <NumberField
        label="Narrowest panel"
        path="seams.minWidth"
        given={given?.minWidth !== undefined}
        value={given?.minWidth ?? null}
        none="not stated"
        open
        unit="mm"
        hint="flat, without allowances"
        onChange={(value) => act(setLayout, { key: "minWidth", value }, "narrowest panel")}
      />
      <NumberField
        label="Longest panel"
        path="seams.maxLength"
        given={given?.maxLength !== undefined}
        value={given?.maxLength ?? null}
        none="roll length"
        unit="mm"
        onChange={(value) => act(setLayout, { key: "maxLength", value }, "longest panel")}
      />
      <SwitchField
        label="Laps count as two layers of cloth"
        path="seams.doubleCloth"
        given={given?.doubleCloth !== undefined}
        value={given?.doubleCloth ?? false}
        onChange={(value) => act(setLayout, { key: "doubleCloth", value: value ? true : undefined }, "double cloth")}
      />
      {given?.why !== undefined && (
        <TextField
          label="Why this layout"
          path="seams.why"
          given
          value={given.why}
          onChange={(value) => act(setLayout, { key: "why", value: value || undefined }, "why this layout")}
        />
      )}
      <SeamEnds />
    </>
  );
}

function SeamTable() {
  const seams = useShownFacts("seams")?.seams;
  const pointed = useBook((b) => b.pointed);
  const chosen = useBook((b) => b.chosen);
  if (seams === undefined || seams.length === 0) return null;
  const longest = Math.max(...seams.map((s) => s.length));
  return (
    <table className="things">
      <caption>Seams</caption>
      <thead>
        <tr>
          <th scope="col">Seam</th>
          <th scope="col">Joins</th>
          <th scope="col">Length, m</th>
        </tr>
      </thead>
      <tbody>
        {seams.map((s) => (
          <tr
            key={s.id}
            className={s.id === chosen || s.id === pointed ? "lit" : undefined}
            onPointerEnter={() => bookStore.setState({ pointed: s.id })}
            onPointerLeave={() => bookStore.setState({ pointed: null })}
          >
            <th scope="row">
              <button type="button" className="place" onClick={() => bookStore.setState({ chosen: s.id })}>
                {s.id}
              </button>
            </th>
            <td>{s.sides.map((side) => (side.panel === s.upper ? `${side.panel} (over)` : side.panel)).join(" · ")}</td>
            <td>
              <span className="meter" aria-hidden="true">
                <span style={{ width: `${(100 * s.length) / longest}%` }} />
              </span>
              {figure(s.length, 3)}
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}

/** Puts other layouts beside the one that stands, and away again. */
function CompareButton() {
  const ready = useBook((b) => isSameWork(b.grips?.of, b.project) && b.facts?.seams !== undefined);
  const comparing = useBook((b) => isSameWork(b.weighed?.of, b.project));
  return (
    <button
      type="button"
      aria-pressed={comparing}
      disabled={!ready}
      onClick={() => (comparing ? bookStore.setState({ weighed: null }) : weighLayouts())}
    >
      {comparing ? "Back to the surface" : "Compare layouts"}
    </button>
  );
}

/** The leaf. */
export function SeamsLeaf() {
  useEffect(watchSeams, []);
  const facts = useShownFacts("seams");
  const fields = useShownFields("seams");
  const comparing = useBook((b) => isSameWork(b.weighed?.of, b.project));
  const { seams, layouts, panels } = facts ?? {};
  const total = seams?.reduce((sum, s) => sum + s.length, 0) ?? 0;
  const answer =
    seams === undefined
      ? "Not worked out yet."
      : `${seams.length} seams, ${figure(total, 1)} m of weld, between ${panels?.length ?? layouts?.reduce((n, l) => n + l.panels.length, 0) ?? 0} panels.`;
  return (
    <LeafFrame
      leaf="seams"
      station="seams"
      question="Where do the seams run?"
      answer={answer}
      tools={<CompareButton />}
      stage={
        facts && seams && comparing ? (
          <LayoutCards />
        ) : facts && seams ? (
          <div className="withpair">
            <LazySolid
              facts={facts}
              fields={fields}
              field="none"
              words={`The surface with ${seams.length} seams.`}
              grips
            />
            <PairSheet />
          </div>
        ) : (
          <Waiting what="The seams" />
        )
      }
      figures={
        seams && (
          <>
            {layouts?.map((l) => (
              <p key={l.region} className="why">
                <strong>{l.region}</strong>: {l.count} strips as {l.layout}, {l.from} to {l.to}. {l.why}
              </p>
            ))}
            <FigureTable
              caption="Totals"
              rows={[
                { what: "Seams", value: String(seams.length) },
                { what: "Weld", value: figure(total, 2), unit: "m" },
              ]}
            />
            <SeamTable />
          </>
        )
      }
      decisions={<SeamDecisions />}
    />
  );
}
