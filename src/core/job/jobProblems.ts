// What is wrong with the shape of a job, in words: path, value, limit, remedy. Reads zod's issues; judges nothing itself.
import type { z } from "zod";
import { PlanError } from "../problem.ts";
import type { KeyNotes } from "./jobSchema.ts";

/** One thing wrong in a job file. */
export interface JobProblem {
  code: string;
  /** As written to a person: seams.pairs[0][1].at */
  path: string;
  text: string;
}

/** Path of a key as a person reads it: seams.pairs[0][1].at, edges["north.a"].force. */
export function writePath(path: readonly PropertyKey[]): string {
  let words = "";
  for (const step of path) {
    if (typeof step === "number") words += `[${step}]`;
    else if (/^[\p{L}\p{N}_ -]+$/u.test(String(step))) words += words === "" ? String(step) : `.${String(step)}`;
    else words += `[${JSON.stringify(String(step))}]`;
  }
  return words;
}

/** One error for all problems of a job; the first gives the code. At most 20 are written out. */
export function buildJobError(problems: JobProblem[]): PlanError {
  const shown = problems.slice(0, 20).map((p) => p.text);
  if (problems.length > shown.length) shown.push(`and ${problems.length - shown.length} more`);
  const where = problems.map((p) => p.path);
  return new PlanError(problems[0].code, shown.join("\n"), where.length === 1 ? where[0] : where, {
    problems: problems.length,
  });
}

/** Problems for the issues zod found in a value. */
export function findJobProblems(schema: z.ZodType, value: unknown, issues: readonly z.core.$ZodIssue[]): JobProblem[] {
  return issues.flatMap((issue) => flattenIssue(issue, [])).flatMap((issue) => toProblems(schema, value, issue));
}

/** Issues inside a union are those of the option that got furthest; an option refused at its door counts least. */
function flattenIssue(issue: z.core.$ZodIssue, before: PropertyKey[]): z.core.$ZodIssue[] {
  const path = [...before, ...issue.path];
  if (issue.code === "invalid_union" && issue.errors.length > 0) {
    const options = issue.errors.filter((errors) => !errors.some((e) => isWrongKind(e)));
    if (options.length > 0) return options[0].flatMap((inner) => flattenIssue(inner, path));
  }
  return [{ ...issue, path }];
}

function isWrongKind(issue: z.core.$ZodIssue): boolean {
  return issue.path.length === 0 && (issue.code === "invalid_type" || issue.code === "invalid_value");
}

function toProblems(schema: z.ZodType, value: unknown, issue: z.core.$ZodIssue): JobProblem[] {
  if (issue.code === "unrecognized_keys") {
    return issue.keys.map((key) => unknownKey([...issue.path, key], listKeys(findSchema(schema, issue.path))));
  }
  const path = writePath(issue.path);
  const given = findValue(value, issue.path);
  const notes = readNotes(findSchema(schema, issue.path));
  const remedy = notes.remedy === undefined ? "" : `; ${notes.remedy}`;
  const unit = notes.unit === undefined ? "" : ` ${notes.unit}`;
  const inUnit = unit === "" ? "" : ` in${unit}`;
  const problem = (code: string, text: string): JobProblem[] => [{ code, path, text: `${path}: ${text}${remedy}` }];
  if (given === undefined) {
    return problem(
      "job-key-missing",
      `missing, and nothing can be taken in its place; it wants ${describe(issue)}${inUnit}`,
    );
  }
  switch (issue.code) {
    case "too_small":
    case "too_big":
      return problem("job-value-range", describeRange(issue, given, unit));
    case "invalid_value":
      if (typeof given === "string") {
        return problem("job-value-choice", `${show(given)} is none of ${issue.values.map((v) => show(v)).join(", ")}`);
      }
      return problem("job-value-type", `${show(given)} is not ${describe(issue)}`);
    case "invalid_format":
      return problem("job-value-text", `${show(given)} holds a line break, a control character or a broken letter`);
    case "invalid_key":
      return problem("job-name", "this name is empty, longer than 80 characters or holds a control character");
    default:
      return problem("job-value-type", `${show(given)} is not ${describe(issue)}${inUnit}`);
  }
}

