// What can be decided about cloth and panels: the cloth, compensation, allowances, the warp of one panel.
import { setAllowance } from "../../actions/panels/setAllowance.ts";
import { setCompensation } from "../../actions/panels/setCompensation.ts";
import { setDecompensation } from "../../actions/panels/setDecompensation.ts";
import { setPanel } from "../../actions/panels/setPanel.ts";
import { ChoiceField, NumberField, SwitchField, TextField } from "../../parts/Fields.tsx";
import { act } from "../../store/bookStore.ts";
import { useBook } from "../../store/useBook.ts";
import { ClothDecisions } from "./ClothDecisions.tsx";

const LENGTHS = [
  { key: "seam", label: "Overlap of a seam", hint: "finished" },
  { key: "pocket", label: "Cable pocket", hint: "beyond the fold" },
  { key: "cover", label: "Cover strips over cables inside the cloth", hint: "wide; 0: none" },
  { key: "clamp", label: "Set-back at clamped edges", hint: "takes cloth away" },
  { key: "hem", label: "Hem at free edges", hint: undefined },
] as const;

const FADES = [
  { key: "clamped", label: "clamped edges" },
  { key: "ring", label: "rings" },
  { key: "cable", label: "cables" },
] as const;

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
  if (panel === undefined) return <p className="hint">Choose a panel to turn its warp or give it a batch.</p>;
  return (
    <>
      <NumberField
        label={`Warp of ${panel.id} turned by`}
        path={`panels.${panel.id}.warp`}
        given={given?.[panel.id]?.warp !== undefined}
        value={given?.[panel.id]?.warp ?? null}
        none="0"
        unit="degrees"
        onChange={(value) => act(setPanel, { panel: panel.id, key: "warp", value }, `warp of ${panel.id}`)}
      />
      <TextField
        label={`Batch of ${panel.id}`}
        path={`panels.${panel.id}.batch`}
        given={given?.[panel.id]?.batch !== undefined}
        value={given?.[panel.id]?.batch ?? ""}
        none="any"
        open
        onChange={(value) => act(setPanel, { panel: panel.id, key: "batch", value }, `batch of ${panel.id}`)}
      />
    </>
  );
}

/** The decisions of the leaf. */
export function PanelDecisions() {
  const given = useBook((b) => b.project?.job);
  const job = useBook((b) => b.job);
  if (given === undefined) return null;
  return (
    <>
      <ClothDecisions />
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
      {FADES.map(({ key, label }) => (
        <NumberField
          key={key}
          label={`Compensation taken back along ${label} over`}
          path={`decompensation.${key}`}
          given={typeof given.decompensation?.[key] === "number"}
          value={given.decompensation?.[key] ?? null}
          none="not taken back"
          open
          unit="m"
          onChange={(value) => act(setDecompensation, { key, value }, `compensation taken back along ${label}`)}
        />
      ))}
      <OnePanel />
    </>
  );
}
