// Form: is this surface in balance, at which forces?
import type { Facts } from "../../../core/records/facts.ts";
import { setMeshWord } from "../../actions/form/setMeshWord.ts";
import { setSettle } from "../../actions/form/setSettle.ts";
import { FieldPicker } from "../../parts/FieldPicker.tsx";
import { ChoiceField, SwitchField } from "../../parts/Fields.tsx";
import { type FigureRow, FigureTable } from "../../parts/FigureTable.tsx";
import { figure } from "../../parts/figure.ts";
import { Waiting } from "../../parts/Waiting.tsx";
import { LazySolid } from "../../solid/LazySolid.tsx";
import { act } from "../../store/bookStore.ts";
import { useBook } from "../../store/useBook.ts";
import { useShownFacts, useShownFields } from "../../store/useShown.ts";
import { LeafFrame } from "../LeafFrame.tsx";
import { AnchorDecisions } from "./AnchorDecisions.tsx";
import { EdgeDecisions } from "./EdgeDecisions.tsx";
import { PrestressDecisions } from "./PrestressDecisions.tsx";

function FormDecisions() {
  const given = useBook((b) => b.project?.job);
  if (given === undefined) return null;
  return (
    <>
      <PrestressDecisions />
      <SwitchField
        label="Settle the mesh into balance first"
        path="settle"
        given={given.settle !== undefined}
        value={given.settle ?? false}
        hint="off: the form is taken as it is and checked"
        onChange={(value) => act(setSettle, { value: value ? true : undefined }, "settling")}
      />
      <ChoiceField
        label="Unit of the mesh"
        path="mesh.unit"
        given={given.mesh.unit !== undefined}
        value={given.mesh.unit ?? "m"}
        choices={["m", "mm", "cm", "ft", "in"].map((u) => ({ value: u, words: u }))}
        onChange={(value) => act(setMeshWord, { key: "unit", value }, "unit of the mesh")}
      />
      <ChoiceField
        label="Axis that points up"
        path="mesh.up"
        given={given.mesh.up !== undefined}
        value={given.mesh.up ?? "z"}
        choices={["z", "y"].map((u) => ({ value: u, words: u }))}
        onChange={(value) => act(setMeshWord, { key: "up", value }, "up axis of the mesh")}
      />
      <EdgeDecisions />
      <AnchorDecisions />
    </>
  );
}

type Form = NonNullable<Facts["form"]>;

function tellForce({ forceFrom, spread }: Form["edges"][number]): string {
  if (forceFrom === "job") return "given by the job";
  if (forceFrom === "sag") return "usual sag, nobody says the force";
  const sure = spread === undefined ? "" : spread < 0.005 ? ", to 0.01 kN" : `, ± ${figure(spread, 2)} kN`;
  return `best balance with the cloth${sure}`;
}

/** Curvature, which says how narrow strips must be, and slope, by which water runs off. */
function reliefRows(relief: Form["relief"]): FigureRow[] {
  if (relief === undefined) return [];
  const { curvature, stripWidth, slope, flatShare } = relief;
  const rows: FigureRow[] = [];
  if (curvature)
    rows.push({
      what: "Gaussian curvature",
      value: `${figure(curvature.least)} to ${figure(curvature.greatest)}`,
      unit: "1/m²",
      ...(stripWidth === null
        ? {}
        : { against: `a strip ${figure(stripWidth, 2)} m wide has edges 0.5 % off its middle` }),
    });
  rows.push({
    what: "Least slope",
    value: figure(slope.least, 1),
    unit: "°",
    against: `${figure(100 * flatShare, 1)} % of the cloth below 2°`,
  });
  return rows;
}

/** The leaf. */
export function FormLeaf() {
  const facts = useShownFacts("form");
  const fields = useShownFields("form");
  const field = useBook((b) => b.field);
  const form = facts?.form;
  const shown = field === "residual" || field === "curvature" ? field : "none";
  const limit = facts?.checks.find((c) => c.station === "form" && c.text.startsWith("residual"));
  const judged = limit ? `, ${limit.holds ? "within" : "beyond"} the ${figure(Number(limit.limit))} asked for` : "";
  const answer =
    form === undefined
      ? "Not worked out yet."
      : `${figure(form.area, 1)} m² on ${form.edges.length} edges; out of balance by ${figure(limit ? Number(limit.value) : form.residual.max)} of the cloth’s own force at the worst point${judged}.`;
  const cables = form?.edges.filter((e) => e.force !== null) ?? [];
  return (
    <LeafFrame
      leaf="form"
      station="form"
      question="Is this surface in balance, and at which forces?"
      answer={answer}
      tools={<FieldPicker fields={["none", "residual", "curvature"]} value={shown} />}
      stage={
        facts && form ? (
          <LazySolid
            facts={facts}
            fields={fields}
            field={shown}
            words={`The surface, ${figure(form.area, 1)} square metres.`}
          />
        ) : (
          <Waiting what="The surface" />
        )
      }
      figures={
        form && (
          <FigureTable
            caption="Form"
            rows={[
              { what: "Area", value: figure(form.area, 2), unit: "m²" },
              { what: "Triangles", value: String(form.triangles.length) },
              ...(limit
                ? [
                    {
                      what: "Out of balance, as judged",
                      value: figure(Number(limit.value)),
                      against: `limit ${figure(Number(limit.limit))} of the mean force of the cloth`,
                      holds: limit.holds,
                    },
                  ]
                : []),
              {
                what: "… greatest, any direction",
                value: figure(form.residual.max),
              },
              { what: "… across the cloth", value: figure(form.residual.normalMax) },
              ...(form.residual.tangentialMax === undefined
                ? []
                : [{ what: "… within the cloth", value: figure(form.residual.tangentialMax) }]),
              { what: "… mean (rms)", value: figure(form.residual.rms) },
              ...reliefRows(form.relief),
              ...cables.slice(0, 12).map((e) => ({
                id: e.id,
                what: `Cable ${e.id}`,
                value: figure(e.force ?? 0, 2),
                unit: "kN",
                against: tellForce(e),
              })),
              ...form.reactions.slice(0, 12).map((r) => ({
                id: r.anchor,
                what: `Pull on ${r.anchor}`,
                value: figure(Math.hypot(...r.force), 2),
                unit: "kN",
                against: `x ${figure(r.force[0], 2)}, y ${figure(r.force[1], 2)}, z ${figure(r.force[2], 2)}`,
              })),
            ]}
          />
        )
      }
      decisions={<FormDecisions />}
    />
  );
}
