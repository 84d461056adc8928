// The findings sheets: what is open, what was checked against what, what the engineer must supply. The one paper that is
// written whatever the plan came to.
import type { Finding, FindingLevel } from "../../problem.ts";
import type { Facts } from "../../records/facts.ts";
import { layoutHeads, layoutRows } from "../tables/layoutRows.ts";
import { type LikeChecks, likeChecks } from "../tables/likeChecks.ts";
import { type LikeFindings, likeFindings } from "../tables/likeFindings.ts";
import { cautionsOf } from "../words/cautions.ts";
import { ENGINEER_SUPPLIES } from "../words/cautionTexts.ts";
import { decimal } from "../words/decimal.ts";
import { unitsInText } from "../words/paperUnits.ts";
import { closeBook, type FontFiles, openBook } from "./layout/book.ts";
import { flowCautionsInPlace } from "./layout/cautionBlock.ts";
import { drawText, MM, PITCH, SMALL, textWidth } from "./layout/pen.ts";
import {
  type Column,
  type Flow,
  flowGapInPlace,
  flowHeadingInPlace,
  flowTableInPlace,
  flowTextInPlace,
  needInPlace,
  openFlow,
} from "./layout/table.ts";

const FINDING_COLUMNS: readonly Column[] = [
  { head: ["Code", "and station"], width: 42, bold: true },
  { head: ["Where"], width: 34 },
  { head: ["What is the matter"], width: 78 },
  { head: ["Value"], width: 24, align: "end" },
  { head: ["Limit"], width: 24, align: "end" },
  { head: ["What to do"], width: 62 },
  { head: ["Basis"], width: 32 },
];

const CHECK_COLUMNS: readonly Column[] = [
  { head: ["Station"], width: 22 },
  { head: ["Check"], width: 150 },
  { head: ["Value"], width: 34, align: "end" },
  { head: ["Limit"], width: 34, align: "end" },
  { head: ["Held"], width: 18, bold: true },
];

const NUMBER = { width: 20, align: "end" } as const;

const LAYOUT_COLUMNS: readonly Omit<Column, "head">[] = [
  { width: 22, bold: true },
  { width: 62 },
  ...Array.from({ length: 7 }, () => NUMBER),
  { width: 30 },
  { width: 16, bold: true },
];

const PLACES = 10;

/** Findings carry bare numbers: what they count, their words say. */
const SHARES = "Value and limit are in the unit the words name; a share is given as a part of one (0.05 is 5 %).";

const HEADINGS: Readonly<Record<FindingLevel, string>> = {
  stop: "Stops: no paper may be issued while one of these is open",
  caution: "Cautions: each wants a decision",
  note: "Notes: defaults taken and repairs made",
};

/** A value as the reader wants it: four figures, no exponent. */
export function valueText(value: number | string | null): string {
  if (value === null) return "–";
  if (typeof value === "string") return value;
  if (!Number.isFinite(value)) return String(value);
  const size = Math.abs(value);
  if (size >= 1e12) return String(value);
  if (size !== 0 && size < 1e-4) {
    const [digits, power] = value.toExponential(1).split("e");
    const raised = [...power].map((c) => (c === "-" ? "⁻" : "⁰¹²³⁴⁵⁶⁷⁸⁹"[Number(c)])).join("");
    return `${Number(digits)}·10${raised}`;
  }
  return size >= 1000 ? decimal(value, 0) : String(Number(value.toPrecision(4)));
}

/** The bytes of findings.pdf. */
export async function writeFindingSheets(facts: Facts, fonts: FontFiles): Promise<Uint8Array> {
  const book = await openBook(facts, fonts, "findings", "findings");
  const flow = openFlow(book, "Findings");
  flowSummaryInPlace(flow, facts);
  for (const level of ["stop", "caution"] as const) flowFindingsInPlace(flow, facts, level);
  flowHeadingInPlace(flow, "Before the cloth is handled, lifted or tensioned");
  flowCautionsInPlace(flow, cautionsOf(facts, "findings"));
  flowEngineerInPlace(flow);
  flowFindingsInPlace(flow, facts, "note");
  flowLayoutsInPlace(flow, facts);
  flowChecksInPlace(flow, facts);
  return closeBook(book);
}

function count(n: number, one: string, many: string): string {
  return n === 1 ? `1 ${one}` : `${n} ${many}`;
}

