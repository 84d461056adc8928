// What can be decided about the adjusters and what else holds the roof up: turnbuckles, stiffness, struts, stays.

import turnbuckles from "../../../../templates/turnbuckles.json";
import type { FactsAdjuster } from "../../../core/records/rig.ts";
import { addAdjuster, removeAdjuster, setAdjuster } from "../../actions/rig/adjusters.ts";
import { setSupport } from "../../actions/rig/setSupport.ts";
import { ChoiceField, NumberField } from "../../parts/Fields.tsx";
import { Fold } from "../../parts/Fold.tsx";
import { pointing } from "../../parts/pointing.ts";
import { act } from "../../store/bookStore.ts";
import { useBook } from "../../store/useBook.ts";

const FIGURES = [
  { key: "shortest", label: "Shortest, pin to pin", unit: "mm" },
  { key: "longest", label: "Longest, pin to pin", unit: "mm" },
  { key: "perTurn", label: "Travel a turn", unit: "mm" },
  { key: "capacity", label: "Capacity", unit: "kN" },
] as const;

const CARRIED = [
  { key: "fitting", label: "Fitting" },
  { key: "anchorCapacity", label: "Anchor" },
] as const;

function Adjuster({ one: a, standing }: { one: FactsAdjuster; standing: readonly FactsAdjuster[] }) {
  const given = useBook((b) => b.project?.job.rig?.adjusters?.find((g) => g.name === a.id));
  const chosen = useBook((b) => b.chosen === a.id);
  const own = given?.turnbuckle;
  const inline = typeof own === "object" ? own : null;
  const standingOwn = { perTurn: a.perTurn, shortest: 1000 * a.range.shortest, longest: 1000 * a.range.longest };
  const path = `rig.adjusters.${a.id}`;
  const change = (
    key: "turnbuckle" | "EA" | "fitting" | "anchorCapacity",
    value: Parameters<typeof setAdjuster>[1]["value"],
    words: string,
  ) => act(setAdjuster, { adjuster: a.id, key, value, standing }, `${words} of ${a.id}`);
  return (
    <fieldset className={chosen ? "edge lit" : "edge"} data-path={path} {...pointing(a.id)}>
      <legend>
        {a.id} <span className="quiet">at {a.anchor}</span>
      </legend>
      <ChoiceField
        label={`Turnbuckle of ${a.id}`}
        path={`${path}.turnbuckle`}
        given={own !== undefined}
        value={inline ? "own" : typeof own === "string" ? own : ""}
        choices={[
          { value: "", words: `not given: ${own === undefined ? a.turnbuckle : "the default"}` },
          ...turnbuckles.turnbuckles.map((t) => ({ value: t.id, words: t.name })),
          { value: "own", words: "figures of its own" },
        ]}
        hint={a.capacity === null ? "no capacity given: the schedule is not for issue" : `capacity ${a.capacity} kN`}
        onChange={(value) => change("turnbuckle", value === "own" ? standingOwn : value || undefined, "turnbuckle")}
      />
      {inline &&
        FIGURES.map(({ key, label, unit }) => (
          <NumberField
            key={key}
            label={`${label} of ${a.id}`}
            path={`${path}.turnbuckle.${key}`}
            given={inline[key] !== undefined}
            value={inline[key] ?? null}
            none="not given"
            open
            unit={unit}
            onChange={(value) => {
              const { [key]: former, ...rest } = inline;
              // Without its lengths and its thread a turnbuckle is none: only the capacity may be left open.
              const next = {
                ...rest,
                ...(value === undefined ? (key === "capacity" ? {} : { [key]: former }) : { [key]: value }),
              };
              change("turnbuckle", next as typeof inline, label.toLowerCase());
            }}
          />
        ))}
      <NumberField
        label={`EA of ${a.id}`}
        path={`${path}.EA`}
        given={given?.EA !== undefined}
        value={given?.EA ?? null}
        none={String(Math.round(a.EA))}
        unit="kN"
        onChange={(value) => change("EA", value, "EA")}
      />
      {CARRIED.map(({ key, label }) => (
        <NumberField
          key={key}
          label={`${label} of ${a.id} carries`}
          path={`${path}.${key}`}
          given={given?.[key] !== undefined}
          value={given?.[key] ?? null}
          none="not given"
          open
          unit="kN"
          onChange={(value) => change(key, value, `capacity of the ${label.toLowerCase()}`)}
        />
      ))}
      <button
        type="button"
        onClick={() => act(removeAdjuster, { adjuster: a.id, standing }, `adjuster ${a.id} removed`)}
      >
        Remove {a.id}
      </button>
    </fieldset>
  );
}

function NewAdjuster({ standing }: { standing: readonly FactsAdjuster[] }) {
  const anchors = useBook((b) => b.facts?.form?.anchors);
  const free = anchors?.filter((a) => a.isolated && !standing.some((s) => s.anchor === a.id)) ?? [];
  if (free.length === 0) return null;
  return (
    <ChoiceField
      label="One more adjuster"
      path="rig.adjusters.new"
      given
      value=""
      choices={[{ value: "", words: "at an anchor without one" }, ...free.map((a) => ({ value: a.id, words: a.id }))]}
      onChange={(anchor) => anchor !== "" && act(addAdjuster, { anchor, standing }, `adjuster at ${anchor}`)}
    />
  );
}

const SUPPORTS = [
  { list: "struts", what: "Strut", figures: [{ key: "EA", label: "EA", none: "default" }] },
  {
    list: "stays",
    what: "Stay",
    figures: [
      { key: "EA", label: "EA", none: "default" },
      { key: "force", label: "Force", none: "what balance asks" },
      { key: "minBreakingForce", label: "Breaking force", none: "not given" },
    ],
  },
] as const;

type Support = { name: string } & { [K in "EA" | "force" | "minBreakingForce"]?: number | null | undefined };

function Supports() {
  const rig = useBook((b) => b.project?.job.rig);
  const listed = SUPPORTS.flatMap(({ list, what, figures }) =>
    ((rig?.[list] ?? []) as Support[]).map((one, index) => ({ list, what, figures, one, index })),
  );
  return listed.map(({ list, what, figures, one, index }) => (
    <fieldset key={`${list} ${one.name}`} className="edge" data-path={`rig.${list}[${index}]`}>
      <legend>
        {what} {one.name}
      </legend>
      {figures.map(({ key, label, none }) => (
        <NumberField
          key={key}
          label={`${label} of ${one.name}`}
          path={`rig.${list}[${index}].${key}`}
          given={typeof one[key] === "number"}
          value={one[key] ?? null}
          none={none}
          open={none === "not given"}
          unit="kN"
          onChange={(value) => act(setSupport, { list, index, key, value }, `${label} of ${one.name}`)}
        />
      ))}
    </fieldset>
  ));
}

/** One group for each adjuster, strut and stay. */
export function AdjusterDecisions() {
  const standing = useBook((b) => b.facts?.rig?.adjusters);
  const chosen = useBook((b) => b.chosen);
  return (
    <>
      {standing !== undefined && (
        <Fold
          className="group"
          path="rig.adjusters"
          open={standing.length <= 4 || standing.some((a) => a.id === chosen)}
          words={`Adjusters (${standing.length})`}
        >
          {standing.map((a) => (
            <Adjuster key={a.id} one={a} standing={standing} />
          ))}
          <NewAdjuster standing={standing} />
        </Fold>
      )}
      <Supports />
    </>
  );
}
