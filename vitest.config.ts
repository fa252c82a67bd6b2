import { defineConfig } from "vitest/config";

export default defineConfig({
  resolve: { tsconfigPaths: true },
  test: {
    environment: "node",
    projects: [
      {
        extends: true,
        test: {
          name: "unit",
          include: [
            "lib/**/*.test.ts",
            "components/**/*.test.{ts,tsx}",
            "workers/**/*.test.ts",
            "db/**/*.test.ts",
            "scripts/**/*.test.ts",
          ],
        },
      },
      {
        extends: true,
        test: { name: "checks", include: ["tests/checks/**/*.test.ts"], testTimeout: 60_000 },
      },
      {
        extends: true,
        test: {
          name: "rooms",
          globalSetup: ["tests/support/global-setup.ts"],
          include: ["tests/{db,api,workers,e2e,setup}/**/*.test.ts"],
          testTimeout: 60_000,
          hookTimeout: 120_000,
          maxWorkers: 2,
        },
      },
    ],
  },
});
