import path from "node:path";
import { defineConfig } from "vitest/config";

const alias = { "@": path.resolve(import.meta.dirname) };

/** Three projects: `numerics` needs nothing, `database` a real PostgreSQL, `browser` the built application and Chromium. */
export default defineConfig({
  resolve: { alias },
  test: {
    projects: [
      { resolve: { alias }, test: { name: "numerics", include: ["tests/numerics/**/*.test.ts", "tests/scripts/**/*.test.ts", "tests/*.test.ts"], setupFiles: "tests/setup/fast-check.ts" } },
      {
        resolve: { alias },
        test: {
          name: "database",
          include: ["tests/database/**/*.test.ts", "tests/jobs/**/*.test.ts"],
          globalSetup: "tests/setup/postgres.ts",
          setupFiles: ["tests/setup/fast-check.ts", "tests/setup/database.ts"],
          testTimeout: 30_000,
          hookTimeout: 60_000,
          maxWorkers: 2,
        },
      },
      {
        resolve: { alias },
        test: {
          name: "browser",
          include: ["tests/browser/**/*.test.ts"],
          globalSetup: "tests/setup/laboratory.ts",
          setupFiles: "tests/setup/browser.ts",
          testTimeout: 180_000,
          hookTimeout: 180_000,
          maxWorkers: 1,
          fileParallelism: false,
        },
      },
    ],
  },
});
