import type { ArrivalReport } from "../arrival-schema";

/** The verdict of a whole report: its worst check. */
export function toVerdict(report: Pick<ArrivalReport, "checks">): "passed" | "warned" | "failed" {
  if (report.checks.some((check) => check.verdict === "fail")) return "failed";
  return report.checks.some((check) => check.verdict === "warn") ? "warned" : "passed";
}
