// Rolls: which cloth, and where on it?
import type { ClothTotal, NestedRoll } from "../../../core/records/roll.ts";
import { RollKey, RollSheet } from "../../flat/RollSheet.tsx";
import { FigureTable } from "../../parts/FigureTable.tsx";
import { figure } from "../../parts/figure.ts";
import { ThingRow } from "../../parts/ThingRow.tsx";
import { Waiting } from "../../parts/Waiting.tsx";
import { WiderCloth } from "../../parts/WiderCloth.tsx";
import { bookStore } from "../../store/bookStore.ts";
import { totalPlan } from "../../store/planTotals.ts";
import { useBook } from "../../store/useBook.ts";
import { useShownFacts } from "../../store/useShown.ts";
import { LeafFrame } from "../LeafFrame.tsx";
import { RollDecisions } from "./RollDecisions.tsx";

function Fill({ rolls }: { rolls: readonly NestedRoll[] }) {
  return (
    <table className="things">
      <caption>How full the rolls are</caption>
      <thead>
        <tr>
          <th scope="col">Roll</th>
          <th scope="col">Taken off, m</th>
          <th scope="col">Used, %</th>
        </tr>
      </thead>
      <tbody>
        {rolls.map((r) => (
          <tr key={r.id}>
            <th scope="row">
              <button type="button" className="place" onClick={() => bookStore.setState({ chosen: r.id })}>
                {r.id}
              </button>
            </th>
            <td>
              {figure(r.used / 1000, 2)}
              <span className="against">no less than {figure(r.lowerBound / 1000, 2)}</span>
            </td>
            <td>
              <span className="meter" aria-hidden="true">
                <span style={{ width: `${100 * r.utilisation}%` }} />
              </span>
              {figure(100 * r.utilisation, 1)}
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}

/** All rolls together, against what no nest can do without. */
function Total({ cloth }: { cloth: ClothTotal }) {
  return (
    <FigureTable
      caption="All rolls"
      rows={[
        {
          what: "Taken off",
          value: figure(cloth.used, 2),
          unit: "m",
          against: `no nest on the widest roll needs less than ${figure(cloth.bound, 2)} m`,
        },
        { what: "Used", value: figure(100 * cloth.utilisation, 1), unit: "%" },
        ...(cloth.cost === null
          ? []
          : [{ what: "Cost of the cloth", value: figure(cloth.cost, 2), unit: cloth.currency ?? "" }]),
      ]}
    />
  );
}

/** What lies on a roll, in the order of cutting. */
function Pieces({ roll }: { roll: NestedRoll }) {
  const inOrder = [...roll.placements].sort((a, b) => (a.order ?? 0) - (b.order ?? 0));
  return (
    <details className="pieces">
      <summary>
        {inOrder.length} pieces on {roll.id}
      </summary>
      <table className="things">
        <caption>In the order of cutting</caption>
        <thead>
          <tr>
            <th scope="col">Piece</th>
            <th scope="col">No.</th>
            <th scope="col">Turned, °</th>
          </tr>
        </thead>
        <tbody>
          {inOrder.map((p) => (
            <ThingRow key={p.panel} id={p.panel}>
              <td>{p.order}</td>
              <td>{p.rotation}</td>
            </ThingRow>
          ))}
        </tbody>
      </table>
    </details>
  );
}

/** What the cloth told of is not enough for. */
function tellLeft(left: number): string {
  if (left === 0) return "";
  return ` ${left} ${left === 1 ? "piece lies" : "pieces lie"} on no roll: why stands under “To look at”.`;
}

/** The leaf. */
export function RollsLeaf() {
  const facts = useShownFacts("rolls");
  const chosen = useBook((b) => b.chosen);
  const rolls = facts?.rolls;
  const shown = rolls?.find((r) => r.id === chosen || r.placements.some((p) => p.panel === chosen)) ?? rolls?.[0];
  const total = facts && totalPlan(facts);
  return (
    <LeafFrame
      leaf="rolls"
      station="rolls"
      question="Which cloth, and where on it?"
      answer={
        rolls === undefined || total === null
          ? "Not worked out yet."
          : `${figure(total.taken, 2)} m of cloth from ${rolls.length} ${rolls.length === 1 ? "roll" : "rolls"}, ${figure(total.cloth, 1)} m² in all; ${figure(total.offcut, 1)} m² of it is left over as offcut.${tellLeft(total.left)}`
      }
      tools={
        rolls &&
        rolls.length > 1 && (
          <fieldset className="picker">
            <legend>Roll</legend>
            {rolls.map((r) => (
              <button
                type="button"
                key={r.id}
                aria-pressed={r === shown}
                onClick={() => bookStore.setState({ chosen: r.id })}
              >
                {r.id}
              </button>
            ))}
          </fieldset>
        )
      }
      stage={
        facts && shown ? (
          <>
            <RollSheet facts={facts} roll={shown} shape={0.72} />
            <RollKey roll={shown} />
          </>
        ) : (
          <Waiting what="The rolls" />
        )
      }
      figures={
        facts &&
        rolls &&
        shown && (
          <>
            <FigureTable
              caption={`Roll ${shown.id}`}
              rows={[
                {
                  what: "Width",
                  value: figure(shown.width, 0),
                  unit: "mm",
                  against: `${figure(shown.usableWidth, 0)} mm between the selvedges`,
                },
                {
                  what: "Taken off",
                  value: figure(shown.used / 1000, 3),
                  unit: "m",
                  against: `of ${figure(shown.length / 1000, 1)} m on the roll`,
                },
                { what: "Left on the roll", value: figure((shown.remnant ?? 0) / 1000, 2), unit: "m" },
                ...(typeof shown.cost === "number"
                  ? [{ what: "Cost of the cloth", value: figure(shown.cost, 2), unit: shown.currency ?? "" }]
                  : []),
                { what: "Between cuts", value: figure(shown.gap, 0), unit: "mm" },
              ]}
            />
            <Fill rolls={rolls} />
            {facts.cloth && <Total cloth={facts.cloth} />}
            <WiderCloth facts={facts} />
            <Pieces roll={shown} />
          </>
        )
      }
      decisions={<RollDecisions />}
    />
  );
}
