// The cloth: one of the catalogue, or one of the job's own with every constant.
import fabrics from "../../../../templates/fabrics.json";
import { type ClothFigure, ownCloth, setClothFigure } from "../../actions/panels/setClothFigure.ts";
import { setFabric } from "../../actions/panels/setFabric.ts";
import { ChoiceField, NumberField } from "../../parts/Fields.tsx";
import { act } from "../../store/bookStore.ts";
import { useBook } from "../../store/useBook.ts";

const FIGURES: { key: ClothFigure; label: string; unit: string; factor?: number; hint?: string }[] = [
  { key: "Ew", label: "Stiffness along the warp, Ew", unit: "kN/m" },
  { key: "Ef", label: "Stiffness along the weft, Ef", unit: "kN/m" },
  { key: "nuWf", label: "Weft strain by unit warp strain, nuWf", unit: "" },
  { key: "G", label: "Shear stiffness, G", unit: "kN/m" },
  { key: "alpha", label: "Expansion by heat, alpha", unit: "10⁻⁶/K", factor: 1e-6 },
  { key: "rollWidth", label: "Width of a roll over all", unit: "mm" },
  { key: "selvedge", label: "Selvedge a side", unit: "mm" },
  { key: "rollLength", label: "Length of a roll", unit: "m", factor: 1000 },
  { key: "mass", label: "Mass", unit: "kg/m²" },
];

/** The choice and, for a cloth of the job's own, its constants. */
export function ClothDecisions() {
  const given = useBook((b) => b.project?.job.fabric);
  const standing = useBook((b) => b.job?.fabric);
  const inline = typeof given === "object" ? given : null;
  return (
    <>
      <ChoiceField
        label="Cloth"
        path="fabric"
        given={given !== undefined}
        value={inline ? "own" : typeof given === "string" ? given : fabrics.default}
        choices={[
          ...fabrics.fabrics.map((f) => ({ value: f.id, words: f.name })),
          { value: "own", words: inline?.id ? `own: ${inline.id}` : "constants of its own" },
        ]}
        hint={
          standing === undefined
            ? undefined
            : `Ew ${standing.Ew}, Ef ${standing.Ef} kN/m; roll ${standing.rollWidth} mm${inline ? "" : "; values of the catalogue, see the findings"}`
        }
        onChange={(value) => {
          if (value !== "own") act(setFabric, { value }, "cloth");
          else if (standing !== undefined) act(ownCloth, { standing }, "cloth of its own");
        }}
      />
      {inline &&
        standing &&
        FIGURES.map(({ key, label, unit, factor = 1, hint }) => (
          <NumberField
            key={key}
            label={label}
            path={`fabric.${key}`}
            given={inline[key] !== undefined}
            value={inline[key] ?? null}
            none={String(Number((standing[key] / factor).toPrecision(6)))}
            unit={unit}
            factor={factor}
            hint={hint}
            onChange={(value) => act(setClothFigure, { key, value, standing }, label.toLowerCase())}
          />
        ))}
    </>
  );
}
