// Findings, the gravest first; those of one kind together. Each leads to what it speaks of.
import type { Finding } from "../../core/problem.ts";
import { jumpTo, leafOfFinding } from "./jump.ts";

const LEVELS = ["stop", "caution", "note"] as const;
const SIGN = { stop: "■", caution: "▲", note: "·" } as const;

/** Count of each level, in words: "1 stop, 2 cautions". Notes only where asked for. */
export function countFindings(findings: readonly Finding[], notes: boolean): string {
  return LEVELS.flatMap((level) => {
    const n = findings.filter((f) => f.level === level).length;
    return n === 0 || (level === "note" && !notes) ? [] : [`${n} ${level}${n === 1 ? "" : "s"}`];
  }).join(", ");
}

function Places({ finding }: { finding: Finding }) {
  const places = [finding.where].flat();
  return (
    <span className="places">
      {places.slice(0, 8).map((place) => (
        <button type="button" key={place} className="place" onClick={() => jumpTo(leafOfFinding(finding), place)}>
          {place}
        </button>
      ))}
      {places.length > 8 && ` and ${places.length - 8} more`}
    </span>
  );
}

/** The list. */
export function FindingList({ findings }: { findings: readonly Finding[] }) {
  const sorted = LEVELS.flatMap((level) => findings.filter((f) => f.level === level));
  if (sorted.length === 0) return <p className="quiet">Nothing to report.</p>;
  return (
    <ul className="findings">
      {sorted.map((f, i) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: findings have no id and never change places in one plan
        <li key={i} className={f.level}>
          <p>
            <span className="level">
              <span aria-hidden="true">{SIGN[f.level]}</span> {f.level}
            </span>{" "}
            <Places finding={f} /> {f.text}
          </p>
          <p className="remedy">{f.remedy}</p>
          <p className="basis">
            {f.code} · {f.basis}
          </p>
        </li>
      ))}
    </ul>
  );
}
