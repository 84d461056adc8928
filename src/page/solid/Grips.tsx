// The ends of the seams as grips over the surface: slid along the edges with mouse, finger or arrow keys.
import { memo, useEffect, useMemo, useRef } from "react";
import type { FactsForm } from "../../core/records/facts.ts";
import { type Book, bookStore } from "../store/bookStore.ts";
import { isSameWork } from "../store/hand.ts";
import { type EdgePlace, pointOnEdge, slideAlong } from "../store/seamEnds.ts";
import { useBook } from "../store/useBook.ts";
import { letGo, putBack, slideEnd, takeEnd } from "../worker/dragger.ts";
import type { Project } from "./scene.ts";

/** How far an arrow key slides an end, m; ten times as far with Shift. */
const STEP = 0.01;
/** An end slid by keys is let go after this quiet time, ms. */
const QUIET = 700;

/** An end leaves its edge for another one only where the pointer is this near to that one, px. */
const CHANGE = 24;

/** The place on the form's edges that is drawn nearest to a point of the canvas; `own` is the edge the end is on. */
function placeUnder(form: FactsForm, project: Project, own: string, x: number, y: number): EdgePlace | null {
  let best: EdgePlace | null = null;
  let least = Number.POSITIVE_INFINITY;
  for (const { id, vertices } of form.edges) {
    let along = 0;
    let found = -1;
    let [p, a] = [form.vertices[vertices[0]], project(form.vertices[vertices[0]])];
    for (const v of vertices.slice(1)) {
      const q = form.vertices[v];
      const b = project(q);
      const [dx, dy] = [b.x - a.x, b.y - a.y];
      const t = Math.min(Math.max(((x - a.x) * dx + (y - a.y) * dy) / (dx * dx + dy * dy || 1), 0), 1);
      const gap = Math.hypot(a.x + t * dx - x, a.y + t * dy - y);
      const length = Math.hypot(q[0] - p[0], q[1] - p[1], q[2] - p[2]);
      const far = id === own ? gap : gap > CHANGE ? Number.POSITIVE_INFINITY : gap + 1;
      if (far < least) {
        least = far;
        found = along + t * length;
      }
      along += length;
      [p, a] = [q, b];
    }
    if (found >= 0) best = { edge: id, at: found / (along || 1) };
  }
  return best;
}

interface GripPlace {
  weld: string;
  end: 0 | 1;
  place: EdgePlace;
}

/** Whether the grips are those of a roof that is being tied again: they stay in sight, and none can be taken. */
const isTying = ({ grips, hand, project }: Book) => !isSameWork(grips?.of, project) && isSameWork(hand?.laid, project);

/** Grips of the roof on the desk, each where its end lies while no hand slides it. */
function useGrips(): GripPlace[] {
  const grips = useBook((b) => (isSameWork(b.grips?.of, b.project) || isTying(b) ? b.grips : null));
  return useMemo(
    () =>
      (grips?.welds ?? []).flatMap(({ weld, ends }) =>
        ([0, 1] as const).map((end) => ({ weld, end, place: ends[end] })),
      ),
    [grips],
  );
}

/** Where a grip is now: the one in hand is where it is slid to. */
const placeNow = ({ weld, end, place }: GripPlace, { hand }: Book) => (hand?.weld === weld ? hand.to[end] : place);

let timer: ReturnType<typeof setTimeout> | undefined;

function slideByKey(form: FactsForm, grip: GripPlace, e: React.KeyboardEvent): void {
  const step = { ArrowRight: 1, ArrowUp: 1, ArrowLeft: -1, ArrowDown: -1 }[e.key];
  const { hand } = bookStore.getState();
  const held = hand?.weld === grip.weld && hand.end === grip.end && hand.laid === null;
  if (step !== undefined) {
    takeEnd(grip.weld, grip.end);
    slideEnd(slideAlong(form, grip.place, step * STEP * (e.shiftKey ? 10 : 1)));
    clearTimeout(timer);
    timer = setTimeout(letGo, QUIET);
  } else if (held && e.key === "Enter") {
    clearTimeout(timer);
    letGo();
  } else if (held && e.key === "Escape") {
    clearTimeout(timer);
    putBack();
  } else return;
  e.preventDefault();
  e.stopPropagation();
}

