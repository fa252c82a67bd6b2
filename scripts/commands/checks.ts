/**
 * `npm run checks`: computes every check, prints value, expected, tolerance and source, and writes
 * what the page "How we measure" shows. Exit 1 where one does not agree.
 */
import { readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { runChecks, SUBJECTS, type CheckOutcome, type Subject } from "../../lib/checks/check";
import { CHECKS } from "../../lib/checks/checks";
import { toReport, toReportRow, toReportText } from "../../lib/checks/report";
import { cloneDir } from "../setup/bootstrap.mjs";

const REPORT = "lib/checks/report.json";

export async function main(): Promise<number> {
  const outcomes = await runChecks(CHECKS);
  for (const line of toLines(outcomes)) console.log(line);
  const path = join(cloneDir, REPORT);
  const text = toReportText(toReport(outcomes));
  const stale = readFileSync(path, "utf8") !== text;
  if (stale) writeFileSync(path, text);
  const failed = outcomes.filter((o) => !o.agrees);
  console.log(`\n${outcomes.length - failed.length} of ${outcomes.length} agree.`);
  console.log(`${REPORT} ${stale ? "was written anew" : "is as it should be"}.`);
  for (const { check } of failed) console.log(`Does not agree: ${check.id}`);
  return failed.length === 0 ? 0 : 1;
}

const HEAD = ["", "check", "value", "expected", "tolerance", "source"];
const RIGHT = new Set([2, 3, 4]);

function toLines(outcomes: readonly CheckOutcome[]): string[] {
  const rows = outcomes.map((outcome) => {
    const { what, value, expected, tolerance, agrees, source } = toReportRow(outcome);
    return {
      subject: outcome.check.subject,
      cells: [agrees ? "ok" : "NO", what, value, expected, tolerance, source],
    };
  });
  const widths = HEAD.map((head, i) =>
    Math.max(head.length, ...rows.map(({ cells }) => cells[i]?.length ?? 0)),
  );
  const toLine = (cells: readonly string[]): string =>
    cells
      .map((cell, i) =>
        RIGHT.has(i) ? cell.padStart(widths[i] ?? 0) : cell.padEnd(widths[i] ?? 0),
      )
      .join("  ")
      .trimEnd();
  return (Object.keys(SUBJECTS) as Subject[]).flatMap((subject) => [
    "",
    SUBJECTS[subject],
    toLine(HEAD),
    ...rows.filter((row) => row.subject === subject).map(({ cells }) => toLine(cells)),
  ]);
}
