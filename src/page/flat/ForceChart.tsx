// Forces through the sequence: a line for each adjuster, its limit dashed, told apart by dash and name, not by colour alone.
import type { Facts } from "../../core/records/facts.ts";
import { figure } from "../parts/figure.ts";
import { pointing } from "../parts/pointing.ts";
import { useBook } from "../store/useBook.ts";
import { axisSteps } from "./axisSteps.ts";
import type { RigStep } from "./rigSteps.ts";

const DASHES = ["", "6 3", "2 3", "9 3 2 3", "12 4", "4 2"];
const W = 640;
const H = 190;
const LEFT = 44;
const BOTTOM = 26;
const RIGHT = 96;
/** Ends nearer than a line of text carry one name together. */
const LINE = 11;

/** Names at the ends of the traces: those that would lie over each other stand as one. */
function nameEnds(
  ends: readonly { id: string; y: number }[],
  lit: (id: string) => boolean,
): { y: number; words: string }[] {
  const groups: { y: number; ids: string[] }[] = [];
  for (const { id, y } of [...ends].sort((a, b) => a.y - b.y)) {
    const last = groups.at(-1);
    if (last !== undefined && y - last.y < LINE) last.ids.push(id);
    else groups.push({ y, ids: [id] });
  }
  return groups.map(({ y, ids }) => {
    const one = ids.find(lit);
    const all = ids.sort((a, b) => a.localeCompare(b, "en", { numeric: true })).join(", ");
    if (one !== undefined && ids.length > 1) return { y, words: `${one}, …` };
    return { y, words: all.length <= 14 ? all : `${ids[0]} and ${ids.length - 1} more` };
  });
}

/** Adjusters with the same limit, the lowest first, kN. */
function groupLimits(adjusters: readonly { id: string; capacity: number | null }[], share: number) {
  const groups = new Map<number, string[]>();
  for (const { id, capacity } of adjusters) {
    if (capacity === null) continue;
    groups.set(capacity * share, [...(groups.get(capacity * share) ?? []), id]);
  }
  return [...groups].sort(([a], [b]) => a - b).map(([kN, ids]) => ({ kN, ids }));
}

/** Which dash is whose. */
function DashKey({ ids, lit }: { ids: readonly string[]; lit: (id: string) => boolean }) {
  return (
    <ul className="dashkey" aria-label="Lines of the chart">
      {ids.map((id, k) => (
        <li key={id} className={lit(id) ? "trace lit" : "trace"} {...pointing(id)}>
          <svg viewBox="0 0 40 8" aria-hidden="true">
            <polyline strokeDasharray={DASHES[k % DASHES.length]} points="0,4 40,4" />
          </svg>
          {id}
        </li>
      ))}
    </ul>
  );
}

/** The chart; `at`: index of the step looked at. */
export function ForceChart({ facts, steps, at }: { facts: Facts; steps: readonly RigStep[]; at: number }) {
  const pointed = useBook((b) => b.pointed);
  const chosen = useBook((b) => b.chosen);
  const adjusters = (facts.rig?.adjusters ?? []).slice(0, 24);
  const limit = facts.tensioning?.limit ?? 1;
  const peak = Math.max(1e-9, ...steps.flatMap((s) => adjusters.map((a) => s.forces[a.id] ?? 0)));
  // a limit far above all forces would press them flat: it is told in the table, and by its share in the words of each step
  const limits = groupLimits(adjusters, limit).filter(({ kN }) => kN < 3 * peak);
  const top = 1.08 * Math.max(peak, ...limits.map(({ kN }) => kN));
  const x = (i: number) => LEFT + ((W - LEFT - RIGHT) * i) / Math.max(steps.length, 1);
  const y = (kN: number) => 8 + (H - BOTTOM - 8) * (1 - kN / top);
  const lit = (id: string) => id === pointed || id === chosen;
  return (
    <>
      <DashKey ids={adjusters.map((a) => a.id)} lit={lit} />
      <svg
        className="chart"
        viewBox={`0 0 ${W} ${H}`}
        role="img"
        aria-label={`Force of each adjuster through ${steps.length} steps; greatest ${figure(peak, 1)} kN`}
      >
        {axisSteps(top).map((kN) => (
          <g key={kN}>
            <line className="rule" x1={LEFT} x2={W - RIGHT} y1={y(kN)} y2={y(kN)} />
            <text x={LEFT - 6} y={y(kN) + 4} textAnchor="end">
              {kN === 0 ? "0 kN" : figure(kN)}
            </text>
          </g>
        ))}
        <text x={LEFT - 6} y={H - 8} textAnchor="end">
          step
        </text>
        {steps.map((s, i) => (
          <g key={s.step}>
            {s.hold && <line className="hold" x1={x(i + 1)} x2={x(i + 1)} y1={8} y2={H - BOTTOM} />}
            <text x={x(i + 1)} y={H - 8} textAnchor="middle" className={i + 1 === at ? "now" : undefined}>
              {s.step}
            </text>
          </g>
        ))}
        {limits.map(({ kN, ids }) => (
          <g key={kN}>
            <line className="limit" x1={LEFT} x2={W - RIGHT} y1={y(kN)} y2={y(kN)} />
            <text x={W - RIGHT + 4} y={y(kN) + 4} className="limit">
              limit {figure(kN, 0)}
              {limits.length > 1 && ` ${ids.length > 2 ? `${ids[0]} and ${ids.length - 1} more` : ids.join(", ")}`}
            </text>
          </g>
        ))}
        {adjusters.map((a, k) => (
          <g key={a.id} className={lit(a.id) ? "trace lit" : "trace"}>
            <polyline
              strokeDasharray={DASHES[k % DASHES.length]}
              points={[`${x(0)},${y(0)}`, ...steps.map((s, i) => `${x(i + 1)},${y(s.forces[a.id] ?? 0)}`)].join(" ")}
            />
          </g>
        ))}
        {nameEnds(
          adjusters.map((a) => ({ id: a.id, y: y(steps.at(-1)?.forces[a.id] ?? 0) })),
          lit,
        ).map(({ y: at, words }) => (
          <text key={at} x={x(steps.length) + 6} y={at + 4}>
            {words}
          </text>
        ))}
        <line className="cursor" x1={x(at)} x2={x(at)} y1={4} y2={H - BOTTOM} />
      </svg>
    </>
  );
}
