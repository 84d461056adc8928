// Prestress of the cloth: given by the job, or asked of the form, and then what the form says.
import { askPrestress, setPrestress } from "../../actions/form/setPrestress.ts";
import { ChoiceField, NumberField } from "../../parts/Fields.tsx";
import { figure } from "../../parts/figure.ts";
import { act } from "../../store/bookStore.ts";
import { useBook } from "../../store/useBook.ts";
import { useShownFacts } from "../../store/useShown.ts";

const WAYS = [
  { way: "warp", label: "Prestress along the warp" },
  { way: "weft", label: "Prestress along the weft" },
] as const;

const FROM = [
  { value: "job", words: "as given here" },
  { value: "balance", words: "asked of the form" },
] as const;

/** What the form was found with, where it was asked. */
function useFound(way: "warp" | "weft"): string | undefined {
  const form = useShownFacts("form")?.form;
  if (form?.stressSpread === undefined) return undefined;
  return `the form says ${figure(form.stress[way], 3)} ± ${figure(form.stressSpread[way], 3)} kN/m`;
}

function Way({ way, label }: (typeof WAYS)[number]) {
  const given = useBook((b) => b.project?.job.prestress);
  const job = useBook((b) => b.job?.prestress);
  const found = useFound(way);
  return (
    <NumberField
      label={label}
      path={`prestress.${way}`}
      given={given?.[way] !== undefined}
      value={given?.[way] ?? job?.[way] ?? null}
      unit="kN/m"
      hint={given?.from === undefined ? undefined : (found ?? "taken where the form does not say")}
      onChange={(value) => act(setPrestress, { way, value }, `prestress ${way}`)}
    />
  );
}

/** The fields. */
export function PrestressDecisions() {
  const from = useBook((b) => b.project?.job.prestress?.from);
  return (
    <>
      <ChoiceField
        label="Prestress is taken"
        path="prestress.from"
        given={from !== undefined}
        value={from ?? "job"}
        choices={FROM}
        hint={from === undefined ? undefined : "from best balance with the cables; not with a mesh that is settled"}
        onChange={(v) => act(askPrestress, { from: v === "job" ? undefined : v }, "where prestress is taken from")}
      />
      {WAYS.map((w) => (
        <Way key={w.way} {...w} />
      ))}
    </>
  );
}
