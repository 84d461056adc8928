// What the page is served by: this machine only, nothing outside the folder, no way in by another name.
import { mkdirSync, mkdtempSync, writeFileSync } from "node:fs";
import { request } from "node:http";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { CONTENT_POLICY, servePage } from "../../src/cli/pageServer.ts";
import { PlanError } from "../../src/core/problem.ts";

let port = 0;
let close = () => {};
const folder = mkdtempSync(join(tmpdir(), "seamstay-serve-"));

beforeAll(async () => {
  mkdirSync(join(folder, "page/assets"), { recursive: true });
  writeFileSync(join(folder, "secret.html"), "outside");
  writeFileSync(join(folder, "page/index.html"), "<!doctype html>");
  writeFileSync(join(folder, "page/assets/a.js"), "1");
  writeFileSync(join(folder, "page/third-party.txt"), "© 2010");
  writeFileSync(join(folder, "page/assets/a.js.map"), "{}");
  const mesh = { name: "m.obj", bytes: new TextEncoder().encode("v 0 0 0") };
  const served = await servePage(join(folder, "page"), 0, { name: "job.json", job: { title: "Kiosk" }, mesh });
  port = served.port;
  close = () => void served.server.close();
});
afterAll(() => close());

/** One request as it is written on the wire. */
function ask(path: string, options: { host?: string; method?: string } = {}) {
  return new Promise<{ status: number; headers: Record<string, unknown>; text: string }>((resolve, reject) => {
    const { host = `127.0.0.1:${port}`, method = "GET" } = options;
    const sent = request({ host: "127.0.0.1", port, path, method, headers: { host } }, (response) => {
      let text = "";
      response.on("data", (chunk) => {
        text += chunk;
      });
      response.on("end", () => resolve({ status: response.statusCode ?? 0, headers: response.headers, text }));
    });
    sent.on("error", reject);
    sent.end();
  });
}

describe("the server of the page", () => {
  it("serves the page with a policy that lets nothing in or out", async () => {
    const got = await ask("/");
    expect(got).toMatchObject({ status: 200, text: "<!doctype html>" });
    expect(got.headers["content-security-policy"]).toBe(CONTENT_POLICY);
    expect(CONTENT_POLICY).toMatch(/default-src 'none'/);
    expect(CONTENT_POLICY).not.toMatch(/unsafe|https?:|\*/);
    expect((await ask("/assets/a.js?x=1")).headers["cache-control"]).toMatch(/immutable/);
  });

  it("serves the licences of its packages as text to be read, under the same policy", async () => {
    const got = await ask("/third-party.txt");
    expect(got).toMatchObject({ status: 200, text: "© 2010" });
    expect(got.headers).toMatchObject({
      "content-type": "text/plain; charset=utf-8",
      "content-security-policy": CONTENT_POLICY,
    });
  });

  // HTML standard, cross-origin isolation: both headers on the page, the second on every worker script too
  it.each(["/", "/assets/a.js"])("lets the threads of the nest share memory (%s)", async (path) => {
    expect((await ask(path)).headers).toMatchObject({
      "cross-origin-opener-policy": "same-origin",
      "cross-origin-embedder-policy": "require-corp",
    });
  });

  it.each(["evil.example", "evil.example:80", "127.0.0.1", "127.0.0.1.evil.example", "localhost:1"])(
    "refuses the Host %j",
    async (host) => {
      expect((await ask("/", { host })).status).toBe(421);
      expect((await ask("/opened.json", { host })).text).not.toContain("Kiosk");
    },
  );

  it.each([
    "/../secret.html",
    "/%2e%2e/secret.html",
    "/assets/..%2f..%2f..%2fsecret.html",
    "//etc/passwd",
    "/assets",
    "/assets/a.js.map",
    "/index.htm",
  ])("does not serve %s", async (path) => {
    const got = await ask(path);
    expect(got.status).toBe(404);
    expect(got.text).not.toContain("outside");
  });

  it("only reads", async () => {
    expect((await ask("/", { method: "POST" })).status).toBe(405);
    expect(await ask("/", { method: "HEAD" })).toMatchObject({ status: 200, text: "" });
  });

  it("hands the opened job over, under localhost too", async () => {
    const got = await ask("/opened.json", { host: `localhost:${port}` });
    expect(JSON.parse(got.text)).toEqual({ name: "job.json", job: { title: "Kiosk" }, mesh: "m.obj" });
    expect((await ask("/opened-mesh")).text).toBe("v 0 0 0");
  });

  it("says what is wrong where it cannot serve", async () => {
    const codes = async (of: Promise<unknown>) =>
      of.then(
        () => "",
        (e) => (e instanceof PlanError ? e.code : String(e)),
      );
    expect(await codes(servePage(join(folder, "page"), port, null))).toBe("port-taken");
    expect(await codes(servePage(join(folder, "none"), 0, null))).toBe("page-missing");
  });
});