/** One grip. Slid with the pointer it follows the edge nearest to it on the screen. The others are not drawn anew meanwhile. */
const Grip = memo(function Grip(props: {
  form: FactsForm;
  grip: GripPlace;
  tying: boolean;
  project: () => Project | null;
}) {
  const { form, grip, tying, project } = props;
  const { weld, end } = grip;
  const place = useBook((b) => placeNow(grip, b));
  const lit = useBook((b) => b.chosen === weld);
  const length = form.edges.find((e) => e.id === place.edge)?.length ?? 0;
  const slide = (e: React.PointerEvent) => {
    const box = e.currentTarget.parentElement?.getBoundingClientRect();
    const to = project();
    if (box === undefined || to === null) return;
    const under = placeUnder(form, to, place.edge, e.clientX - box.left, e.clientY - box.top);
    if (under !== null) slideEnd(under);
  };
  return (
    <button
      type="button"
      role="slider"
      aria-disabled={tying}
      className={lit ? "grip lit" : "grip"}
      aria-label={`${weld}, end on ${place.edge}`}
      aria-valuemin={0}
      aria-valuemax={Number(length.toFixed(3))}
      aria-valuenow={Number((place.at * length).toFixed(3))}
      aria-valuetext={`${(place.at * length).toFixed(2)} m along ${place.edge}`}
      onPointerDown={(e) => {
        if (e.button !== 0) return;
        e.currentTarget.setPointerCapture(e.pointerId);
        takeEnd(weld, end);
      }}
      onPointerMove={(e) => e.currentTarget.hasPointerCapture(e.pointerId) && slide(e)}
      onPointerUp={letGo}
      onPointerCancel={putBack}
      onKeyDown={(e) => slideByKey(form, { weld, end, place }, e)}
    />
  );
});

/** All grips, and the seam in hand where it is slid to; `hook` is given what puts them where they are drawn and tells these places, and null when they go. */
export function Grips(props: {
  form: FactsForm;
  project: () => Project | null;
  hook: (place: ((project: Project) => { x: number; y: number }[]) | null) => void;
}) {
  const { form, project, hook } = props;
  const box = useRef<HTMLDivElement>(null);
  const line = useRef<SVGPolylineElement>(null);
  const grips = useGrips();
  const tying = useBook(isTying);
  // gone with the leaf, no pointer would let go
  useEffect(() => letGo, []);
  useEffect(() => {
    const putGrip = (to: Project, i: number) => {
      const element = box.current?.children[i];
      const at = pointOnEdge(form, placeNow(grips[i], bookStore.getState()));
      if (!(element instanceof HTMLElement) || at === null) return [];
      const { x, y } = to(at);
      element.style.transform = `translate(-50%, -50%) translate(${x.toFixed(1)}px, ${y.toFixed(1)}px)`;
      return [{ x, y }];
    };
    const putLine = (to: Project) => {
      const points = (bookStore.getState().hand?.path ?? []).map((p) => to(p));
      line.current?.setAttribute("points", points.map(({ x, y }) => `${x.toFixed(1)},${y.toFixed(1)}`).join(" "));
    };
    const put = (to: Project) => {
      putLine(to);
      return grips.flatMap((_, i) => putGrip(to, i));
    };
    hook(put);
    // what is slid alone as long as it is; put back, all are put in their places once more
    const end = bookStore.subscribe(({ hand }, { hand: before }) => {
      if (hand === before) return;
      if (hand === null) return hook(put);
      const to = project();
      if (to === null) return;
      grips.forEach(({ weld }, i) => {
        if (weld === hand.weld || weld === before?.weld) putGrip(to, i);
      });
      if (hand.path !== before?.path) putLine(to);
    });
    return () => {
      end();
      hook(null);
    };
  }, [form, grips, hook, project]);
  return (
    <>
      <svg className="slid" aria-hidden="true">
        <polyline ref={line} />
      </svg>
      <div className="grips" ref={box}>
        {grips.map((grip) => (
          <Grip key={`${grip.weld} ${grip.end}`} form={form} grip={grip} tying={tying} project={project} />
        ))}
      </div>
    </>
  );
}
