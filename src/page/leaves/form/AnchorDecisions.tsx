// What can be decided about the anchors: where the far pin is, how far the cloth is cut back, one more, one less.
import { useState } from "react";
import { addAnchor, removeAnchor, setAnchor } from "../../actions/form/setAnchor.ts";
import { NumberField } from "../../parts/Fields.tsx";
import { Fold } from "../../parts/Fold.tsx";
import { figure } from "../../parts/figure.ts";
import { PointField } from "../../parts/PointField.tsx";
import { pointing } from "../../parts/pointing.ts";
import { act } from "../../store/bookStore.ts";
import { useBook } from "../../store/useBook.ts";
import { useShownFacts } from "../../store/useShown.ts";

function Anchor({ id, at }: { id: string; at: readonly number[] }) {
  const own = useBook((b) => b.project?.job.anchors?.find((a) => a.name === id));
  const chosen = useBook((b) => b.chosen === id);
  const named = `anchors.${id}`;
  return (
    <fieldset className={chosen ? "edge lit" : "edge"} data-path={named} {...pointing(id)}>
      <legend>
        {id} <span className="quiet">at {at.map((v) => figure(v, 2)).join(", ")} m</span>
      </legend>
      <PointField
        label={`Far pin of ${id}`}
        path={`${named}.support`}
        given={own?.support !== undefined}
        value={own?.support ?? null}
        hint={own?.support === undefined ? "not given: 1.0 m out along the pull" : undefined}
        onChange={(value) => act(setAnchor, { anchor: id, key: "support", value }, `far pin of ${id}`)}
      />
      <NumberField
        label={`Cloth cut back at ${id}`}
        path={`${named}.cutBack`}
        given={own?.cutBack !== undefined}
        value={own?.cutBack ?? null}
        none="0"
        unit="mm"
        onChange={(value) => act(setAnchor, { anchor: id, key: "cutBack", value }, `cut back at ${id}`)}
      />
      {own?.at !== undefined && (
        <button type="button" onClick={() => act(removeAnchor, { anchor: id }, `anchor ${id} removed`)}>
          Remove anchor
        </button>
      )}
    </fieldset>
  );
}

function NewAnchor() {
  const [name, setName] = useState("");
  const taken = useBook((b) => b.project?.job.anchors?.some((a) => a.name === name.trim()) ?? false);
  return (
    <fieldset className="edge">
      <legend>One more anchor</legend>
      <label className="field">
        Its name <input value={name} autoComplete="off" onChange={(e) => setName(e.target.value)} />
      </label>
      {taken && <p className="fault">The job has an anchor of that name.</p>}
      <PointField
        label="Place of the new anchor"
        path="anchors.new"
        given
        value={null}
        hint="at the vertex nearest to it; give the name first"
        onChange={(at) => {
          if (at === undefined || name.trim() === "" || taken) return;
          act(addAnchor, { anchor: name.trim(), at }, `anchor ${name.trim()} added`);
          setName("");
        }}
      />
    </fieldset>
  );
}

/** One group for each anchor that cables and adjusters hang from, and those the job speaks of. */
export function AnchorDecisions() {
  const form = useShownFacts("form")?.form;
  const given = useBook((b) => b.project?.job.anchors);
  const chosen = useBook((b) => b.chosen);
  if (form === undefined) return null;
  const told = new Set(given?.map((a) => a.name));
  const listed = form.anchors.filter((a) => a.isolated || told.has(a.id));
  return (
    <Fold
      className="group"
      path="anchors"
      open={listed.some((a) => a.id === chosen)}
      words={`Anchors (${listed.length})`}
    >
      {listed.map((a) => (
        <Anchor key={a.id} id={a.id} at={form.vertices[a.vertex]} />
      ))}
      <NewAnchor />
    </Fold>
  );
}
