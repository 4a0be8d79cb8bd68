import { defineConfig } from "vitest/config";

/**
 * Three projects: `unit` needs nothing, `server` a PostgreSQL of its own per test file, `browser` Chromium and the
 * build besides. `npm test` runs all; `npx vitest run --config tests/vitest.config.ts <pattern>` some, and brings the
 * test cluster up by itself. How tests use the database: tests/harness/index.ts.
 */

/** Tests of the mail parts stand under server/ but ask nothing of a database. */
const mail = "tests/server/mail/**/*.test.ts";

export default defineConfig({
  resolve: { tsconfigPaths: true },
  test: {
    maxWorkers: 2,
    pool: "forks",
    projects: [
      {
        extends: true,
        test: {
          name: "unit",
          // Properties run hundreds of cases; on a busy machine five seconds are not many.
          testTimeout: 60_000,
          include: ["tests/**/*.test.{ts,tsx}"],
          exclude: ["tests/server/**", "tests/browser/**", "node_modules/**"],
        },
      },
      { extends: true, test: { name: "mail", include: [mail] } },
      {
        extends: true,
        // The server project runs as production does, where React has no development JSX.
        oxc: { jsx: { runtime: "automatic", development: false } },
        test: {
          name: "server",
          include: ["tests/server/**/*.test.ts"],
          exclude: [mail],
          globalSetup: ["tests/harness/cluster.ts"],
          setupFiles: ["tests/harness/setup.ts"],
          testTimeout: 60_000,
          hookTimeout: 300_000,
          // The built server is a module of its own and is not transformed again.
          server: { deps: { external: [/\/build\/server\//] } },
        },
      },
      {
        extends: true,
        test: {
          name: "browser",
          include: ["tests/browser/**/*.test.ts"],
          globalSetup: ["tests/harness/cluster.ts"],
          setupFiles: ["tests/harness/setup.ts"],
          testTimeout: 180_000,
          hookTimeout: 300_000,
        },
      },
    ],
  },
});
