// The keys of the page: what each does, in the order of the sheet that lists them.
import { packJob, saveFile } from "../keep/saveFiles.ts";
import { bookStore, LEAVES, redo, type Theme, undo } from "../store/bookStore.ts";
import { weigher } from "../worker/dragger.ts";
import { requestPlan, stopPlan } from "../worker/planner.ts";

export interface Key {
  keys: string;
  words: string;
}

const THEMES: Theme[] = ["system", "light", "dark"];

/** Next theme. */
export function turnTheme(): void {
  const { theme } = bookStore.getState();
  bookStore.setState({ theme: THEMES[(THEMES.indexOf(theme) + 1) % THEMES.length] ?? "system" });
}

/** Moves the step of the tensioning. */
function moveStep(by: number): void {
  const { step, facts } = bookStore.getState();
  const last = new Set(facts?.tensioning?.stages.flatMap((s) => s.moves.map((m) => m.step))).size;
  bookStore.setState({ step: Math.min(Math.max(step + by, 0), last) });
}

const PLAIN: Record<string, () => void> = {
  "?": () => bookStore.setState({ sheet: "keys" }),
  f: () => bookStore.setState({ sheet: "findings" }),
  j: () => bookStore.setState({ sheet: "jobs" }),
  p: () => {
    const { project } = bookStore.getState();
    if (project !== null) requestPlan(project);
  },
  ".": () => {
    stopPlan();
    weigher.stop();
  },
  t: turnTheme,
  "[": () => moveStep(-1),
  "]": () => moveStep(1),
  Escape: () => bookStore.setState({ chosen: null }),
};

/** What the sheet of keys lists. */
export const KEY_SHEET: Key[] = [
  { keys: "1 … 7", words: "leaf Form, Seams, Panels, Rolls, Rig, Papers, Site" },
  { keys: "Ctrl Z", words: "undo" },
  { keys: "Ctrl Y or Ctrl Shift Z", words: "redo" },
  { keys: "Ctrl S", words: "save the job with its mesh as a file" },
  { keys: "P", words: "plan again" },
  { keys: ".", words: "stop what is being worked out" },
  { keys: "F", words: "all findings" },
  { keys: "J", words: "jobs kept in this browser" },
  { keys: "[ and ]", words: "one step of the tensioning back, on" },
  { keys: "T", words: "light, dark, as the system" },
  { keys: "Escape", words: "take back what was typed and leave the field; let go of what is chosen; put a sheet away" },
  { keys: "Tab, Enter", words: "from field to field; take what was typed" },
  { keys: "Arrow keys on the surface", words: "turn it; + and − come closer and go back, 0 shows all" },
  {
    keys: "Arrow keys on a seam's end",
    words: "slide it by 10 mm, with Shift by 100, past a corner onto the next edge; Enter lets go, Escape puts it back",
  },
  { keys: "Arrow keys on a roll", words: "move a panel by 10 mm, with Shift by 100, and pin it; Delete lets it go" },
  { keys: "Enter or Space on a drawing", words: "choose the panel or the adjuster that has the focus" },
  {
    keys: "Page keys, ← → on a paper",
    words: "sheet before, next sheet; + and − larger and smaller, 0 as wide as the page",
  },
  { keys: "Ctrl P", words: "print the paper that is looked at" },
  { keys: "?", words: "this sheet" },
];

const TEXT = "input:not([type=checkbox], [type=file])";

/** Keys without Ctrl are the field's own there. */
export function isTyping(target: EventTarget | null): target is HTMLElement {
  return target instanceof HTMLElement && target.matches(`${TEXT}, select`);
}

/** Something is typed there that the job does not have yet: undo is the browser's, letter by letter. */
function isHalfTyped(target: EventTarget | null): boolean {
  return target instanceof HTMLElement && target.matches(`${TEXT}:not([data-taken])`);
}

/** Hears the keys; returns what ends it. */
export function hearKeys(): () => void {
  const hear = (e: KeyboardEvent) => {
    const { project, sheet } = bookStore.getState();
    if (e.defaultPrevented || sheet !== "none") return;
    const key = e.key.length === 1 ? e.key.toLowerCase() : e.key;
    if (e.ctrlKey || e.metaKey) {
      if (key === "z" && !isHalfTyped(e.target)) e.shiftKey ? redo() : undo();
      else if (key === "y" && !isHalfTyped(e.target)) redo();
      else if (key === "s" && project !== null) void packJob(project).then(saveFile);
      else return;
      e.preventDefault();
      return;
    }
    if (isTyping(e.target)) {
      const field = e.target;
      // once the field has taken back what was typed: left before that, it would hand it on
      if (key === "Escape") queueMicrotask(() => field.blur());
      return;
    }
    if (e.altKey || project === null) {
      if (key === "?") bookStore.setState({ sheet: "keys" });
      return;
    }
    const leaf = LEAVES[Number(key) - 1];
    if (leaf !== undefined) bookStore.setState({ leaf });
    else PLAIN[key]?.();
  };
  document.addEventListener("keydown", hear);
  return () => document.removeEventListener("keydown", hear);
}
