// What can be decided about the seams: how they are laid out, between which edges, how wide and long, one by one.
import { setLayout } from "../../actions/seams/setLayout.ts";
import { ChoiceField, NumberField, SwitchField, TextField } from "../../parts/Fields.tsx";
import { act } from "../../store/bookStore.ts";
import { useBook } from "../../store/useBook.ts";
import { SeamEnds } from "./SeamEnds.tsx";

const LAYOUTS = [
  { value: "auto", words: "automatic: fewest strips that fit" },
  { value: "bands", words: "bands between two edges" },
  { value: "gores", words: "gores from a ring or peak" },
  { value: "pairs", words: "by hand: given pairs" },
] as const;

const MEASURES = [
  { key: "maxWidth", label: "Widest strip", none: "usable roll", hint: "flat, with allowances" },
  { key: "minWidth", label: "Narrowest panel", none: "not stated", open: true, hint: "flat, without allowances" },
  { key: "maxLength", label: "Longest panel", none: "roll length" },
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

/** The decisions of the leaf. */
export function SeamDecisions() {
  const given = useBook((b) => b.project?.job.seams);
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
      {MEASURES.map(({ key, label, none, ...rest }) => (
        <NumberField
          key={key}
          label={label}
          path={`seams.${key}`}
          given={given?.[key] !== undefined}
          value={given?.[key] ?? null}
          none={none}
          unit="mm"
          {...rest}
          onChange={(value) => act(setLayout, { key, value }, label.toLowerCase())}
        />
      ))}
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
