// Builds the page into dist/page, with a list of its files for the service worker.
import { createHash } from "node:crypto";
import { readFileSync } from "node:fs";
import react from "@vitejs/plugin-react";
import { defineConfig, type Plugin } from "vite";
import { gatherNotices } from "./notices.ts";

/** Emits service-worker.js: keep/serviceWorker.js with the names of all built files, and a version that is their hash. */
function listFilesForOffline(): Plugin {
  return {
    name: "seamstay-offline",
    apply: "build",
    generateBundle(_options, bundle) {
      const names = Object.keys(bundle).filter((name) => !name.endsWith(".map"));
      const hash = createHash("sha256");
      for (const name of [...names].sort()) {
        const file = bundle[name];
        hash.update(name).update(file?.type === "asset" ? file.source : (file?.code ?? ""));
      }
      const files = [...new Set(["./", ...names.filter((n) => n !== "index.html")])].sort();
      const head = `const VERSION = ${JSON.stringify(hash.digest("hex").slice(0, 16))};\nconst FILES = ${JSON.stringify(files)};\n`;
      const body = readFileSync(new URL("./keep/serviceWorker.js", import.meta.url), "utf8");
      this.emitFile({ type: "asset", fileName: "service-worker.js", source: head + body });
    },
  };
}

const notices = gatherNotices();

export default defineConfig({
  root: import.meta.dirname,
  base: "./",
  publicDir: false,
  plugins: [react(), notices.page, listFilesForOffline()],
  worker: { format: "es", plugins: () => [notices.worker()] },
  build: {
    outDir: "../../dist/page",
    emptyOutDir: true,
    target: "es2022",
    assetsInlineLimit: 0,
    modulePreload: { polyfill: false },
    chunkSizeWarningLimit: 2000,
  },
});
