import { defineConfig } from "vitest/config";

// fast: what `npm test` runs. window: real pages in Chromium, one file at a time.
// slow: Monte Carlo, fuzz and kill tests, run in full before an issue is closed.
const common = { environment: "node" as const, pool: "forks" as const };

// A machine-readable report for .ci/run, beside the one for people.
const report = process.env.VITEST_REPORT;
const reporters = report ? ["default", ["json", { outputFile: report }] as const] : ["default"];

export default defineConfig({
  test: {
    reporters: reporters as never,
    projects: [
      {
        test: {
          ...common,
          name: "fast",
          include: ["test/**/*.test.ts"],
          exclude: ["test/**/*.slow.test.ts", "test/window/**"],
          testTimeout: 90_000,
        },
      },
      {
        test: {
          ...common,
          name: "window",
          include: ["test/window/**/*.test.ts"],
          globalSetup: ["test/window/demo-book.ts"],
          fileParallelism: false,
          // A browser on a busy machine may miss a moment once; what fails twice is a defect.
          retry: 1,
          testTimeout: 120_000,
          hookTimeout: 120_000,
        },
      },
      {
        test: {
          ...common,
          name: "slow",
          include: ["test/**/*.slow.test.ts"],
          testTimeout: 3_600_000,
          hookTimeout: 600_000,
        },
      },
    ],
  },
});
