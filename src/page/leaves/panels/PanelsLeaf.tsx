// Panels: what is cut, and which stress will it take?
import type { FactsPanel } from "../../../core/records/facts.ts";
import { PanelKey } from "../../flat/PanelKey.tsx";
import { PanelSheet } from "../../flat/PanelSheet.tsx";
import { FieldPicker } from "../../parts/FieldPicker.tsx";
import { FigureTable } from "../../parts/FigureTable.tsx";
import { figure } from "../../parts/figure.ts";
import { ThingRow } from "../../parts/ThingRow.tsx";
import { Waiting } from "../../parts/Waiting.tsx";
import { WiderCloth } from "../../parts/WiderCloth.tsx";
import { LazySolid } from "../../solid/LazySolid.tsx";
import { bookStore } from "../../store/bookStore.ts";
import { useBook } from "../../store/useBook.ts";
import { useShownFacts, useShownFields } from "../../store/useShown.ts";
import { LeafFrame } from "../LeafFrame.tsx";
import { PanelDecisions } from "./PanelDecisions.tsx";

function PanelTable({ panels }: { panels: readonly FactsPanel[] }) {
  return (
    <table className="things">
      <caption>Panels</caption>
      <thead>
        <tr>
          <th scope="col">Panel</th>
          <th scope="col">Size, mm</th>
          <th scope="col">Warp kN/m</th>
          <th scope="col">Weft kN/m</th>
        </tr>
      </thead>
      <tbody>
        {panels.map((p) => (
          <ThingRow key={p.id} id={p.id}>
            <td>
              {figure(p.size.length, 0)} × {figure(p.size.width, 0)}
            </td>
            <td>
              {figure(p.stress.warp.mean, 2)} ± {figure(p.stress.warp.rmsError, 2)}
            </td>
            <td>
              {figure(p.stress.weft.mean, 2)} ± {figure(p.stress.weft.rmsError, 2)}
            </td>
          </ThingRow>
        ))}
      </tbody>
    </table>
  );
}

function PanelFigures({ panels }: { panels: readonly FactsPanel[] }) {
  const worst = (way: "warp" | "weft") => Math.max(...panels.map((p) => p.stress[way].rmsError));
  const [first] = panels;
  const sum = (of: (p: FactsPanel) => number) => panels.reduce((s, p) => s + of(p), 0);
  return (
    <>
      <FigureTable
        caption="All panels"
        rows={[
          {
            what: "Cloth to cut",
            value: figure(
              sum((p) => p.area.cut),
              2,
            ),
            unit: "m²",
            against: `${figure(
              sum((p) => p.area.net),
              2,
            )} m² without allowances`,
          },
          {
            what: "Warp stress off, worst panel (rms)",
            value: figure(worst("warp"), 3),
            unit: "kN/m",
            against: `wanted ${figure(first?.target.warp ?? 0, 2)} kN/m`,
          },
          {
            what: "Weft stress off, worst panel (rms)",
            value: figure(worst("weft"), 3),
            unit: "kN/m",
            against: `wanted ${figure(first?.target.weft ?? 0, 2)} kN/m`,
          },
          {
            what: "Slack or compressed, worst panel",
            value: figure(100 * Math.max(...panels.map((p) => p.stress.compressedShare)), 1),
            unit: "%",
            against: "share of its area",
          },
        ]}
      />
      <PanelTable panels={panels} />
    </>
  );
}

/** The leaf. */
export function PanelsLeaf() {
  const facts = useShownFacts("panels");
  const fields = useShownFields("panels");
  const field = useBook((b) => b.field);
  const chosen = useBook((b) => b.chosen);
  const panels = facts?.panels;
  const onForm = field === "warp" || field === "weft";
  const alone = panels?.some((p) => p.id === chosen) ? chosen : null;
  const cut = panels?.reduce((s, p) => s + p.area.cut, 0) ?? 0;
  return (
    <LeafFrame
      leaf="panels"
      station="panels"
      question="What is cut, and what stress will it take?"
      answer={
        panels === undefined
          ? "Not worked out yet."
          : `${panels.length} panels, ${figure(cut, 1)} m² of cloth with allowances.`
      }
      tools={
        <>
          <FieldPicker fields={["none", "warp", "weft"]} value={onForm ? field : "none"} />
          {alone !== null && !onForm && (
            <button type="button" onClick={() => bookStore.setState({ chosen: null })}>
              Show all panels
            </button>
          )}
        </>
      }
      stage={
        !facts || !panels || panels.length === 0 ? (
          <Waiting what="The panels" />
        ) : onForm ? (
          <LazySolid facts={facts} fields={fields} field={field} words="The panels on the form, coloured by stress." />
        ) : (
          <>
            <PanelSheet panels={panels} alone={alone} />
            <PanelKey panels={alone === null ? panels : panels.filter((p) => p.id === alone)} detail={alone !== null} />
          </>
        )
      }
      figures={
        facts &&
        panels &&
        panels.length > 0 && (
          <>
            <PanelFigures panels={panels} />
            <WiderCloth facts={facts} />
          </>
        )
      }
      decisions={<PanelDecisions />}
    />
  );
}
