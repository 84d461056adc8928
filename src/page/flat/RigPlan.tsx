// The roof from above: edges, cables, anchors, adjusters with the force they carry at the step looked at.
import type { Facts, FactsForm } from "../../core/records/facts.ts";
import type { FactsRig } from "../../core/records/rig.ts";
import { figure } from "../parts/figure.ts";
import { pointing } from "../parts/pointing.ts";
import { pressed } from "../parts/pressed.ts";
import { shortName } from "../parts/shortName.ts";
import { bookStore } from "../store/bookStore.ts";
import { useBook } from "../store/useBook.ts";
import type { RigStep } from "./rigSteps.ts";

/** Letters of a name that find room beside a pin, and how wide one is for its height. */
const NAME = 18;
const LETTER = 0.62;

function boundsOf(form: FactsForm, rig: FactsRig): { x: number; y: number; w: number; h: number; size: number } {
  const points = [...form.vertices, ...rig.nodes];
  const xs = points.map((p) => p[0]);
  const ys = points.map((p) => p[1]);
  const [x, y] = [Math.min(...xs), Math.min(...ys)];
  const [w, h] = [Math.max(...xs) - x, Math.max(...ys) - y];
  return { x, y, w, h, size: Math.max(w, h) / (rig.adjusters.length > 8 ? 30 : 22) };
}

const line = (points: readonly number[][]) => points.map((p) => `${p[0].toFixed(3)},${(-p[1]).toFixed(3)}`).join(" ");

/** The plan. */
export function RigPlan({
  form,
  rig,
  facts,
  step,
}: {
  form: FactsForm;
  rig: FactsRig;
  facts: Facts;
  step: RigStep | null;
}) {
  const pointed = useBook((b) => b.pointed);
  const chosen = useBook((b) => b.chosen);
  const { x, y, w, h, size } = boundsOf(form, rig);
  const pad = 5.4 * size;
  const moving = new Set(step?.moves.map((m) => m.adjuster));
  const lit = (id: string) => id === pointed || id === chosen;
  const middle = [x + w / 2, y + h / 2];
  return (
    <svg
      className="sheet plan"
      viewBox={`${x - pad} ${-y - h - pad} ${w + 2 * pad} ${h + 2 * pad}`}
      role="group"
      aria-label="Plan of the adjusters"
    >
      {form.edges.map((e) => (
        <polyline
          key={e.id}
          className={`side ${e.kind}${lit(e.id) ? " lit" : ""}`}
          {...pointing(e.id)}
          points={line(e.vertices.map((v) => form.vertices[v]))}
        />
      ))}
      {facts.seams?.map((s) => (
        <polyline
          key={s.id}
          className={`side seam${lit(s.id) ? " lit" : ""}`}
          points={line(s.path)}
          {...pointing(s.id)}
        />
      ))}
      {rig.struts
        .filter((s) => !s.brace)
        .map((s) => (
          <polyline key={s.id} className="strut" points={line(s.nodes.map((n) => rig.nodes[n]))} />
        ))}
      {rig.adjusters.map((a) => {
        const [p, q] = a.nodes.map((n) => rig.nodes[n]);
        const out =
          Math.hypot(q[0] - middle[0], q[1] - middle[1]) >= Math.hypot(p[0] - middle[0], p[1] - middle[1]) ? q : p;
        const d = [out[0] - middle[0], out[1] - middle[1]];
        const l = Math.hypot(...d) || 1;
        const force = step?.forces[a.id];
        const words = force === undefined ? "not pulled yet" : `${figure(force, 1)} kN`;
        const name = shortName(a.id, NAME);
        const half = Math.min(((LETTER * 1.15 * name.length) / 2) * size, w / 2 + pad);
        // two lines: below a lower corner, above an upper one, so that neither lies on the pin
        const [left, top] = [
          Math.min(Math.max(out[0] + (d[0] / l) * 3.2 * size, x - pad + half), x + w + pad - half),
          -(out[1] + (d[1] / l) * 2 * size) - (d[1] > 0 ? 1.25 * size : 0),
        ];
        return (
          <g
            key={a.id}
            role="button"
            tabIndex={0}
            className={`adjuster${moving.has(a.id) ? " moving" : ""}${lit(a.id) ? " lit" : ""}`}
            aria-label={`${name} ${words}, ${name === a.id ? "" : `${a.id}, `}adjuster${moving.has(a.id) ? " that moves in this step" : ""}`}
            onClick={() => bookStore.setState({ chosen: a.id })}
            onKeyDown={pressed(() => bookStore.setState({ chosen: a.id }))}
            {...pointing(a.id)}
          >
            <polyline points={line([p, q])} />
            <circle cx={out[0]} cy={-out[1]} r={0.45 * size} />
            <text x={left} y={top} fontSize={1.15 * size}>
              {name}
            </text>{" "}
            <text className="force" x={left} y={top + 1.25 * size} fontSize={size}>
              {words}
            </text>
          </g>
        );
      })}
    </svg>
  );
}
