// What the command line says, and where: results on stdout, progress and errors on stderr.
import { PlanError } from "../core/problem.ts";

/** Two streams and whether a person watches the second one. */
export interface Terminal {
  out: (text: string) => void;
  err: (text: string) => void;
  /** True where stderr is a terminal: progress is shown there only. */
  live: boolean;
}

/** The terminal of this process; names out of files cannot steer it. */
export function openTerminal(): Terminal {
  const clean = (text: string) => text.replace(/[^\P{Cc}\n]/gu, "?");
  return {
    out: (text) => void process.stdout.write(`${clean(text)}\n`),
    err: (text) => void process.stderr.write(`${clean(text)}\n`),
    live: process.stderr.isTTY === true,
  };
}

/** One block for an error: what (with value, limit and remedy), where, and the code at the end. */
export function writeError(subject: string, error: PlanError): string {
  const lines = error.message.split("\n");
  const where = typeof error.where === "string" ? error.where : error.where.slice(0, 12).join(", ");
  return [
    `seamstay: ${subject}: ${lines.length === 1 ? lines[0] : `${lines.length} things to correct`}`,
    ...(lines.length === 1 ? [] : lines.map((line) => `  - ${line}`)),
    ...(where === "" || lines.length > 1 || lines[0].startsWith(where) ? [] : [`  where: ${where}`]),
    `  (${error.code})`,
  ].join("\n");
}

/** A line of progress that overwrites itself; nothing where nobody watches. */
export function openProgress(terminal: Terminal, quiet: boolean) {
  if (!terminal.live || quiet) return { show: () => {}, end: () => {} };
  let shown = "";
  return {
    show: (share: number, words: string) => {
      const line = `${String(Math.round(100 * share)).padStart(3)} %  ${words}`.slice(0, 79);
      if (line === shown) return;
      shown = line;
      process.stderr.write(`\r${line.padEnd(79)}`);
    },
    end: () => {
      if (shown !== "") process.stderr.write(`\r${" ".repeat(79)}\r`);
    },
  };
}

/** A use of the command line that cannot be understood. */
export function usageError(text: string): PlanError {
  return new PlanError("usage", text);
}
