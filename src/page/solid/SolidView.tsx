// The surface, shaded and turnable, with its names and the legend of its colours. Mounts the scene and passes on what is chosen.
import { useCallback, useEffect, useMemo, useRef, useState } from "react";
import type { Facts } from "../../core/records/facts.ts";
import { type Scale, scaleOf } from "../colour/scales.ts";
import { bookStore, type FieldName } from "../store/bookStore.ts";
import { useBook } from "../store/useBook.ts";
import type { SentFields } from "../worker/growingFacts.ts";
import { buildModel, isOfPoints, type Model, nameModel, shapeOf, valuesOf } from "./buildModel.ts";
import { Grips } from "./Grips.tsx";
import { Legend } from "./Legend.tsx";
import { paintPoints } from "./paintPoints.ts";
import { placeNames, writtenName } from "./placeNames.ts";
import { createScene, type Project, type SceneView } from "./scene.ts";
import type { SceneInk } from "./stageOrders.ts";

/** Inks of the theme, from the style sheet. */
function readInk(element: Element): SceneInk {
  const style = getComputedStyle(element);
  const ink = (name: string) => style.getPropertyValue(name).trim();
  return {
    cloth: ink("--cloth"),
    clothOther: ink("--cloth-other"),
    lit: ink("--lit"),
    lines: {
      seam: ink("--seam"),
      cable: ink("--cable"),
      clamped: ink("--clamped"),
      free: ink("--free"),
      inner: ink("--cable"),
      adjuster: ink("--adjuster"),
      strut: ink("--clamped"),
    },
  };
}

const KEYS: Record<string, (view: SceneView) => void> = {
  ArrowLeft: (v) => v.turn(-0.12, 0),
  ArrowRight: (v) => v.turn(0.12, 0),
  ArrowUp: (v) => v.turn(0, 0.12),
  ArrowDown: (v) => v.turn(0, -0.12),
  "+": (v) => v.zoom(1.2),
  "=": (v) => v.zoom(1.2),
  "-": (v) => v.zoom(1 / 1.2),
  "0": (v) => v.fit(),
};

/** The one canvas of the page with its scene: making one takes its time, so the leaves hand it on. */
let kept: { canvas: HTMLCanvasElement; view: SceneView } | null = null;
/** Who shows it now: told when it breaks, with whether another canvas may be tried. */
let tellBroken: ((again: boolean) => void) | null = null;

/** Puts the canvas into a place of the page. */
function takeScene(host: HTMLElement, broken: (again: boolean) => void): NonNullable<typeof kept> {
  tellBroken = broken;
  const canvas = kept?.canvas ?? document.createElement("canvas");
  host.prepend(canvas);
  kept ??= {
    canvas,
    view: createScene(canvas, readInk(canvas), (again) => {
      canvas.remove();
      kept = null;
      tellBroken?.(again);
    }),
  };
  return kept;
}

