// What the lines of a flat panel are, as they are drawn: the cut line, the net line by what the side is held by, the pen's lines.
import type { SeenPanel } from "../../core/plan/dragSeam.ts";

/** A look of the drawing, and what it stands for. */
export interface LineLook {
  /** Class of the line as PanelDrawing draws it. */
  look: string;
  words: string;
}

const SIDES: readonly LineLook[] = [
  { look: "side seam", words: "seam line: weld to the next panel" },
  { look: "side cable", words: "cable edge" },
  { look: "side clamped", words: "clamped edge" },
  { look: "side free", words: "free edge" },
];

const PEN: readonly [kind: string, words: string][] = [
  ["match", "match marks"],
  ["seam-line", "seam lines"],
  ["fold-line", "folds"],
  ["warp", "warp arrow"],
  ["station", "stations"],
];

/** The lines these panels show, in the order of the key. `detail`: with what the pen draws, as PanelDrawing takes it. */
export function lineLooks(panels: readonly Pick<SeenPanel, "sides" | "marks">[], detail: boolean): LineLook[] {
  const kinds = new Set(panels.flatMap((p) => p.sides.map((s) => `side ${s.kind}`)));
  const looks = [{ look: "cutline", words: "cut line" }, ...SIDES.filter((s) => kinds.has(s.look))];
  if (!detail) return looks;
  const drawn = new Set(panels.flatMap((p) => p.marks.flatMap((m) => (m.points === undefined ? [] : [m.kind]))));
  if (drawn.has("slit")) looks.push({ look: "slit", words: "slit, cut" });
  const pen = PEN.filter(([kind]) => drawn.has(kind)).map(([, words]) => words);
  return pen.length === 0 ? looks : [...looks, { look: "pen", words: `pen: ${pen.join(", ")}` }];
}

/** The key. */
export function PanelKey({ panels, detail }: { panels: readonly SeenPanel[]; detail: boolean }) {
  return (
    <ul className="linekey" aria-label="Lines of the panels">
      {lineLooks(panels, detail).map(({ look, words }) => (
        <li key={look}>
          <svg className="sheet" viewBox="0 0 40 14" aria-hidden="true">
            {/* the cut line stands where the cloth ends */}
            <path className="cut" d={look === "cutline" ? "M0 7H40V14H0Z" : "M0 0H40V14H0Z"} />
            <path className={look} d="M0 7H40" />
          </svg>
          {words}
        </li>
      ))}
      <li>Warp runs from left to right{detail ? "" : "; a panel chosen shows its marks"}.</li>
    </ul>
  );
}
