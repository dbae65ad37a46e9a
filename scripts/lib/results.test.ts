import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { afterAll, expect, test } from "vitest";
import { countPlaywright, countVitest, suiteResult } from "./results.mjs";

const directory = mkdtempSync(path.join(tmpdir(), "numberleaf-results-"));
afterAll(() => rmSync(directory, { recursive: true }));

function vitestResult(report: object, code = 0) {
  const file = path.join(directory, "report.json");
  writeFileSync(file, JSON.stringify({ numPendingTests: 0, numTodoTests: 0, testResults: [], ...report }));
  return suiteResult(file, code, countVitest);
}

test("tests are counted, and a skipped one has not passed", () => {
  expect(vitestResult({ numPassedTests: 7, numFailedTests: 2, numPendingTests: 1 }, 1)).toEqual({
    passed: 7,
    failed: 3,
    notes: ["1 skipped"],
  });
});

test("a file that could not run counts as a failure beside the tests of the others", () => {
  const testResults = [
    { name: "a.test.ts", status: "failed", message: "no such module\nstack", assertionResults: [] },
  ];
  expect(vitestResult({ numPassedTests: 4, numFailedTests: 0, testResults }, 1)).toEqual({
    passed: 4,
    failed: 1,
    notes: ["a.test.ts could not run: no such module"],
  });
});

test("no report, no test, and a failing runner are failures", () => {
  expect(suiteResult(path.join(directory, "none.json"), 139, countVitest)).toMatchObject({
    passed: 0,
    failed: 1,
  });
  expect(vitestResult({ numPassedTests: 0, numFailedTests: 0 })).toMatchObject({ passed: 0, failed: 1 });
  expect(vitestResult({ numPassedTests: 3, numFailedTests: 0 }, 1)).toMatchObject({ passed: 3, failed: 1 });
});

test("in the browser's report, flaky and skipped tests have not passed, and errors outside tests count", () => {
  const report = {
    stats: { expected: 9, unexpected: 1, flaky: 1, skipped: 1 },
    errors: [{ message: "no browser" }],
  };
  expect(countPlaywright(report)).toEqual({
    passed: 9,
    failed: 4,
    notes: ["no browser", "1 skipped", "1 flaky"],
  });
});