/** Brings the scene into its place and feeds it; `words` says what is drawn. */
function useScene(model: Model | null, scale: Scale | null, words: string) {
  const host = useRef<HTMLDivElement>(null);
  const names = useRef<HTMLDivElement>(null);
  const [view, setView] = useState<SceneView | null>(null);
  const labels = useRef<Model["labels"]>([]);
  /** Whether the scene was given what this leaf shows: until then it is still as another leaf left it. */
  const given = useRef(false);
  const putGrips = useRef<((project: Project) => { x: number; y: number }[]) | null>(null);
  const [broken, setBroken] = useState(false);
  const pointed = useBook((b) => b.pointed);
  const chosen = useBook((b) => b.chosen);
  const theme = useBook((b) => b.theme);
  const job = useBook((b) => b.project?.id ?? "");
  useEffect(() => {
    const place = host.current;
    if (place === null) return;
    let letGo = () => {};
    const take = () => {
      const { canvas, view: made } = takeScene(place, (again) => {
        letGo();
        if (again) take();
        else setBroken(true);
      });
      made.watch((project) => {
        if (given.current) placeNames(names.current, labels.current, project, putGrips.current?.(project) ?? []);
      });
      const watch = new ResizeObserver(() => made.resize());
      watch.observe(canvas);
      letGo = () => {
        watch.disconnect();
        made.watch(null);
        given.current = false;
        tellBroken = null;
        canvas.remove();
        setView(null);
      };
      setView(made);
    };
    take();
    return () => letGo();
  }, []);
  useEffect(() => {
    const canvas = view && host.current?.querySelector("canvas");
    canvas?.setAttribute("tabindex", "0");
    canvas?.setAttribute("role", "application");
    canvas?.setAttribute(
      "aria-label",
      `${words} Turn with the arrow keys, + and − come closer and go back, 0 shows all.`,
    );
  }, [words, view]);
  useEffect(() => {
    if (model === null || view === null) return;
    // in a task of its own: the page has just been drawn anew
    const show = setTimeout(() => {
      labels.current = model.labels;
      given.current = true;
      view.show(job, model, paintPoints(model.value, scale));
    });
    return () => clearTimeout(show);
  }, [job, model, scale, view]);
  // while a seam's end is slid the surface is not drawn again: without a graphics card that would block the page
  const held = useBook((b) => b.hand !== null && b.hand.laid === null);
  useEffect(() => {
    if (!held) view?.light([pointed, chosen]);
  }, [view, pointed, chosen, held]);
  // biome-ignore lint/correctness/useExhaustiveDependencies: the inks are read from the sheet of the theme
  useEffect(() => {
    const apply = () => host.current && view?.ink(readInk(host.current));
    requestAnimationFrame(apply);
    const dark = matchMedia("(prefers-color-scheme: dark)");
    dark.addEventListener("change", apply);
    return () => dark.removeEventListener("change", apply);
  }, [view, theme]);
  const project = useCallback(() => (given.current ? (view?.project() ?? null) : null), [view]);
  const hookGrips = useCallback(
    (put: ((project: Project) => { x: number; y: number }[]) | null) => {
      putGrips.current = put;
      const now = project();
      if (put === null || now === null) return;
      const spots = put(now);
      // while one is slid the names keep their places
      if (bookStore.getState().hand === null) placeNames(names.current, labels.current, now, spots);
    },
    [project],
  );
  return { host, names, view, broken, hookGrips, project };
}

function choose(id: string | null): void {
  bookStore.setState({ chosen: id });
}

function point(id: string | null): void {
  if (bookStore.getState().pointed !== id) bookStore.setState({ pointed: id });
}

/** The view; `words` says to those who do not see it what is drawn; `grips`: the ends of the seams can be slid. */
export function SolidView(props: {
  facts: Facts;
  fields: SentFields | null;
  field: FieldName;
  words: string;
  grips?: boolean;
}) {
  const { facts, fields, field, words, grips = false } = props;
  const { form, seams, rig } = facts;
  const shape = shapeOf(fields, field);
  const values = valuesOf(fields, field);
  const panels = fields?.panelsShape;
  const over = useMemo(() => nameModel({ form, seams, rig }, panels), [form, seams, rig, panels]);
  const apart = !isOfPoints(field);
  const model = useMemo(() => shape && buildModel(shape, values, apart, over), [shape, values, apart, over]);
  const scale = useMemo(
    () => values && scaleOf(field, values, form?.stress ?? { warp: 1, weft: 1 }),
    [form, values, field],
  );
  const { host, names, view, broken, hookGrips, project } = useScene(model, scale, words);
  const pointed = useBook((b) => b.pointed);
  const chosen = useBook((b) => b.chosen);
  const place = (e: { nativeEvent: { offsetX: number; offsetY: number } }) =>
    [e.nativeEvent.offsetX, e.nativeEvent.offsetY] as const;
  return (
    <div className="solid">
      {/* biome-ignore lint/a11y/noStaticElementInteractions: the canvas in it has the role and the focus */}
      <div
        ref={host}
        onPointerMove={(e) => e.buttons === 0 && point(view?.pick(...place(e)) ?? null)}
        onPointerLeave={() => point(null)}
        onClick={(e) => choose(view?.pick(...place(e)) ?? null)}
        onKeyDown={(e) => {
          const key = KEYS[e.key];
          if (key === undefined || view === null || e.ctrlKey || e.metaKey) return;
          e.preventDefault();
          e.stopPropagation();
          key(view);
        }}
      />
      <div className="names" ref={names} aria-hidden="true">
        {model?.labels.map(({ id }, i) => (
          // biome-ignore lint/suspicious/noArrayIndexKey: a place may carry the same name twice
          <span key={`${id} ${i}`} className={id === pointed || id === chosen ? "name lit" : "name"}>
            {writtenName(id)}
          </span>
        ))}
      </div>
      {grips && form && !broken && <Grips form={form} project={project} hook={hookGrips} />}
      {scale !== null && <Legend scale={scale} />}
      {broken && (
        <p className="broken">
          This browser draws no WebGL: the surface cannot be shown here. Figures, panels, rolls and papers are not
          affected.
        </p>
      )}
    </div>
  );
}
