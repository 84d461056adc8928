// Seams: where do they run?
import { useEffect } from "react";
import { PairSheet } from "../../flat/PairSheet.tsx";
import { FigureTable } from "../../parts/FigureTable.tsx";
import { figure } from "../../parts/figure.ts";
import { PressButton } from "../../parts/PressButton.tsx";
import { ThingRow } from "../../parts/ThingRow.tsx";
import { Waiting } from "../../parts/Waiting.tsx";
import { WiderCloth } from "../../parts/WiderCloth.tsx";
import { LazySolid } from "../../solid/LazySolid.tsx";
import { bookStore } from "../../store/bookStore.ts";
import { isSameWork } from "../../store/hand.ts";
import { useBook } from "../../store/useBook.ts";
import { useShownFacts, useShownFields } from "../../store/useShown.ts";
import { watchSeams, weigher } from "../../worker/dragger.ts";
import { LeafFrame } from "../LeafFrame.tsx";
import { LayoutCards } from "./LayoutCards.tsx";
import { SeamDecisions } from "./SeamDecisions.tsx";

function SeamTable() {
  const seams = useShownFacts("seams")?.seams;
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
          <ThingRow key={s.id} id={s.id}>
            <td>{s.sides.map((side) => (side.panel === s.upper ? `${side.panel} (over)` : side.panel)).join(" · ")}</td>
            <td>
              <span className="meter" aria-hidden="true">
                <span style={{ width: `${(100 * s.length) / longest}%` }} />
              </span>
              {figure(s.length, 3)}
            </td>
          </ThingRow>
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
    <PressButton
      pressed={comparing}
      disabled={!ready}
      onPress={() => {
        if (!comparing) return weigher.begin();
        weigher.stop();
        bookStore.setState({ weighed: null });
      }}
    >
      {comparing ? "Back to the surface" : "Compare layouts"}
    </PressButton>
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
      : `${seams.length} ${seams.length === 1 ? "seam" : "seams"}, ${figure(total, 1)} m of weld, between ${panels?.length ?? layouts?.reduce((n, l) => n + l.panels.length, 0) ?? 0} panels.`;
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
                <strong>{l.region}</strong>: {l.count} strips as {l.layout}
                {l.from !== "" && `, ${l.from} to ${l.to}`}: {l.why}
              </p>
            ))}
            {facts && <WiderCloth facts={facts} />}
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