function flowSummaryInPlace(flow: Flow, facts: Facts): void {
  const of = (level: FindingLevel) => facts.findings.filter((f) => f.level === level).length;
  const held = facts.checks.filter((c) => c.holds).length;
  const line = `${count(of("stop"), "stop", "stops")}, ${count(of("caution"), "caution", "cautions")}, ${count(of("note"), "note", "notes")}; ${held} of ${count(facts.checks.length, "check", "checks")} held.`;
  flowTextInPlace(flow, line, { bold: true });
  if (facts.job.units === "imperial") {
    const words =
      "The stations judge in metric, and so do the columns Value and Limit; in sentences the imperial value follows in brackets.";
    flowTextInPlace(flow, words);
  }
  const ran = (["form", "seams", "panels", "rolls", "rig"] as const).filter((k) => facts[k] !== undefined);
  const got = ran.length > 0 ? `Stations with a result: ${ran.join(", ")}.` : "No station came to a result.";
  flowTextInPlace(
    flow,
    `${got} Mesh ${facts.job.mesh}. The plan is made for prestress; it does not design for wind, snow or ponding. Cautions for the work stand below, before anything is handled.`,
  );
  if (facts.form) flowTextInPlace(flow, unitsInText(facts.job, describeForm(facts.form)));
}

/** Balance, forces and relief of the form in plain words. */
function describeForm(form: NonNullable<Facts["form"]>): string {
  // Two decimals are enough to read; what they would show as nothing is not nothing.
  const percent = (r: number) => (r > 0 && r < 5e-5 ? "under 0.01 %" : `${decimal(100 * r, 2)} %`);
  const { residual, relief, edges } = form;
  const within = residual.tangentialMax === undefined ? "" : `, within it ${percent(residual.tangentialMax)}`;
  const found = edges.flatMap((e) =>
    e.forceFrom === "balance" && e.force !== null
      ? [`${e.id} ${decimal(e.force, 2)} kN${e.spread === undefined ? "" : ` ± ${decimal(e.spread, 2)} kN`}`]
      : [],
  );
  const shown = found.length > PLACES ? [...found.slice(0, PLACES), `${found.length - PLACES} more`] : found;
  const lines = [
    `Out of balance at most ${percent(residual.max)} of the cloth's force at a vertex: across the cloth ${percent(residual.normalMax)}${within}; rms ${percent(residual.rms)}.`,
  ];
  if (shown.length > 0) lines.push(`Cable forces from best balance, with their spread: ${shown.join(", ")}.`);
  if (relief) {
    const { curvature, stripWidth, slope } = relief;
    if (curvature)
      lines.push(
        `Gaussian curvature ${decimal(curvature.least, 4)} to ${decimal(curvature.greatest, 4)} 1/m²${stripWidth === null ? "" : `: a strip ${decimal(stripWidth, 2)} m wide there has edges 0.5 % off its middle`}.`,
      );
    lines.push(`Least slope ${decimal(slope.least, 1)}°, ${percent(relief.flatShare)} of the cloth below 2°.`);
  }
  return `Form: ${lines.join(" ")}`;
}

/**
 * Places by name, those of one finding together, with its value behind them where values differ; of a long list the first ones and
 * how many more, facts.json holds them all.
 */
function placesText(all: readonly Finding[], told: boolean): string {
  const shown: string[] = [];
  let left = PLACES;
  let more = 0;
  for (const { where, value } of all) {
    const names = [where].flat();
    const first = names.slice(0, left);
    left -= first.length;
    more += names.length - first.length;
    if (first.length > 0) shown.push(`${first.join(", ")}${told ? ` (${valueText(value)})` : ""}`);
  }
  return `${shown.join(told ? "; " : ", ")}${more > 0 ? ` and ${more} more` : ""}`;
}

function findingRow(facts: Facts, { worst: f, all }: LikeFindings): string[] {
  const told = all.length > 1 && all.some((g) => typeof g.value === "number" && g.value !== f.value);
  const alike = all.length === 1 ? "" : told ? `The worst of ${all.length} alike: ` : `One of ${all.length} alike: `;
  return [
    `${f.code} (${f.station})`,
    placesText(all, told),
    `${alike}${unitsInText(facts.job, f.text)}`,
    valueText(f.value),
    valueText(f.limit),
    unitsInText(facts.job, f.remedy),
    f.basis,
  ];
}

