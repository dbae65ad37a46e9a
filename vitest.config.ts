import { defineConfig } from "vitest/config";

export default defineConfig({
  resolve: { tsconfigPaths: true },
  test: {
    // Two cores, and every worker of the integration project has a database of its own.
    maxWorkers: 2,
    projects: [
      {
        extends: true,
        test: {
          name: "unit",
          environment: "node",
          include: ["{app,db,scripts,storage-fake}/**/*.test.{ts,tsx}"],
        },
      },
      {
        extends: true,
        test: {
          name: "integration",
          environment: "node",
          include: ["tests/integration/**/*.test.{ts,tsx}"],
          globalSetup: ["tests/support/integration-setup.ts"],
          setupFiles: ["tests/support/integration-env.ts"],
          testTimeout: 60_000,
          hookTimeout: 60_000,
        },
      },
      {
        extends: true,
        test: {
          name: "long",
          environment: "node",
          include: ["tests/long/**/*.test.{ts,tsx}"],
          globalSetup: ["tests/support/integration-setup.ts"],
          setupFiles: ["tests/support/integration-env.ts"],
          testTimeout: 600_000,
          hookTimeout: 600_000,
          fileParallelism: false,
        },
      },
    ],
  },
});
