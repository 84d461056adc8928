import { defineConfig } from "vite";

// One build: the command line and the bench as plain Node files. Packages stay in node_modules.
export default defineConfig({
  build: {
    ssr: true,
    target: "node20",
    outDir: "dist",
    emptyOutDir: false,
    sourcemap: true,
    minify: false,
    rollupOptions: {
      input: {
        seamstay: "src/cli/seamstay.ts",
        nestWorker: "src/cli/nestWorker.ts",
        bench: "test/bench/bench.ts",
        packWorker: "test/bench/packWorker.ts",
        "chunks/slideCase": "test/page/slideCase.ts",
        "chunks/firstViewCase": "test/page/firstViewCase.ts",
        "chunks/turnCase": "test/page/turnCase.ts",
        "chunks/roundsCase": "test/page/roundsCase.ts",
      },
      output: { entryFileNames: "[name].js", chunkFileNames: "chunks/[name].js" },
    },
  },
  test: {
    include: ["test/**/*.test.ts"],
    testTimeout: 300_000,
    hookTimeout: 300_000,
    // A wait of the browser tests that ran out is tried once more, and told in the report; a wrong result never is.
    retry: { count: 1, condition: /TimeoutError|Timeout \d+ms exceeded/ },
    reporters: ["default", ["json", { outputFile: "out/test-results.json" }]],
  },
} as Parameters<typeof defineConfig>[0]);
