// Forces through the sequence: a line for each adjuster, or for those that pull alike, its limit dashed, told apart by dash, mark and
// name, not by colour alone.
import type { Facts } from "../../core/records/facts.ts";
import { figure } from "../parts/figure.ts";
import { pointing } from "../parts/pointing.ts";
import { shortName } from "../parts/shortName.ts";
import { useBook } from "../store/useBook.ts";
import { axisSteps } from "./axisSteps.ts";
import { joinTraces, type Trace } from "./joinTraces.ts";
import type { RigStep } from "./rigSteps.ts";

const DASHES = ["", "6 3", "2 3", "9 3 2 3", "12 4", "4 2"];
/** Marks at the steps of the lines that come after all dashes are used, around 0, 0. */
const MARKS = ["", "M-3,-3H3V3H-3Z", "M0,-4L4,3H-4Z", "M0,-4L4,0L0,4L-4,0Z"];
const W = 640;
const H = 190;
const LEFT = 44;
const BOTTOM = 26;
const RIGHT = 96;
/** Letters of a name that find room beside the chart, with a word more. */
const NAME = 10;
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
    const names = ids.sort((a, b) => a.localeCompare(b, "en", { numeric: true })).map((id) => shortName(id, NAME));
    const all = names.join(", ");
    if (one !== undefined && ids.length > 1) return { y, words: `${shortName(one, NAME)}, …` };
    return { y, words: ids.length === 1 || all.length <= 14 ? all : `${names[0]} and ${ids.length - 1} more` };
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

/** The k-th line through its places in the drawing. */
function Line({ k, places }: { k: number; places: readonly (readonly [number, number])[] }) {
  const mark = MARKS[Math.floor(k / DASHES.length) % MARKS.length];
  return (
    <>
      <polyline strokeDasharray={DASHES[k % DASHES.length]} points={places.map((p) => p.join(",")).join(" ")} />
      {mark !== "" && places.map(([x, y]) => <path key={x} d={mark} transform={`translate(${x} ${y})`} />)}
    </>
  );
}

/** Which line is whose. */
function LineKey({ traces, lit }: { traces: readonly Trace[]; lit: (id: string) => boolean }) {
  return (
    <ul className="dashkey" aria-label="Lines of the chart">
      {traces.map(({ ids }, k) => (
        <li key={ids[0]} className={ids.some(lit) ? "trace lit" : "trace"}>
          <svg viewBox="0 0 40 8" aria-hidden="true">
            <Line
              k={k}
              places={[
                [0, 4],
                [20, 4],
                [40, 4],
              ]}
            />
          </svg>
          {ids.map((id, i) => (
            <span key={id} {...pointing(id)}>
              {i > 0 && ", "}
              {id}
            </span>
          ))}
          {ids.length > 1 && " alike"}
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
  const traces = joinTraces(adjusters.map(({ id }) => ({ id, ys: steps.map((s) => y(s.forces[id] ?? 0)) })));
  // what is pointed at lies on top
  const drawn = traces.map((trace, k) => ({ ...trace, k, lit: trace.ids.some(lit) })).sort((a, b) => +a.lit - +b.lit);
  return (
    <>
      <LineKey traces={traces} lit={lit} />
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
        {drawn.map((trace) => (
          <g key={trace.ids[0]} className={trace.lit ? "trace lit" : "trace"}>
            <Line k={trace.k} places={[[x(0), y(0)], ...trace.ys.map((at, i) => [x(i + 1), at] as const)]} />
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
