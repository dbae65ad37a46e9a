import { defineConfig } from "@playwright/test";
import { shopUrl } from "./tests/support/instance";

const report = process.env.E2E_REPORT;

/** `npm test` starts a whole instance and names its data folder in E2E_DATA_DIR; by hand, that of a running one. */
export default defineConfig({
  testDir: "tests/e2e",
  forbidOnly: true,
  retries: 0,
  // The tests share one shop, its demo data and two cores with it.
  workers: 1,
  timeout: 90_000,
  expect: { timeout: 20_000 },
  reporter: report ? [["list"], ["json", { outputFile: report }]] : [["list"]],
  outputDir: process.env.E2E_OUTPUT || "test-results",
  use: {
    baseURL: shopUrl,
    actionTimeout: 20_000,
    browserName: "chromium",
    locale: "en-GB",
    timezoneId: "Europe/London",
    screenshot: "only-on-failure",
    // A trace reads the pages' pictures by itself, which their policy forbids: an error that is not theirs.
    trace: "off",
    launchOptions: {
      executablePath: "/usr/bin/chromium",
      args: [
        "--no-sandbox",
        "--disable-gpu",
        "--disable-quic",
        "--no-first-run",
        "--disable-background-networking",
        "--disable-component-update",
        "--disable-sync",
      ],
    },
  },
  projects: [
    { name: "requests", testMatch: "api/**/*.spec.ts" },
    {
      name: "desk",
      testIgnore: ["api/**", "no-script.spec.ts"],
      use: { viewport: { width: 1440, height: 900 } },
    },
    {
      name: "phone",
      testMatch: "pages.spec.ts",
      use: { viewport: { width: 390, height: 844 }, hasTouch: true, isMobile: true },
    },
  ],
});
