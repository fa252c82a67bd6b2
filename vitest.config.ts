import { defineConfig } from "vitest/config";

// The three projects run one after the other: plain functions, published values, rooms together.
export default defineConfig({
  resolve: { tsconfigPaths: true },
  test: {
    environment: "node",
    projects: [
      {
        extends: true,
        test: {
          name: "unit",
          include: ["{lib,components,app,workers,db,scripts}/**/*.test.{ts,tsx}"],
          // Nothing here waits; a slow machine is no failure.
          testTimeout: 60_000,
          sequence: { groupOrder: 0 },
        },
      },
      {
        extends: true,
        test: {
          name: "checks",
          include: ["tests/checks/**/*.test.ts"],
          testTimeout: 180_000,
          hookTimeout: 180_000,
          // Two cores would otherwise get one worker.
          maxWorkers: 2,
          sequence: { groupOrder: 1 },
        },
      },
      {
        extends: true,
        test: {
          name: "rooms",
          include: ["tests/{db,api,workers,setup}/**/*.test.ts"],
          globalSetup: ["tests/support/global-setup.ts"],
          testTimeout: 120_000,
          // The first suite that needs the product builds it, unless `npm test` did before.
          hookTimeout: 300_000,
          maxWorkers: 2,
          sequence: { groupOrder: 2 },
        },
      },
      {
        extends: true,
        test: {
          name: "browser",
          include: ["tests/e2e/**/*.test.ts"],
          globalSetup: ["tests/support/global-setup.ts"],
          testTimeout: 120_000,
          // The first suite that needs the product builds it, unless `npm test` did before.
          hookTimeout: 300_000,
          // One browser at a time: what a person sees must not wait for another suite.
          maxWorkers: 1,
          sequence: { groupOrder: 3 },
        },
      },
    ],
  },
});
