// Layouts side by side: each in miniature with its figures; one click takes one and writes down why.
import type { ComparedLayout } from "../../../core/plan/measureLayout.ts";
import type { FactsForm } from "../../../core/records/facts.ts";
import type { SeamDecision } from "../../../core/records/job.ts";
import { takeLayout } from "../../actions/seams/takeLayout.ts";
import { figure } from "../../parts/figure.ts";
import { PressButton } from "../../parts/PressButton.tsx";
import { act, bookStore } from "../../store/bookStore.ts";
import { isSameWork, type Weighed } from "../../store/hand.ts";
import { useBook } from "../../store/useBook.ts";
import { useRoom } from "../../store/useRoom.ts";
import { weigher } from "../../worker/dragger.ts";

/** Figures of a layout over all its regions. */
interface Sums {
  panels: number;
  seams: number;
  cloth: number;
  least: number;
  greatest: number;
  stressError: number;
}

function sumUp({ rows }: Pick<ComparedLayout, "rows">): Sums | null {
  if (rows.length === 0) return null;
  const sum = (of: (r: (typeof rows)[number]) => number) => rows.reduce((s, r) => s + of(r), 0);
  return {
    panels: sum((r) => r.panels),
    seams: sum((r) => r.seams),
    cloth: sum((r) => r.cloth),
    least: Math.min(...rows.map((r) => r.least)),
    greatest: Math.max(...rows.map((r) => r.greatest)),
    stressError: Math.max(...rows.map((r) => r.stressError)),
  };
}

/** What was asked, in words. */
function nameAsk({ layout, from, to, count }: Partial<SeamDecision>): string {
  const number = typeof count === "number" ? `${count} strips` : "fewest strips";
  if (from == null || to == null) return layout === "gores" ? `${number}, gores` : number;
  return `${number}, ${from} to ${to}`;
}

/** Form and seams seen along the axis its form is flattest in, m. */
function Miniature({ form, lines }: { form: FactsForm; lines: readonly number[][][] }) {
  const spans = [0, 1, 2].map((k) => {
    const all = form.vertices.map((v) => v[k]);
    return { k, span: Math.max(...all) - Math.min(...all) };
  });
  const [first, second] = spans
    .sort((a, b) => b.span - a.span)
    .slice(0, 2)
    .map((s) => s.k)
    .sort();
  const flat = (p: readonly number[]) => [p[first], -p[second]];
  const xs = form.vertices.map((v) => flat(v)[0]);
  const ys = form.vertices.map((v) => flat(v)[1]);
  const [x, y] = [Math.min(...xs), Math.min(...ys)];
  const [w, h] = [Math.max(...xs) - x, Math.max(...ys) - y];
  const pad = 0.04 * Math.max(w, h);
  const path = (points: readonly (readonly number[])[]) =>
    points
      .map(flat)
      .map(([u, v], i) => `${i === 0 ? "M" : "L"}${u.toFixed(2)} ${v.toFixed(2)}`)
      .join("");
  return (
    <svg
      className="mini"
      viewBox={`${(x - pad).toFixed(2)} ${(y - pad).toFixed(2)} ${(w + 2 * pad).toFixed(2)} ${(h + 2 * pad).toFixed(2)}`}
      aria-hidden="true"
    >
      {form.edges.map((e) => (
        <path key={e.id} className="rim" d={path(e.vertices.map((v) => form.vertices[v]))} />
      ))}
      {lines.map((line, i) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: seams of a layout that is only compared have no names
        <path key={i} className="weld" d={path(line)} />
      ))}
    </svg>
  );
}

/** Why one is taken: how it stands against the one that stood. */
function tellWhy(name: string, own: Sums, stood: Sums | null, of: number): string {
  const head = `${name}, of ${of} compared: ${own.panels} panels, ${own.seams.toFixed(1)} m of seam, ${own.cloth.toFixed(1)} m2 of cloth, widths ${own.least.toFixed(2)} to ${own.greatest.toFixed(2)} m, stress off by ${(100 * own.stressError).toFixed(1)} %`;
  if (stood === null) return head;
  return `${head}; in place of ${stood.panels} panels, ${stood.seams.toFixed(1)} m of seam, stress off by ${(100 * stood.stressError).toFixed(1)} %`;
}

/** A strip is too wide past this share of the limit, as in the plan's own finding. */
const OVER = 1.0005;