function flowFindingsInPlace(flow: Flow, facts: Facts, level: FindingLevel): void {
  const found = facts.findings.filter((f) => f.level === level);
  flowHeadingInPlace(flow, HEADINGS[level]);
  if (found.length === 0) {
    flowTextInPlace(flow, "None.");
    return;
  }
  flowTableInPlace(
    flow,
    FINDING_COLUMNS,
    likeFindings(found).map((group) => findingRow(facts, group)),
  );
  if (level !== "note") flowTextInPlace(flow, SHARES);
}

function flowEngineerInPlace(flow: Flow): void {
  flowHeadingInPlace(flow, "What the engineer must supply or decide");
  ENGINEER_SUPPLIES.forEach((text, i) => {
    needInPlace(flow, 2 * PITCH);
    drawText(flow.sheet.page, `${i + 1}.`, {
      x: flow.sheet.left,
      y: flow.y - PITCH + 1,
      size: SMALL,
      font: flow.book.bold,
    });
    flowTextInPlace(flow, text, { indent: 7 });
  });
  needInPlace(flow, 14);
  flowGapInPlace(flow, 9);
  const { page, left, right } = flow.sheet;
  const quarter = (right - left) / 4;
  ["Engineer", "Licence", "Date", "Signature"].forEach((what, i) => {
    const x = left + i * quarter;
    drawText(page, what, { x, y: flow.y, size: SMALL, font: flow.book.regular });
    const from = x + textWidth(what, flow.book.regular, SMALL) + 2;
    page.drawLine({
      start: { x: from * MM, y: flow.y * MM },
      end: { x: (x + quarter - 4) * MM, y: flow.y * MM },
      thickness: 0.4,
    });
  });
  flowGapInPlace(flow, 3);
}

/** Why the seams run where they do, and what else was weighed. */
function flowLayoutsInPlace(flow: Flow, facts: Facts): void {
  const { layouts = [] } = facts;
  if (layouts.length === 0) return;
  flowHeadingInPlace(flow, "Layouts of the seams, and why these were taken");
  for (const { region, why } of layouts) flowTextInPlace(flow, `${region}: ${unitsInText(facts.job, why)}`);
  const rows = layoutRows(facts);
  if (rows.length === 0) return;
  flowGapInPlace(flow, 2);
  const columns = layoutHeads(facts).map((head, k): Column => ({ head, ...LAYOUT_COLUMNS[k] }));
  flowTableInPlace(flow, columns, rows);
}

function flowChecksInPlace(flow: Flow, facts: Facts): void {
  const { checks } = facts;
  flowHeadingInPlace(flow, "Checks made");
  if (checks.length === 0) {
    flowTextInPlace(flow, "None.");
    return;
  }
  // What did not hold comes first; the order is otherwise the plan's.
  const ordered = [...checks.filter((c) => !c.holds), ...checks.filter((c) => c.holds)];
  const ids = (list: readonly { id: string }[] | undefined) => (list ?? []).map((e) => e.id);
  const groups = likeChecks(ordered, { panels: ids(facts.panels), rolls: ids(facts.rolls) });
  const rows = groups.map((group) => {
    const { worst } = group;
    return [
      worst.station,
      checkText(facts, group),
      valueText(worst.value),
      limitText(worst),
      worst.holds ? "yes" : "NO",
    ];
  });
  flowTableInPlace(flow, CHECK_COLUMNS, rows);
}

/** A check in words; of many alike how many there are, the first of their names, and which of them the value is of. */
function checkText(facts: Facts, { text, kind, names, worstName }: LikeChecks): string {
  const words = unitsInText(facts.job, text);
  if (names.length === 0) return words;
  const more = names.length > PLACES ? ` and ${names.length - PLACES} more` : "";
  return `${names.length} ${kind}s (${names.slice(0, PLACES).join(", ")}${more}): ${words}; the value is that of ${worstName}, the nearest to the limit or the farthest beyond it`;
}

/** A limit that is a least one says so: a value above it would else read as a check that failed. */
function limitText({ value, limit, holds }: LikeChecks["worst"]): string {
  const numbers = typeof value === "number" && typeof limit === "number";
  const least = numbers && (holds ? value > limit : value < limit);
  return least ? `at least ${valueText(limit)}` : valueText(limit);
}
