import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, describe, expect, it } from "vitest";
import { readCounts } from "./test-counts";

const folder = mkdtempSync(join(tmpdir(), "tidemark-counts-"));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

interface Given {
  passed?: number;
  failed?: number;
  pending?: number;
  todo?: number;
  files?: { status: string; assertionResults: { status: string }[] }[];
}

function report({ passed = 0, failed = 0, pending = 0, todo = 0, files = [] }: Given): string {
  const path = join(folder, "report.json");
  const json = {
    numPassedTests: passed,
    numFailedTests: failed,
    numPendingTests: pending,
    numTodoTests: todo,
    testResults: files,
  };
  writeFileSync(path, JSON.stringify(json));
  return path;
}

describe("readCounts", () => {
  it.each([
    ["all is well", { passed: 7 }, 0, { passed: 7, failed: 0 }],
    ["tests fail", { passed: 5, failed: 2 }, 1, { passed: 5, failed: 2 }],
    ["a test is skipped", { passed: 5, pending: 1 }, 0, { passed: 5, failed: 1 }],
    ["a test is still to do", { passed: 5, todo: 1 }, 0, { passed: 5, failed: 1 }],
    ["there is no test", {}, 0, { passed: 0, failed: 1 }],
    ["the run fails outside of tests", { passed: 5 }, 1, { passed: 5, failed: 1 }],
    ["the run is killed", { passed: 5 }, null, { passed: 5, failed: 1 }],
    [
      "a file cannot be loaded",
      { passed: 5, files: [{ status: "failed", assertionResults: [] }] },
      1,
      { passed: 5, failed: 1 },
    ],
    [
      "a failed test is not counted twice by its file",
      {
        passed: 5,
        failed: 1,
        files: [{ status: "failed", assertionResults: [{ status: "failed" }] }],
      },
      1,
      { passed: 5, failed: 1 },
    ],
  ])("%s", (_, given, code, expected) => {
    expect(readCounts(report(given), code)).toEqual(expected);
  });

  it("counts a run without a report as a failure", () => {
    expect(readCounts(join(folder, "missing.json"), 0)).toEqual({ passed: 0, failed: 1 });
  });
});
