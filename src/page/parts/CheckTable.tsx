// The checks a station made: those that fail in full, those that hold folded away.
import type { Check } from "../../core/problem.ts";
import { Fold } from "./Fold.tsx";
import { figure } from "./figure.ts";

/** Checks of one station, with value and limit. */
export function CheckTable({ checks: own }: { checks: readonly Check[] }) {
  if (own.length === 0) return null;
  const failed = own.filter((c) => !c.holds);
  const show = (v: number | string) => (typeof v === "number" ? figure(v) : v);
  const sorted = [...failed, ...own.filter((c) => c.holds)];
  return (
    <Fold
      className="checks"
      open={failed.length > 0}
      words={failed.length === 0 ? `All ${own.length} checks hold` : `${failed.length} of ${own.length} checks fail`}
    >
      <table className="figures">
        <tbody>
          {sorted.map((c) => (
            <tr key={c.text} className={c.holds ? undefined : "fails"}>
              <th scope="row">
                {c.text}
                <span className="against">limit {show(c.limit)}</span>
              </th>
              <td>
                {!c.holds && <span className="mark">fails </span>}
                {show(c.value)}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </Fold>
  );
}
