// What an error of making or setting out does to the forces: a bar for each, the worst first, with the error that makes a tenth.
import { useState } from "react";
import type { FactsSensitivity } from "../../core/records/rig.ts";
import { figure } from "../parts/figure.ts";
import { pointing } from "../parts/pointing.ts";
import { useBook } from "../store/useBook.ts";

const FIRST = 8;

function nameOf({ what, id, change, unit }: FactsSensitivity): string {
  const size = `${figure(change)} ${unit}`;
  if (what === "cable-length") return `Cable ${id} ${size} too long`;
  return what === "anchor" ? `Far pin of ${id} ${size} nearer` : `All cloth cut ${size} smaller`;
}

/** Bars of the member each error changes most; where an adjuster or cable is chosen, of that one, in kN. */
export function SensitivityBars({ sensitivity }: { sensitivity: readonly FactsSensitivity[] }) {
  const chosen = useBook((b) => b.chosen);
  const pointed = useBook((b) => b.pointed);
  const [all, setAll] = useState(false);
  const one = sensitivity.some((s) => s.forces[chosen ?? ""] !== undefined) ? chosen : null;
  const sizeOf = (s: FactsSensitivity) => (one === null ? s.greatest.share : Math.abs(s.forces[one] ?? 0));
  const sorted = [...sensitivity].sort((a, b) => sizeOf(b) - sizeOf(a));
  const top = Math.max(...sorted.map(sizeOf), 1e-12);
  return (
    <section className="bars" aria-label="Sensitivity">
      <h3>What an error does{one === null ? "" : ` to ${one}`}</h3>
      <ul>
        {sorted.slice(0, all ? undefined : FIRST).map((s) => (
          <li
            key={`${s.what} ${s.id}`}
            className={s.id === pointed || s.id === chosen ? "lit" : undefined}
            {...pointing(s.id)}
          >
            <span>{nameOf(s)}</span>
            <span className="track" aria-hidden="true">
              <span style={{ width: `${(100 * sizeOf(s)) / top}%` }} />
            </span>
            <span className="number">
              {one === null
                ? `${figure(100 * s.greatest.share, 1)} % at ${s.greatest.id}`
                : `${figure(s.forces[one] ?? 0, 2)} kN`}
            </span>
            <span className="against">
              {s.tolerance === null ? "changes nothing" : `${figure(s.tolerance)} ${s.unit} make a tenth`}
            </span>
          </li>
        ))}
      </ul>
      {sorted.length > FIRST && (
        <button type="button" onClick={() => setAll(!all)}>
          {all ? "Show the worst only" : `Show all ${sorted.length}`}
        </button>
      )}
    </section>
  );
}
