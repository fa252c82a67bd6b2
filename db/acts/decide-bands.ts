/** Deciding bands: all or nothing, and nobody's decision is lost. */
import { AppError } from "../../lib/errors/app-error";
import { compareResults } from "../../lib/review/compare-analyses";
import {
  findConflicts,
  toNewDecisions,
  type NewDecision,
  type WantedDecision,
} from "../../lib/review/decide";
import type { BandComment, Decision } from "../../lib/review/review-schema";
import { defaultCriterion, listCriterionParts } from "../../lib/result/criteria";
import type { Trx } from "../client";
import type { LabScope } from "../in-lab";
import { getAnalysis, type AnalysisRow } from "../queries/analyses";
import { recordEvent } from "../queries/audit";
import { notifyChange } from "../queries/changes";
import { findCurrentAnalysis } from "../queries/current-analysis";
import { addComment, addDecisions, listComments, listDecisions } from "../queries/decisions";
import { getResult } from "../queries/results";
import { lockSeries, updateSeries } from "../queries/series";
import { isSignedOff, listSignOffs } from "../queries/sign-offs";

type By = LabScope & { accountId: string };

/**
 * @returns the decisions that others took meanwhile; then nothing but the attempt is written down.
 * @throws AppError "not-found", "conflict.state", "request.invalid", "run.reason-missing"
 */
export async function decideBands(
  trx: Trx,
  by: By,
  analysisId: string,
  wanted: readonly WantedDecision[],
): Promise<{ conflicts: Decision[] }> {
  const analysis = await lockForReview(trx, by, analysisId);
  const { bands } = await getResult(trx, by.labId, analysisId);
  const decisions = toNewDecisions(wanted, bands);
  const inForce = await listDecisions(trx, by.labId, analysisId);
  const conflicts = findConflicts(wanted, inForce);
  if (conflicts.length > 0) {
    await tell(trx, by, analysis, "decision.overtaken", toTold(decisions));
    return { conflicts };
  }
  const unseen = wanted.find(
    (one) =>
      one.seen_version > 0 && !inForce.some((decision) => decision.nominal_Hz === one.nominal_Hz),
  );
  if (unseen !== undefined) {
    throw new AppError(
      "request.invalid",
      `The ${unseen.nominal_Hz} Hz band has no decision yet, so version ${unseen.seen_version} cannot have been seen.`,
    );
  }
  await addDecisions(trx, by.labId, by.accountId, analysisId, decisions);
  await tell(trx, by, analysis, "decision.taken", toTold(decisions));
  return { conflicts: [] };
}

/**
 * Takes over decisions of an older analysis where they still fit and the band is open.
 *
 * @throws AppError "not-found", "conflict.state", "request.invalid"
 */
export async function keepDecisions(
  trx: Trx,
  by: By,
  analysisId: string,
  fromId: string,
): Promise<void> {
  const analysis = await lockForReview(trx, by, analysisId);
  const { from, changes } = await loadChanges(trx, by.labId, analysis, fromId);
  const inForce = await listDecisions(trx, by.labId, analysisId);
  const kept = changes.flatMap(({ nominal_Hz, decision, keeps_decision }): NewDecision[] => {
    const now = inForce.find((one) => one.nominal_Hz === nominal_Hz);
    if (!keeps_decision || decision === null || (now !== undefined && now.cause !== null)) {
      return [];
    }
    return [
      {
        nominalHz: nominal_Hz,
        version: (now?.version ?? 0) + 1,
        cause: decision.cause,
        computedCause: decision.computed_cause,
        reason: decision.reason,
      },
    ];
  });
  if (kept.length === 0) return;
  await addDecisions(trx, by.labId, by.accountId, analysisId, kept);
  await tell(trx, by, analysis, "decision.kept", {
    bands: kept.length,
    from_version: from.version,
  });
}

