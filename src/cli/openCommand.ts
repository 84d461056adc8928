// seamstay open [JOB]: the page on this machine, with a job in it where one is named. Runs until it is interrupted.
import { basename, dirname, resolve } from "node:path";
import { PlanError } from "../core/problem.ts";
import { pageFolder } from "./packageFiles.ts";
import { type OpenedJob, servePage } from "./pageServer.ts";
import { parseOptions } from "./parseOptions.ts";
import { readBytes, readGiven } from "./readInput.ts";
import { type Terminal, usageError } from "./terminal.ts";

/** Where the page is served when nothing else is asked for. */
const PORT = 4720;
const LARGEST = 1024 * 1024 * 1024;

/** The verb; resolves when the server has closed. @returns exit status 0 */
export async function openCommand(args: string[], terminal: Terminal): Promise<number> {
  const { operands, values } = parseOptions("open", args, { operands: ["JOB?"], values: ["port"], flags: [] });
  const wanted = values.port === undefined ? PORT : Number(values.port);
  if (!Number.isInteger(wanted) || wanted < 0 || wanted > 65535) {
    throw usageError(`--port ${values.port}: a whole number from 0 (any free one) to 65535 is wanted`);
  }
  const opened = operands[0] === undefined ? null : readOpened(operands[0]);
  const { server, port } = await servePage(pageFolder(), wanted, opened);
  terminal.out(`Seamstay is open at http://127.0.0.1:${port}/  (Ctrl-C ends it)`);
  await new Promise<void>((done) => {
    const close = () => {
      server.closeAllConnections();
      server.close(() => done());
    };
    process.once("SIGINT", close);
    process.once("SIGTERM", close);
  });
  return 0;
}

/** A job with its mesh, as the page takes it over; its content is judged there. */
function readOpened(path: string): OpenedJob {
  const { value } = readGiven(path);
  const file = (value as { mesh?: { file?: unknown } } | null)?.mesh?.file;
  if (file === undefined) return { name: basename(path), job: value, mesh: null };
  if (typeof file !== "string") throw new PlanError("job-value-type", "mesh.file: a file name is wanted", "mesh.file");
  const bytes = readBytes(resolve(dirname(path), file), LARGEST);
  return { name: basename(path), job: value, mesh: { name: basename(file), bytes } };
}
