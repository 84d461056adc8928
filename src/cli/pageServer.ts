// Serves the built page on this machine only. Every file is read when the server starts and found by its exact name, so no
// path leads out of the folder; foreign Host headers are refused, so no page on the net can reach in by a name of its own.
import { readdirSync, readFileSync } from "node:fs";
import { createServer, type IncomingMessage, type Server, type ServerResponse } from "node:http";
import { extname, join, sep } from "node:path";
import { PlanError } from "../core/problem.ts";

/** What the page finds opened when it asks: a job's text and its mesh. */
export interface OpenedJob {
  name: string;
  job: unknown;
  mesh: { name: string; bytes: Uint8Array } | null;
}

const KINDS: Record<string, string> = {
  ".html": "text/html; charset=utf-8",
  ".js": "text/javascript; charset=utf-8",
  ".css": "text/css; charset=utf-8",
  ".svg": "image/svg+xml",
  ".json": "application/json",
  ".webmanifest": "application/manifest+json",
  ".ttf": "font/ttf",
  ".txt": "text/plain; charset=utf-8",
  ".obj": "text/plain; charset=utf-8",
};

/** No script, style, font or request but the page's own; blobs only for pictures of papers made in the page. */
export const CONTENT_POLICY = [
  "default-src 'none'",
  "script-src 'self'",
  "worker-src 'self'",
  "style-src 'self'",
  "img-src 'self' blob:",
  "font-src 'self'",
  "connect-src 'self'",
  "manifest-src 'self'",
  "base-uri 'none'",
  "form-action 'none'",
  "frame-ancestors 'none'",
].join("; ");

const GUARDS = {
  "content-security-policy": CONTENT_POLICY,
  "x-content-type-options": "nosniff",
  "referrer-policy": "no-referrer",
  "cross-origin-opener-policy": "same-origin",
  // with the line before: the threads of the nest may share memory
  "cross-origin-embedder-policy": "require-corp",
  "cross-origin-resource-policy": "same-origin",
  "permissions-policy": "camera=(), microphone=(), geolocation=()",
};

interface ServedFile {
  kind: string;
  bytes: Buffer | Uint8Array;
  /** Built names carry a hash: they never change. */
  lasting: boolean;
}

/** The files to serve, by the path they are asked for. */
function loadFiles(folder: string): Map<string, ServedFile> {
  const files = new Map<string, ServedFile>();
  for (const entry of readdirSync(folder, { recursive: true, withFileTypes: true })) {
    const kind = KINDS[extname(entry.name)];
    if (!entry.isFile() || kind === undefined) continue;
    const full = join(entry.parentPath, entry.name);
    const path = full.slice(folder.length).split(sep).join("/");
    files.set(path, { kind, bytes: readFileSync(full), lasting: path.startsWith("/assets/") });
  }
  const first = files.get("/index.html");
  if (first !== undefined) files.set("/", first);
  return files;
}

function addOpened(files: Map<string, ServedFile>, opened: OpenedJob): void {
  const { name, job, mesh } = opened;
  const head = JSON.stringify({ name, job, mesh: mesh?.name ?? null });
  files.set("/opened.json", { kind: "application/json", bytes: Buffer.from(head), lasting: false });
  if (mesh !== null) {
    files.set("/opened-mesh", { kind: "application/octet-stream", bytes: mesh.bytes, lasting: false });
  }
}

/** Answers one request. `hosts`: what the Host header may say. */
function answer(
  files: Map<string, ServedFile>,
  hosts: string[],
  request: IncomingMessage,
  response: ServerResponse,
): void {
  const say = (status: number, words: string, more: Record<string, string> = {}) => {
    response.writeHead(status, { ...GUARDS, ...more, "content-type": "text/plain; charset=utf-8" });
    response.end(`${words}\n`);
  };
  const path = (request.url ?? "").split(/[?#]/, 1)[0];
  const file = files.get(path);
  if (!hosts.includes((request.headers.host ?? "").toLowerCase())) {
    say(421, "This page is served to this machine only, under 127.0.0.1 or localhost.");
  } else if (request.method !== "GET" && request.method !== "HEAD") {
    say(405, "Only reading.", { allow: "GET, HEAD" });
  } else if (file !== undefined) {
    sendFile(file, request.method === "HEAD", response);
  } else if (path === "/opened.json") {
    response.writeHead(204, { ...GUARDS, "cache-control": "no-store" });
    response.end();
  } else say(404, "There is no such file.");
}

function sendFile(file: ServedFile, headOnly: boolean, response: ServerResponse): void {
  const { kind, bytes, lasting } = file;
  response.writeHead(200, {
    ...GUARDS,
    "content-type": kind,
    "content-length": String(bytes.length),
    "cache-control": lasting ? "public, max-age=31536000, immutable" : "no-store",
  });
  response.end(headOnly ? undefined : bytes);
}

/**
 * Starts serving; resolves once it listens.
 * @throws PlanError page-missing: the page is not built; port-taken, port-forbidden
 */
export async function servePage(
  folder: string,
  port: number,
  opened: OpenedJob | null,
): Promise<{ server: Server; port: number }> {
  let files: Map<string, ServedFile>;
  try {
    files = loadFiles(folder);
  } catch {
    files = new Map();
  }
  if (!files.has("/")) {
    throw new PlanError("page-missing", `${folder}: the page is not built; run npm run build once`, folder);
  }
  if (opened !== null) addOpened(files, opened);
  const hosts: string[] = [];
  const server = createServer((request, response) => answer(files, hosts, request, response));
  await new Promise<void>((resolve, reject) => {
    server.once("error", (error: NodeJS.ErrnoException) => {
      const words =
        error.code === "EADDRINUSE"
          ? "is taken by another program; give another one with --port"
          : `cannot be used (${error.code}); give one above 1024 with --port`;
      const code = error.code === "EADDRINUSE" ? "port-taken" : "port-forbidden";
      reject(new PlanError(code, `port ${port} ${words}`, "--port", { port }));
    });
    server.listen(port, "127.0.0.1", resolve);
  });
  const address = server.address();
  const real = typeof address === "object" && address !== null ? address.port : port;
  hosts.push(`127.0.0.1:${real}`, `localhost:${real}`);
  if (real === 80) hosts.push("127.0.0.1", "localhost");
  return { server, port: real };
}
