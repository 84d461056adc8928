// What can be decided about rolls and nesting.
import { setNest } from "../../actions/rolls/setNest.ts";
import { setPin } from "../../actions/rolls/setPin.ts";
import { ChoiceField, NumberField, SwitchField } from "../../parts/Fields.tsx";
import { act } from "../../store/bookStore.ts";
import { useBook } from "../../store/useBook.ts";
import { StockDecisions } from "./StockDecisions.tsx";

function Pins() {
  const pins = useBook((b) => b.project?.job.nest?.pins);
  return (
    <div className="group" data-path="nest.pins">
      <h3>Pinned panels</h3>
      {!pins?.length && (
        <p className="hint">None. Drag a panel on the roll, or move it with the arrow keys, and it stays there.</p>
      )}
      {pins?.map((p, i) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: a job may pin a panel twice, which is told as a fault
        <p key={`${p.panel} ${i}`} className="row" data-path={`nest.pins[${i}]`}>
          {p.panel} on {p.roll} at {(p.x / 1000).toFixed(2)} m
          <button type="button" onClick={() => act(setPin, { panel: p.panel, place: null }, `${p.panel} let go`)}>
            Let go
          </button>
        </p>
      ))}
    </div>
  );
}

/** The decisions of the leaf. */
export function RollDecisions() {
  const given = useBook((b) => b.project?.job.nest);
  const nest = useBook((b) => b.job?.nest);
  const number = (
    key: "gap" | "steps" | "seconds" | "bite",
    label: string,
    unit: string,
    none?: string,
    hint?: string,
  ) => (
    <NumberField
      label={label}
      path={`nest.${key}`}
      given={given?.[key] !== undefined && given[key] !== null}
      value={given?.[key] ?? nest?.[key] ?? null}
      unit={unit}
      {...(none === undefined ? {} : { none, open: true })}
      {...(hint === undefined ? {} : { hint })}
      onChange={(value) => act(setNest, { key, value }, label.toLowerCase())}
    />
  );
  return (
    <>
      <StockDecisions />
      {number("gap", "Gap between cuts", "mm")}
      {number("bite", "Longest piece the table takes", "mm", "no limit")}
      <ChoiceField
        label="A longer piece"
        path="nest.pastBite"
        given={given?.pastBite !== undefined}
        value={given?.pastBite ?? "refuse"}
        choices={[
          { value: "refuse", words: "is a stop" },
          { value: "feed", words: "is fed on at marks" },
        ]}
        onChange={(value) => act(setNest, { key: "pastBite", value }, "pieces longer than the table")}
      />
      <SwitchField
        label="Neighbours may share one cut"
        path="nest.sharedEdges"
        given={given?.sharedEdges !== undefined}
        value={given?.sharedEdges ?? false}
        onChange={(value) => act(setNest, { key: "sharedEdges", value: value ? true : undefined }, "shared cuts")}
      />
      <SwitchField
        label="Panels may lie turned by 180°"
        path="nest.turn"
        given={given?.turn !== undefined}
        value={given?.turn ?? nest?.turn ?? true}
        onChange={(value) => act(setNest, { key: "turn", value }, "turning panels")}
      />
      {number(
        "steps",
        "Steps of search",
        "",
        undefined,
        "more steps may save cloth; the same steps give the same layout",
      )}
      {number("seconds", "At most", "s", "no limit")}
      <Pins />
    </>
  );
}
