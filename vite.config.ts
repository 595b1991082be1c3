import tailwindcss from "@tailwindcss/vite";
import react from "@vitejs/plugin-react";
import { defineConfig } from "vitest/config";

const CONSOLE = "tests/helpers/console.ts";

export default defineConfig({
  plugins: [react(), tailwindcss()],
  publicDir: "src/public",
  build: { outDir: "dist/client", emptyOutDir: true, target: "es2023", chunkSizeWarningLimit: 900 },
  worker: { format: "es" },
  test: {
    projects: [
      {
        extends: true,
        test: { name: "unit", include: ["tests/{shared,reference,architecture}/**/*.test.ts"], setupFiles: CONSOLE, testTimeout: 60_000 },
      },
      {
        extends: true,
        test: {
          name: "page",
          include: ["tests/src/**/*.test.{ts,tsx}"],
          environment: "jsdom",
          setupFiles: [CONSOLE, "tests/helpers/dom.ts"],
          testTimeout: 30_000,
        },
      },
      {
        extends: true,
        test: {
          name: "server",
          include: ["tests/{server,scripts}/**/*.test.ts"],
          globalSetup: "tests/helpers/cluster.ts",
          setupFiles: CONSOLE,
          testTimeout: 30_000,
          hookTimeout: 60_000,
        },
      },
      {
        extends: true,
        test: {
          name: "browser",
          include: ["tests/e2e/**/*.test.ts"],
          globalSetup: "tests/e2e/serve.ts",
          // The pages run at the same time as nothing else: their times are looked at, and the database is stopped under them.
          fileParallelism: false,
          testTimeout: 60_000,
          hookTimeout: 120_000,
        },
      },
    ],
  },
});
