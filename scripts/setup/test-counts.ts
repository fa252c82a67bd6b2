/** What a run of Vitest counted. */
import { z } from "zod";
import { readText } from "../../lib/config/secrets";

export interface TestCounts {
  passed: number;
  failed: number;
}

const reportSchema = z.object({
  numPassedTests: z.number(),
  numFailedTests: z.number(),
  numPendingTests: z.number(),
  numTodoTests: z.number(),
  testResults: z.array(
    z.object({ status: z.string(), assertionResults: z.array(z.object({ status: z.string() })) }),
  ),
});

/**
 * Counts from the JSON report. Whatever else went wrong counts as one failure more: a file that
 * could not be loaded, a test that was skipped, an error outside of any test, no test at all.
 *
 * @param path of the report
 * @param code exit code of the run; null where a signal ended it
 */
export function readCounts(path: string, code: number | null): TestCounts {
  const text = readText(path);
  if (text === null) return { passed: 0, failed: 1 };
  const report = reportSchema.parse(JSON.parse(text));
  const brokenFiles = report.testResults.filter(
    (file) =>
      file.status === "failed" && !file.assertionResults.some(({ status }) => status === "failed"),
  ).length;
  const skipped = report.numPendingTests + report.numTodoTests;
  const failed = report.numFailedTests + brokenFiles + skipped;
  const passed = report.numPassedTests;
  const hidden = failed === 0 && (code !== 0 || passed === 0) ? 1 : 0;
  return { passed, failed: failed + hidden };
}