/** @throws AppError "not-found"; "request.invalid" where the two are not of one series or not done */
export async function loadChanges(trx: Trx, labId: string, analysis: AnalysisRow, fromId: string) {
  const from = await getAnalysis(trx, labId, fromId);
  if (from.series_id !== analysis.series_id) {
    throw new AppError("request.invalid", "The two analyses belong to different series.");
  }
  const unfinished = [from, analysis].find((one) => one.state !== "done");
  if (unfinished !== undefined) {
    throw new AppError(
      "request.invalid",
      `Version ${unfinished.version} is ${unfinished.state}; it has no result to compare.`,
    );
  }
  const signOffs = await listSignOffs(trx, labId, analysis.series_id);
  const before = await getResult(trx, labId, from.id);
  const after = await getResult(trx, labId, analysis.id);
  const criterion =
    signOffs.find((one) => one.analysis_id === from.id)?.criterion ??
    defaultCriterion(listCriterionParts(before.settings.criteria));
  const decisions = await listDecisions(trx, labId, from.id);
  return { from, changes: compareResults(before, after, criterion, decisions) };
}

/** A comment may be written at any time; it changes nothing that is signed. */
export async function writeComment(
  trx: Trx,
  by: By,
  comment: { analysisId: string; nominalHz: number | null; words: string },
): Promise<BandComment> {
  const analysis = await getAnalysis(trx, by.labId, comment.analysisId);
  if (comment.nominalHz !== null) {
    const { bands } = await getResult(trx, by.labId, analysis.id);
    if (!bands.some((band) => band.nominal_Hz === comment.nominalHz)) {
      throw new AppError("request.invalid", `The analysis has no band at ${comment.nominalHz} Hz.`);
    }
  }
  const id = await addComment(trx, by.labId, by.accountId, comment);
  await tell(trx, by, analysis, "comment.written", {
    nominal_Hz: comment.nominalHz,
    words: comment.words,
  });
  const written = (await listComments(trx, by.labId, analysis.id)).find((one) => one.id === id);
  if (written === undefined) throw new AppError("internal", "A comment was not written.");
  return written;
}

/** Holds the series of an analysis that can be decided on. */
async function lockForReview(trx: Trx, by: By, analysisId: string): Promise<AnalysisRow> {
  const analysis = await getAnalysis(trx, by.labId, analysisId);
  const series = await lockSeries(trx, by.labId, analysis.series_id);
  if (series.archived_at !== null) {
    throw new AppError("conflict.state", "This series is archived. Restore it first.");
  }
  if (await isSignedOff(trx, by.labId, series.id)) {
    throw new AppError(
      "conflict.state",
      "This series is signed off. Reopen it, with a reason, to decide again.",
    );
  }
  if (analysis.state !== "done") {
    throw new AppError(
      "conflict.state",
      `This analysis is ${analysis.state}; there is nothing to decide.`,
    );
  }
  const current = await findCurrentAnalysis(trx, by.labId, series.id, "done");
  if (current !== null && current.id !== analysisId) {
    throw new AppError(
      "conflict.state",
      `Version ${analysis.version} was replaced by version ${current.version}. Decide there.`,
      { details: { analysis_id: current.id } },
    );
  }
  return analysis;
}

const toTold = (decisions: readonly NewDecision[]) => ({
  decisions: decisions.map((one) => ({
    nominal_Hz: one.nominalHz,
    cause: one.cause,
    computed_cause: one.computedCause,
    reason: one.reason,
  })),
});

async function tell(
  trx: Trx,
  by: By,
  analysis: AnalysisRow,
  act: string,
  details: Record<string, unknown>,
): Promise<void> {
  const seriesId = analysis.series_id;
  await recordEvent(trx, by, {
    act,
    subjectType: "analysis",
    subjectId: analysis.id,
    seriesId,
    details: { version: analysis.version, ...details },
  });
  await updateSeries(trx, by.labId, seriesId, { changedBy: by.accountId });
  await notifyChange(trx, { labId: by.labId, seriesId, analysisId: analysis.id });
}
