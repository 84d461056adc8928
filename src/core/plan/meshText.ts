// Text of the files a plan starts from.
import { PlanError } from "../problem.ts";

/** Title of a job that is only a mesh, from the name of its file. */
export function titleOfMesh(file: string): string {
  const title = file
    .replace(/\.obj$/i, "")
    .replace(/[_\s]+/g, " ")
    .trim();
  return title === "" ? "Untitled" : title;
}

/**
 * Text of UTF-8 bytes, a byte order mark kept.
 * @throws PlanError file-text, with the line
 */
export function decodeText(bytes: Uint8Array, name: string): string {
  try {
    return new TextDecoder("utf-8", { fatal: true, ignoreBOM: true }).decode(bytes);
  } catch {
    throw notText(name, bytes);
  }
}

/** The error that names the first line that is no UTF-8. */
export function notText(name: string, bytes: Uint8Array): PlanError {
  const wide = bytes[0] === 0xff || bytes[0] === 0xfe ? "; it looks like UTF-16" : "";
  let line = 1;
  let start = 0;
  const sound = (end: number) => {
    try {
      new TextDecoder("utf-8", { fatal: true }).decode(bytes.subarray(start, end));
      return true;
    } catch {
      return false;
    }
  };
  for (let end = bytes.indexOf(10); end >= 0 && sound(end); end = bytes.indexOf(10, start)) {
    start = end + 1;
    line++;
  }
  return new PlanError("file-text", `${name}: line ${line} is not UTF-8 text${wide}; save the file as UTF-8`, name, {
    line,
  });
}
