// The survey: where anchors, far pins and clamped edges really are. The plan follows them.
import { useState } from "react";
import { addSurveyed, moveSurveyed, type Surveyed, setClothCut } from "../../actions/site/survey.ts";
import { ChoiceField, SwitchField } from "../../parts/Fields.tsx";
import { Fold } from "../../parts/Fold.tsx";
import { PointField } from "../../parts/PointField.tsx";
import { readEntry, refuseEntry } from "../../parts/readEntry.ts";
import { act } from "../../store/bookStore.ts";
import { useBook } from "../../store/useBook.ts";

const nameOf = (p: Surveyed) =>
  "anchor" in p ? p.anchor : `${p.edge} at ${Number((100 * p.along).toPrecision(6))} % of its length`;

/** What can be surveyed: anchors as "anchor NAME", clamped edges as "edge NAME". */
function useSurveyable(): { value: string; words: string }[] {
  const form = useBook((b) => b.facts?.form);
  const clamped = form?.edges.filter((e) => e.kind === "clamped") ?? [];
  return [
    { value: "", words: "anchor or clamped edge" },
    ...(form?.anchors ?? []).filter((a) => a.isolated).map((a) => ({ value: `anchor ${a.id}`, words: a.id })),
    ...clamped.map((e) => ({ value: `edge ${e.id}`, words: `${e.id}, clamped edge` })),
  ];
}

/** Why no place of an edge lies at a share of its length, %; null where one does. */
function tellOff(share: number | undefined): string | null {
  if (share === undefined || (share >= 0 && share <= 100)) return null;
  return `${share} % is off the edge: 0 % is its one end, 100 % its other`;
}

function NewPoint() {
  const [what, setWhat] = useState("");
  const [along, setAlong] = useState("");
  const onEdge = what.startsWith("edge ");
  const name = what.slice(what.indexOf(" ") + 1);
  const share = readEntry(along, "%");
  const fault = share === null ? refuseEntry(along, "%") : tellOff(share);
  const ready = what !== "" && (!onEdge || (share !== undefined && fault === null));
  return (
    <fieldset className="edge">
      <legend>One more surveyed point</legend>
      <ChoiceField
        label="It lies at"
        path="survey.new"
        given
        value={what}
        choices={useSurveyable()}
        onChange={setWhat}
      />
      {onEdge && (
        <label className="field">
          Along the edge, % of its length{" "}
          <input inputMode="decimal" autoComplete="off" value={along} onChange={(e) => setAlong(e.target.value)} />
          {fault !== null && (
            <p className="fault" role="alert">
              {fault}
            </p>
          )}
        </label>
      )}
      {ready && (
        <PointField
          label={`Where ${name} really is`}
          path="survey.new.at"
          given
          value={null}
          hint="the far pin where an adjuster stands there, else the anchor itself"
          onChange={(at) => {
            if (at === undefined) return;
            const point = onEdge ? { edge: name, along: Number(share) / 100, at } : { anchor: name, at };
            act(addSurveyed, { point }, `survey of ${nameOf(point)}`);
            setWhat("");
          }}
        />
      )}
    </fieldset>
  );
}

/** The fields. */
export function SurveyDecisions() {
  const survey = useBook((b) => b.project?.job.survey) ?? [];
  const cut = useBook((b) => b.project?.job.clothCut);
  return (
    <Fold className="group" path="survey" open={survey.length > 0} words={`Survey (${survey.length})`}>
      {survey.map((p, index) => (
        <div key={nameOf(p)} className="surveyed">
          <PointField
            label={nameOf(p)}
            path={`survey[${index}].at`}
            given
            value={p.at}
            onChange={(at) => act(moveSurveyed, { index, at }, `survey of ${nameOf(p)}`)}
          />
          <button
            type="button"
            onClick={() => act(moveSurveyed, { index, at: undefined }, `survey of ${nameOf(p)} removed`)}
          >
            Remove the survey of {nameOf(p)}
          </button>
        </div>
      ))}
      <NewPoint />
      <SwitchField
        label="The cloth is cut already"
        path="clothCut"
        given={cut !== undefined}
        value={cut ?? false}
        hint="on: a survey of clamped edges changes the stress, not the panels"
        onChange={(value) => act(setClothCut, { value }, "whether the cloth is cut")}
      />
    </Fold>
  );
}
