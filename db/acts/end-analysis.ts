/** How an analysis ends: with its result or with the reason, and what the series becomes by it. */
import { toFailure } from "../../lib/jobs/failure";
import { toListLimits, toReachedDb } from "../../lib/result/list-limits";
import type { Result } from "../../lib/result/result-schema";
import type { Trx } from "../client";
import type { LabScope } from "../in-lab";
import { failAnalysis } from "../queries/analyses";
import { recordEvent } from "../queries/audit";
import { notifyChange } from "../queries/changes";
import { findCurrentAnalysis } from "../queries/current-analysis";
import { saveResult } from "../queries/results";
import { getSeries, lockSeries, updateSeries } from "../queries/series";
import type { AnalysisWork } from "./analysis-work";
import { loadCapture } from "./capture";
import { noticeAnalysisFailed, noticeReadyForReview } from "./notices";
import { deriveState } from "./settle-series";

/**
 * Writes everything at once; does nothing where it was cancelled or saved meanwhile.
 *
 * @param sourceCommit of the program that computed; null where it is not known.
 */
export async function endAsDone(
  trx: Trx,
  by: LabScope,
  work: AnalysisWork,
  result: Result,
  sourceCommit: string | null,
): Promise<void> {
  const { analysisId, seriesId, version } = work;
  const series = await lockSeries(trx, by.labId, seriesId);
  const { runIdByFile } = work;
  if (!(await saveResult(trx, by.labId, analysisId, result, runIdByFile, sourceCommit))) return;
  const counts = await findCurrentAnalysis(trx, by.labId, seriesId, "done");
  // The list goes on showing what was signed off, until the series is reopened.
  if (counts?.id === analysisId && series.state !== "signed off") {
    const limits = toListLimits(result);
    await updateSeries(trx, by.labId, seriesId, {
      listSummary: { analysis_id: analysisId, version, limits },
      reachedDb: toReachedDb(limits),
    });
  }
  await finish(trx, by, work, "analysis.done", {});
  if (counts?.id !== analysisId) return;
  const { state } = await getSeries(trx, by.labId, seriesId);
  if (state === "in review") await noticeReadyForReview(trx, by, seriesId, version);
}

/** @param error of the engine or of ours; the row keeps it in the tester's words. */
export async function endAsFailed(
  trx: Trx,
  by: LabScope,
  work: AnalysisWork,
  error: unknown,
  at: Date,
): Promise<void> {
  await lockSeries(trx, by.labId, work.seriesId);
  const failure = toFailure(error, { ...work, at });
  if (!(await failAnalysis(trx, by.labId, work.analysisId, failure))) return;
  await finish(trx, by, work, "analysis.failed", {
    code: failure.code,
    message: failure.message,
    report: failure.report,
  });
  await noticeAnalysisFailed(trx, by, work.seriesId, work.version, failure);
}

async function finish(
  trx: Trx,
  by: LabScope,
  { analysisId, seriesId, version }: AnalysisWork,
  act: string,
  details: Record<string, unknown>,
): Promise<void> {
  await recordEvent(trx, by, {
    act,
    subjectType: "analysis",
    subjectId: analysisId,
    seriesId,
    details: { version, ...details },
  });
  await deriveState(trx, by, await loadCapture(trx, by.labId, seriesId));
  await notifyChange(trx, { labId: by.labId, seriesId, analysisId });
}
