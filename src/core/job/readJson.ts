// Text of a JSON file to its value, with the place of an error by line and column and a finding for every key given twice.
// Engines word and place JSON errors differently; this scan says the same on all of them. Source: RFC 8259.
import { type Finding, PlanError } from "../problem.ts";

/** More levels than any job has; keeps a hostile file from exhausting the stack. */
const DEEPEST = 200;

/**
 * Value of a JSON text.
 * @param what it is called where it is none
 * @throws PlanError job-json: not JSON, with line and column; nested deeper than 200 levels
 */
export function readJson(text: string, what = "job"): { value: unknown; findings: Finding[] } {
  const body = text.startsWith("\uFEFF") ? text.slice(1) : text;
  const twice = scanJson(body, what);
  const value: unknown = JSON.parse(body);
  const findings = twice.map(
    (where): Finding => ({
      code: "job-key-twice",
      level: "caution",
      station: "job",
      where,
      value: null,
      limit: null,
      text: `the key ${where} stands twice in the ${what}; the last one counts`,
      remedy: "delete the one that is not meant",
      basis: "RFC 8259, section 4: names within an object should be unique",
    }),
  );
  return { value, findings };
}

interface Scan {
  text: string;
  what: string;
  at: number;
  twice: string[];
}

/** Paths of the keys that stand twice; throws where the text is not JSON. */
function scanJson(text: string, what: string): string[] {
  const scan: Scan = { text, what, at: 0, twice: [] };
  skipSpace(scan);
  scanValue(scan, "", 0);
  if (scan.at < text.length) fail(scan, `nothing more after the end of the ${what}`);
  return scan.twice;
}

function fail(scan: Scan, expected: string): never {
  const before = scan.text.slice(0, scan.at);
  const line = before.split("\n").length;
  const column = scan.at - before.lastIndexOf("\n");
  const found =
    scan.at < scan.text.length
      ? JSON.stringify(String.fromCodePoint(scan.text.codePointAt(scan.at) ?? 0))
      : "the end of the file";
  throw new PlanError(
    "job-json",
    `the ${scan.what} is not JSON: line ${line}, column ${column}: ${found} where ${expected} is expected; correct it there`,
    `line ${line}, column ${column}`,
    { line, column },
  );
}

function skipSpace(scan: Scan): void {
  const { text } = scan;
  for (;;) {
    const c = text.charCodeAt(scan.at);
    if (c !== 32 && c !== 10 && c !== 13 && c !== 9) return;
    scan.at++;
  }
}

const ESCAPE = /\\(?:["\\/bfnrt]|u[0-9a-fA-F]{4})/y;
const NUMBER = /-?(?:0|[1-9][0-9]*)(?:\.[0-9]+)?(?:[eE][+-]?[0-9]+)?/y;
const WORD = /true|false|null/y;

/** Moves past a token and the space behind it; the token's text, or "" where it does not stand here. */
function takeToken(scan: Scan, token: RegExp): string {
  token.lastIndex = scan.at;
  const found = token.exec(scan.text)?.[0] ?? "";
  scan.at += found.length;
  if (found !== "") skipSpace(scan);
  return found;
}

function takeMark(scan: Scan, mark: string): boolean {
  if (scan.text[scan.at] !== mark) return false;
  scan.at++;
  skipSpace(scan);
  return true;
}

function scanValue(scan: Scan, path: string, depth: number): void {
  if (depth > DEEPEST) fail(scan, `no more than ${DEEPEST} levels of brackets`);
  if (takeMark(scan, "{")) scanObject(scan, path, depth);
  else if (takeMark(scan, "[")) scanArray(scan, path, depth);
  else if (scan.text[scan.at] === '"') takeString(scan);
  else if (takeToken(scan, NUMBER) === "" && takeToken(scan, WORD) === "") fail(scan, "a value");
}

/** Moves past a string and the space behind it; the string as written, quotes included. */
function takeString(scan: Scan): string {
  const { text } = scan;
  if (text[scan.at] !== '"') fail(scan, "a key in double quotes");
  const start = scan.at++;
  for (;;) {
    const c = text.charCodeAt(scan.at);
    if (c === 34) break;
    if (Number.isNaN(c) || c < 32) fail(scan, 'a closing quote (a line break inside a string is "\\n")');
    if (c === 92) takeEscape(scan);
    else scan.at++;
  }
  const found = text.slice(start, ++scan.at);
  skipSpace(scan);
  return found;
}

function takeEscape(scan: Scan): void {
  ESCAPE.lastIndex = scan.at;
  const found = ESCAPE.exec(scan.text)?.[0];
  if (found === undefined) fail(scan, 'an escape such as \\" \\\\ \\n \\u00e9 (a backslash in a path is written \\\\)');
  scan.at += found.length;
}

function scanObject(scan: Scan, path: string, depth: number): void {
  if (takeMark(scan, "}")) return;
  const seen = new Set<string>();
  do {
    const key: string = JSON.parse(takeString(scan));
    const inner = path === "" ? key : `${path}.${key}`;
    if (seen.has(key) && !scan.twice.includes(inner)) scan.twice.push(inner);
    seen.add(key);
    if (!takeMark(scan, ":")) fail(scan, 'a colon ":"');
    scanValue(scan, inner, depth + 1);
  } while (takeMark(scan, ","));
  if (!takeMark(scan, "}")) fail(scan, 'a comma "," or the closing brace "}"');
}

function scanArray(scan: Scan, path: string, depth: number): void {
  if (takeMark(scan, "]")) return;
  let i = 0;
  do {
    // Numbers make up the bulk of an inline mesh: no path is built for them.
    if (takeToken(scan, NUMBER) === "") scanValue(scan, `${path}[${i}]`, depth + 1);
    i++;
  } while (takeMark(scan, ","));
  if (!takeMark(scan, "]")) fail(scan, 'a comma "," or the closing bracket "]"');
}
