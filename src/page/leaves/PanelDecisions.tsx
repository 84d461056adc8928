// What can be decided about cloth and panels: the cloth, compensation, allowances, the warp of one panel.
import fabrics from "../../../templates/fabrics.json";
import { setAllowance } from "../actions/setAllowance.ts";
import { setCompensation } from "../actions/setCompensation.ts";
import { setDecompensation } from "../actions/setDecompensation.ts";
import { setFabric } from "../actions/setFabric.ts";
import { setPanel } from "../actions/setPanel.ts";
import { ChoiceField, NumberField, SwitchField } from "../parts/Fields.tsx";
import { act } from "../store/bookStore.ts";
import { useBook } from "../store/useBook.ts";

const LENGTHS = [
  { key: "seam", label: "Overlap of a seam", hint: "finished" },
  { key: "pocket", label: "Cable pocket", hint: "beyond the fold" },
  { key: "clamp", label: "Set-back at clamped edges", hint: "takes cloth away" },
  { key: "hem", label: "Hem at free edges", hint: undefined },
] as const;

function Cloth() {
  const fabric = useBook((b) => b.project?.job.fabric);
  const job = useBook((b) => b.job);
  const inline = typeof fabric === "object";
  const choices = fabrics.fabrics.map((f) => ({ value: f.id, words: f.name }));
  return (
    <ChoiceField
      label="Cloth"
      path="fabric"
      given={fabric !== undefined}
      value={inline ? "" : (fabric ?? fabrics.default)}
      choices={
        inline ? [{ value: "", words: `as the job gives it (${job?.fabric.id ?? "job"})` }, ...choices] : choices
      }
      hint={job === null ? undefined : `Ew ${job.fabric.Ew}, Ef ${job.fabric.Ef} kN/m; roll ${job.fabric.rollWidth} mm`}
      onChange={(value) => value !== "" && act(setFabric, { value }, "cloth")}
    />
  );
}

function Compensation() {
  const given = useBook((b) => b.project?.job.compensation?.default);
  const found = useBook((b) => b.facts?.panels?.[0]?.compensation);
  const entry = (way: "warp" | "weft") => (
    <NumberField
      label={`Compensation ${way}`}
      path={`compensation.${way}`}
      given={given !== undefined}
      value={given?.[way] ?? null}
      factor={0.01}
      none={found === undefined ? "" : (100 * found[way]).toFixed(3)}
      hint={given === undefined ? "what the stiffness gives at prestress" : undefined}
      unit="%"
      onChange={(v) =>
        act(
          setCompensation,
          { value: v === undefined ? null : { warp: found?.warp ?? 0, weft: found?.weft ?? 0, ...given, [way]: v } },
          `compensation ${way}`,
        )
      }
    />
  );
  return (
    <>
      {entry("warp")}
      {entry("weft")}
    </>
  );
}

function OnePanel() {
  const chosen = useBook((b) => b.chosen);
  const panels = useBook((b) => b.facts?.panels);
  const given = useBook((b) => b.project?.job.panels);
  const panel = panels?.find((p) => p.id === chosen);
  if (panel === undefined) return <p className="hint">Choose a panel to turn its warp.</p>;
  return (
    <NumberField
      label={`Warp of ${panel.id} turned by`}
      path={`panels.${panel.id}.warp`}
      given={given?.[panel.id]?.warp !== undefined}
      value={given?.[panel.id]?.warp ?? null}
      none="0"
      unit="degrees"
      onChange={(value) => act(setPanel, { panel: panel.id, key: "warp", value }, `warp of ${panel.id}`)}
    />
  );
}

/** The decisions of the leaf. */
export function PanelDecisions() {
  const given = useBook((b) => b.project?.job);
  const job = useBook((b) => b.job);
  if (given === undefined) return null;
  return (
    <>
      <Cloth />
      <Compensation />
      {LENGTHS.map(({ key, label, hint }) => (
        <NumberField
          key={key}
          label={label}
          path={`allowances.${key}`}
          given={given.allowances?.[key] !== undefined}
          value={job?.allowances[key] ?? given.allowances?.[key] ?? null}
          unit="mm"
          {...(hint === undefined ? {} : { hint })}
          onChange={(value) => act(setAllowance, { key, value }, label.toLowerCase())}
        />
      ))}
      <ChoiceField
        label="Overlap lies on"
        path="allowances.seamOn"
        given={given.allowances?.seamOn !== undefined}
        value={given.allowances?.seamOn ?? "both"}
        choices={[
          { value: "both", words: "both panels, half each" },
          { value: "one", words: "the lower panel alone" },
        ]}
        onChange={(value) => act(setAllowance, { key: "seamOn", value }, "where the overlap lies")}
      />
      <SwitchField
        label="Pockets are strips of their own"
        path="allowances.pocketStrip"
        given={given.allowances?.pocketStrip !== undefined}
        value={given.allowances?.pocketStrip ?? false}
        onChange={(value) =>
          act(setAllowance, { key: "pocketStrip", value: value ? true : undefined }, "pocket strips")
        }
      />
      <NumberField
        label="Compensation taken back along clamped edges over"
        path="decompensation.clamped"
        given={given.decompensation?.clamped !== undefined}
        value={given.decompensation?.clamped ?? null}
        none="not taken back"
        unit="m"
        onChange={(value) => act(setDecompensation, { key: "clamped", value }, "compensation taken back")}
      />
      <OnePanel />
    </>
  );
}
