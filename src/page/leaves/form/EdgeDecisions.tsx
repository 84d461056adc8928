// What can be decided about the edges: what each is, the force and the cable of it.
import cables from "../../../../templates/cables.json";
import { setCableFigure } from "../../actions/form/setCableFigure.ts";
import { setEdge, setTerminal } from "../../actions/form/setEdge.ts";
import { ChoiceField, NumberField, SwitchField } from "../../parts/Fields.tsx";
import { Fold } from "../../parts/Fold.tsx";
import { figure } from "../../parts/figure.ts";
import { pointing } from "../../parts/pointing.ts";
import { act } from "../../store/bookStore.ts";
import type { Project } from "../../store/project.ts";
import { useBook } from "../../store/useBook.ts";
import { useShownFacts } from "../../store/useShown.ts";

const KINDS = [
  { value: "", words: "as found" },
  { value: "cable", words: "cable" },
  { value: "clamped", words: "clamped" },
  { value: "free", words: "free" },
  { value: "ridge", words: "ridge cable" },
  { value: "valley", words: "valley cable" },
  { value: "belt", words: "belt" },
] as const;

const FIGURES = [
  { key: "EA", label: "EA", unit: "kN", hint: "E times the area E belongs to" },
  { key: "minBreakingForce", label: "Breaking force", unit: "kN", hint: "least, of the certificate" },
  { key: "diameter", label: "Diameter", unit: "mm", hint: undefined },
  { key: "mass", label: "Mass", unit: "kg/m", hint: undefined },
] as const;

type EdgeWord = NonNullable<Project["job"]["edges"]>[string];

const MAKING = [
  { key: "stretch", label: "Grows for good", unit: "%", factor: 0.01, hint: "of its length" },
  { key: "fitting", label: "End fitting carries", unit: "kN", factor: 1, hint: undefined },
  { key: "clamps", label: "A clamp every", unit: "mm", factor: 1, hint: undefined },
] as const;

/** How the cable is made; folded away until something of it is given. */
function Making({ edge, own }: { edge: string; own: EdgeWord | undefined }) {
  const given = own?.terminals !== undefined || MAKING.some(({ key }) => own?.[key] !== undefined);
  return (
    <Fold className="made" open={given} words="How the cable is made">
      {([0, 1] as const).map((end) => (
        <NumberField
          key={end}
          label={`${end === 0 ? "First" : "Last"} end fitting takes off`}
          path={`edges.${edge}.terminals[${end}]`}
          given={own?.terminals !== undefined}
          value={own?.terminals?.[end] ?? null}
          none="0"
          unit="mm"
          onChange={(value) => act(setTerminal, { edge, end, value }, `end fitting of ${edge}`)}
        />
      ))}
      {MAKING.map(({ key, label, unit, factor, hint }) => (
        <NumberField
          key={key}
          label={label}
          path={`edges.${edge}.${key}`}
          given={own?.[key] !== undefined}
          value={own?.[key] ?? null}
          none="not given"
          open
          unit={unit}
          factor={factor}
          hint={hint}
          onChange={(value) => act(setEdge, { edge, key, value }, `${label.toLowerCase()} of ${edge}`)}
        />
      ))}
    </Fold>
  );
}

function Cable({ edge, own }: { edge: string; own: EdgeWord | undefined }) {
  const type = useBook((b) => b.facts?.cables?.find((c) => c.edge === edge)?.type);
  const path = `edges.${edge}.cable`;
  const given = own?.cable;
  // what the job says of all edges is said of this one
  const shared = useBook((b) => b.project?.job.edges?.default?.cable);
  const inline = typeof given === "object" ? given : null;
  const word = shared === undefined ? "not given" : "as all edges";
  return (
    <>
      <ChoiceField
        label="Cable"
        path={path}
        given={given !== undefined || shared !== undefined}
        value={inline ? "own" : typeof given === "string" ? given : ""}
        choices={[
          { value: "", words: type === undefined || type === "job" ? word : `${word}: ${type}` },
          ...cables.cables.map((c) => ({ value: c.id, words: c.name })),
          { value: "own", words: "figures of its own" },
        ]}
        hint={
          given === undefined && shared === undefined
            ? "the engineer sizes it; without it the schedule is not for issue"
            : undefined
        }
        onChange={(value) => {
          if (value === "own") act(setCableFigure, { edge, key: "EA", value: eaOf(given ?? type) }, `cable of ${edge}`);
          else act(setEdge, { edge, key: "cable", value: value === "" ? undefined : value }, `cable of ${edge}`);
        }}
      />
      {inline &&
        FIGURES.map(({ key, label, unit, hint }) => (
          <NumberField
            key={key}
            label={`${label} of the cable`}
            path={`${path}.${key}`}
            given={inline[key] !== undefined}
            value={inline[key] ?? null}
            none="not given"
            open
            unit={unit}
            hint={hint}
            onChange={(value) => act(setCableFigure, { edge, key, value }, `${label} of the cable of ${edge}`)}
          />
        ))}
      <Making edge={edge} own={own} />
      <SwitchField
        label="Prestretched"
        path={`edges.${edge}.prestretched`}
        given={own?.prestretched !== undefined}
        value={own?.prestretched ?? false}
        onChange={(value) =>
          act(setEdge, { edge, key: "prestretched", value: value ? true : undefined }, `prestretching of ${edge}`)
        }
      />
    </>
  );
}

/** EA of a catalogue cable, kN; that of the first where none is known. */
function eaOf(id: unknown): number {
  return (cables.cables.find((c) => c.id === id) ?? cables.cables[0]).EA.value;
}

/** One group for each edge. */
export function EdgeDecisions() {
  const edges = useShownFacts("form")?.form?.edges;
  const given = useBook((b) => b.project?.job.edges);
  const chosen = useBook((b) => b.chosen);
  if (edges === undefined) return null;
  return (
    <Fold
      className="group"
      open={edges.length <= 6 || edges.some((e) => e.id === chosen)}
      words={`Edges (${edges.length})`}
    >
      {edges.map((e) => {
        const own = given?.[e.id];
        const named = `edges.${e.id}`;
        return (
          <fieldset key={e.id} className={e.id === chosen ? "edge lit" : "edge"} data-path={named} {...pointing(e.id)}>
            <legend>
              {e.id} <span className="quiet">{figure(e.length, 2)} m</span>
            </legend>
            <ChoiceField
              label="Kind"
              path={`${named}.kind`}
              given={own?.kind !== undefined}
              value={own?.kind ?? ""}
              choices={KINDS.map((k) => (k.value === "" ? { ...k, words: `as found: ${e.kind}` } : k))}
              onChange={(v) =>
                act(setEdge, { edge: e.id, key: "kind", value: v === "" ? undefined : v }, `kind of ${e.id}`)
              }
            />
            {e.force !== null && (
              <>
                <NumberField
                  label="Force"
                  path={`${named}.force`}
                  given={typeof own?.force === "number"}
                  value={own?.force ?? null}
                  none={figure(e.force, 2)}
                  hint={e.forceFrom === "job" ? undefined : "by best balance with the cloth"}
                  unit="kN"
                  onChange={(v) => act(setEdge, { edge: e.id, key: "force", value: v }, `force of ${e.id}`)}
                />
                <Cable edge={e.id} own={own} />
              </>
            )}
          </fieldset>
        );
      })}
    </Fold>
  );
}