/** Widths of the panels. */
function tellWidths({ least, greatest }: Sums): string {
  const [from, to] = [figure(least, 2), figure(greatest, 2)];
  return from === to ? `${to} m` : `${from} to ${to} m`;
}

function Figures({ sums }: { sums: Sums }) {
  const room = useRoom();
  const wide = room !== null && sums.greatest > OVER * room.strip;
  const rows: [string, string][] = [
    ["Panels", String(sums.panels)],
    ["Seam", `${figure(sums.seams, 1)} m`],
    ["Cloth, at least", `${figure(sums.cloth, 1)} m²`],
    ["Widths", tellWidths(sums)],
    ["Stress off, worst panel", `${figure(100 * sums.stressError, 1)} %`],
  ];
  return (
    <table className="figures">
      <tbody>
        {rows.map(([what, value]) => (
          <tr key={what} className={wide && what === "Widths" ? "fails" : undefined}>
            <th scope="row">
              {what}
              {wide && what === "Widths" && <span className="against">the cloth takes {figure(room.strip, 2)} m</span>}
            </th>
            <td>
              {wide && what === "Widths" && <span className="mark">fails </span>}
              {value}
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}

/** How far the comparing has come; it can be stopped and gone on with. */
function WeighState({ asks, open, done, doing }: Weighed) {
  const ready = useBook((b) => isSameWork(b.grips?.of, b.project));
  const all = open ? "" : ` of ${asks.length}`;
  if (doing === null && done.length === asks.length) {
    return (
      <p className="row" role="status">
        All {done.length} layouts are worked out.
      </p>
    );
  }
  return (
    <div className="row weighing">
      {doing === null ? (
        <span role="status">
          Stopped: {done.length}
          {all} layouts are worked out.
        </span>
      ) : (
        <>
          <progress
            max={1}
            value={open ? undefined : (done.length + doing.share) / asks.length}
            aria-label="Comparing layouts"
          />
          <span role="status">
            Layout {done.length + 1}
            {all}
          </span>
          <span className="quiet">{doing.words}</span>
        </>
      )}
      <PressButton disabled={doing === null && !ready} onPress={doing === null ? weigher.goOn : weigher.stop}>
        {doing === null ? "Go on" : "Stop comparing"}
      </PressButton>
    </div>
  );
}

/** What stands on a card without figures. */
function tellCard(weighed: Weighed, i: number): string | null {
  const done = weighed.done[i];
  if (done !== undefined) return done.refused;
  if (weighed.doing === null) return "Not worked out: stopped.";
  return i === weighed.done.length ? "Being worked out…" : "Waits for the one before.";
}

/** The cards; the first is what stands. */
export function LayoutCards() {
  const facts = useBook((b) => b.facts);
  const weighed = useBook((b) => (isSameWork(b.weighed?.of, b.project) ? b.weighed : null));
  const form = facts?.form;
  if (form === undefined || weighed === null) return null;
  const stood = sumUp({ rows: (facts?.compared ?? []).filter((r) => r.taken) });
  const take = (asked: Partial<SeamDecision>, sums: Sums) => {
    const { layout, from = null, to = null, count = "auto" } = asked;
    const why = tellWhy(nameAsk(asked), sums, stood, weighed.asks.length + 1).slice(0, 400);
    act(
      takeLayout,
      { layout: layout === "bands" || layout === "gores" ? layout : "auto", from, to, count, why },
      "layout taken",
    );
    bookStore.setState({ weighed: null });
  };
  return (
    <>
      <WeighState {...weighed} />
      <ul className="cards" aria-label="Layouts side by side">
        <li className="stands">
          <h2>As it stands</h2>
          <Miniature form={form} lines={(facts?.seams ?? []).map((s) => s.path)} />
          {stood && <Figures sums={stood} />}
        </li>
        {weighed.asks.map((asked, i) => {
          const done = weighed.done[i];
          const sums = done === undefined ? null : sumUp(done);
          const name = nameAsk(asked);
          const told = tellCard(weighed, i);
          return (
            <li key={name}>
              <h2>{name}</h2>
              {told !== null && <p className="hint">{told}</p>}
              {done !== undefined && sums !== null && (
                <>
                  <Miniature form={form} lines={done.lines} />
                  <Figures sums={sums} />
                  <button type="button" onClick={() => take(asked, sums)}>
                    Take {name}
                  </button>
                </>
              )}
            </li>
          );
        })}
      </ul>
    </>
  );
}