/** A key the job file does not know, with the nearest one it knows at that place. */
export function unknownKey(path: PropertyKey[], known: string[]): JobProblem {
  const key = String(path[path.length - 1]).toLowerCase();
  const ranked = known
    .map((k) => ({ k, d: k.toLowerCase().includes(key) ? 0 : measureDistance(key, k.toLowerCase()) }))
    .sort((a, b) => a.d - b.d);
  const meant = ranked.length > 0 ? `the nearest known key is ${ranked[0].k}; ` : "";
  const written = writePath(path);
  return {
    code: "job-key-unknown",
    path: written,
    text: `${written}: no such key; ${meant}known here: ${known.join(", ") || "none of that name"}`,
  };
}

function describe(issue: z.core.$ZodIssue): string {
  if (issue.code === "invalid_type") {
    const words: Record<string, string> = {
      number: "a finite number",
      int: "a whole number",
      string: "text",
      boolean: "true or false",
      object: "an object { … }",
      record: "an object { … }",
      array: "a list [ … ]",
      tuple: "a list [ … ]",
    };
    return words[issue.expected] ?? issue.expected;
  }
  if (issue.code === "invalid_value") return issue.values.map((v) => show(v)).join(" or ");
  if (issue.code === "invalid_union") {
    const kinds = issue.errors.map((errors) => (errors[0] === undefined ? "a value" : describe(errors[0])));
    return [...new Set(kinds)].join(" or ");
  }
  return "a value of the right kind";
}

function describeRange(issue: z.core.$ZodIssueTooSmall | z.core.$ZodIssueTooBig, given: unknown, unit: string): string {
  const limit = issue.code === "too_small" ? issue.minimum : issue.maximum;
  if (typeof given === "string") {
    return issue.code === "too_small" ? "empty text" : `${given.length} characters, more than ${limit}`;
  }
  if (Array.isArray(given)) {
    return `${given.length} entries, ${issue.code === "too_small" ? "fewer" : "more"} than ${limit}`;
  }
  const side =
    issue.code === "too_small" ? (issue.inclusive ? "below the least allowed" : "not above") : "above the most allowed";
  return `${show(given)}${unit} is ${side}, ${limit}${unit}`;
}

function show(value: unknown): string {
  if (typeof value === "number" || typeof value === "bigint") return String(value);
  const text = JSON.stringify(value) ?? String(value);
  return text.length > 60 ? `${text.slice(0, 57)}…` : text;
}

function findValue(value: unknown, path: readonly PropertyKey[]): unknown {
  let here = value;
  for (const step of path) {
    if (here === null || typeof here !== "object" || !Object.hasOwn(here, step)) return undefined;
    here = (here as Record<PropertyKey, unknown>)[step];
  }
  return here;
}

interface Shape {
  type: string;
  shape?: Record<string, z.ZodType>;
  valueType?: z.ZodType;
  element?: z.ZodType;
  items?: z.ZodType[];
  innerType?: z.ZodType;
  options?: z.ZodType[];
}

const shapeOf = (schema: z.ZodType): Shape => schema.def as unknown as Shape;

/** The schemas that may stand at a path: optional and nullable wrappers off, every option of a union. */
function openSchema(schema: z.ZodType): z.ZodType[] {
  const { innerType, options } = shapeOf(schema);
  if (innerType !== undefined) return openSchema(innerType);
  return options === undefined ? [schema] : options.flatMap(openSchema);
}

function findSchema(schema: z.ZodType, path: readonly PropertyKey[]): z.ZodType[] {
  let here = [schema];
  for (const step of path) {
    here = here.flatMap(openSchema).flatMap((s) => {
      const { shape, valueType, element, items } = shapeOf(s);
      const next = shape?.[String(step)] ?? valueType ?? element ?? items?.[Number(step)];
      return next === undefined ? [] : [next];
    });
  }
  return here;
}

function listKeys(schemas: z.ZodType[]): string[] {
  return schemas.flatMap(openSchema).flatMap((s) => Object.keys(shapeOf(s).shape ?? {}));
}

function readNotes(schemas: z.ZodType[]): KeyNotes {
  const notes = schemas.flatMap((s) => [s, ...openSchema(s)]).map((s) => (s.meta() ?? {}) as KeyNotes);
  return notes.find((n) => n.unit !== undefined || n.remedy !== undefined) ?? {};
}

/** Edits between two words (Levenshtein 1966), one row at a time. */
function measureDistance(a: string, b: string): number {
  let row = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i++) {
    const next = [i];
    for (let j = 1; j <= b.length; j++) {
      next[j] = Math.min(row[j] + 1, next[j - 1] + 1, row[j - 1] + (a[i - 1] === b[j - 1] ? 0 : 1));
    }
    row = next;
  }
  return row[b.length];
}
