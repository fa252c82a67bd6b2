/** Signing off one analysis version, one criterion and all decisions; and taking that back. */
import { AppError } from "../../lib/errors/app-error";
import { labSettingsSchema } from "../../lib/labs/settings-schema";
import { sayCriterion } from "../../lib/result/criteria";
import { toListLimits, toReachedDb } from "../../lib/result/list-limits";
import { toResultText } from "../../lib/result/result-text";
import { digestDecisions, digestText, toSignedDecisions } from "../../lib/review/digest-decisions";
import type { Decision, SignOff } from "../../lib/review/review-schema";
import { findSignOffRefusal, isJudged, type SignOffFacts } from "../../lib/review/sign-off-rules";
import type { Criterion } from "../../lib/series/series-schema";
import type { Trx } from "../client";
import type { LabScope } from "../in-lab";
import { getAnalysis, type AnalysisRow } from "../queries/analyses";
import { recordEvent } from "../queries/audit";
import { notifyChange } from "../queries/changes";
import { findCurrentAnalysis } from "../queries/current-analysis";
import { listDecisions } from "../queries/decisions";
import { getLab } from "../queries/labs";
import { getResult } from "../queries/results";
import { lockSeries, updateSeries, type SeriesRow } from "../queries/series";
import {
  addSignOff,
  countUploads,
  findStandingSignOff,
  listSignOffs,
  reopenSignOff,
} from "../queries/sign-offs";
import { loadCapture } from "./capture";
import { noticeReopened, noticeSignedOff } from "./notices";
import { deriveState } from "./settle-series";

type By = LabScope & { accountId: string };

export interface ReviewFacts {
  signOff: SignOffFacts;
  decisions: Decision[];
  /** Digest of the decisions as they stand; null while a band is open. */
  decisionsDigest: string | null;
  /** Runs of this version by account. */
  uploads: ReadonlyMap<string, number>;
}

/** Everything that a sign-off looks at. @param bandsHz of the analysis; empty while it is not done. */
export async function loadReviewFacts(
  trx: Trx,
  by: By,
  series: Pick<SeriesRow, "id" | "archived_at">,
  analysis: AnalysisRow,
  { mayDecide, bandsHz }: { mayDecide: boolean; bandsHz: readonly number[] },
): Promise<ReviewFacts> {
  const { labId } = by;
  const decisions = await listDecisions(trx, labId, analysis.id);
  const signed = toSignedDecisions(decisions, bandsHz);
  const settings = labSettingsSchema.parse((await getLab(trx, labId)).settings);
  const uploads = await countUploads(
    trx,
    labId,
    analysis.inputs.files.flatMap((file) => (file.run_id === null ? [] : [file.run_id])),
  );
  const current = await findCurrentAnalysis(trx, labId, series.id, "done");
  const latest = await findCurrentAnalysis(trx, labId, series.id);
  const standing = await findStandingSignOff(trx, labId, series.id);
  return {
    signOff: {
      mayDecide,
      archived: series.archived_at !== null,
      signedVersion: standing?.analysis_version ?? null,
      version: analysis.version,
      analysisDone: analysis.state === "done",
      currentVersion: current?.version ?? null,
      underWay: latest?.state === "queued" || latest?.state === "running",
      bandsTotal: bandsHz.length,
      bandsDecided: decisions.filter((decision) => decision.cause !== null).length,
      twoPersonRule: settings.two_person_rule,
      uploadedByCaller: uploads.get(by.accountId) ?? 0,
    },
    decisions,
    decisionsDigest: signed === null ? null : digestDecisions(signed),
    uploads,
  };
}

/**
 * @param wanted.decisionsDigest of the decisions that the caller saw.
 * @throws AppError "not-found", "request.invalid", "conflict.changed", "conflict.state",
 *   "auth.forbidden" under the two-person rule
 */
export async function signOffAnalysis(
  trx: Trx,
  by: By,
  analysisId: string,
  wanted: { criterion: Criterion; decisionsDigest: string },
): Promise<SignOff> {
  const { labId, accountId } = by;
  const analysis = await getAnalysis(trx, labId, analysisId);
  const series = await lockSeries(trx, labId, analysis.series_id);
  const result = analysis.state === "done" ? await getResult(trx, labId, analysisId) : null;
  const bandsHz = result?.bands.map((band) => band.nominal_Hz) ?? [];
  const facts = await loadReviewFacts(trx, by, series, analysis, { mayDecide: true, bandsHz });
  const refusal = findSignOffRefusal(facts.signOff);
  if (refusal !== null) throw new AppError(refusal.code, refusal.words);
  const decisions = toSignedDecisions(facts.decisions, bandsHz);
  if (result === null || decisions === null) {
    throw new AppError("conflict.state", "Bands are open, so there is nothing to sign yet.");
  }
  if (!isJudged(wanted.criterion, result.settings.criteria)) {
    throw new AppError(
      "request.invalid",
      `This analysis did not judge by ${sayCriterion(wanted.criterion)}.`,
      { details: { fields: [{ path: "criterion", message: "is none of this analysis" }] } },
    );
  }
  if (facts.decisionsDigest !== wanted.decisionsDigest) {
    throw new AppError(
      "conflict.changed",
      "A decision was changed while you were looking. Read the decisions again, then sign.",
      { details: { decisions_digest: facts.decisionsDigest } },
    );
  }
  const onePerson = facts.signOff.uploadedByCaller > 0;
  const id = await addSignOff(trx, labId, accountId, {
    seriesId: series.id,
    analysisId,
    criterion: wanted.criterion,
    decisions,
    decisionsDigest: wanted.decisionsDigest,
    resultDigest: digestText(toResultText(result)),
    onePerson,
  });
  await recordEvent(trx, by, {
    act: "series.signed-off",
    subjectType: "sign-off",
    subjectId: id,
    seriesId: series.id,
    details: {
      version: analysis.version,
      criterion: sayCriterion(wanted.criterion),
      decisions_digest: wanted.decisionsDigest,
      one_person: onePerson,
    },
  });
  await noticeSignedOff(trx, by, series.id, {
    version: analysis.version,
    criterion: sayCriterion(wanted.criterion),
  });
  await deriveState(trx, by, await loadCapture(trx, labId, series.id));
  await notifyChange(trx, { labId, seriesId: series.id, analysisId });
  const made = (await listSignOffs(trx, labId, series.id)).find((one) => one.id === id);
  if (made === undefined) throw new AppError("internal", "A sign-off was not written.");
  return made;
}

/** @throws AppError "not-found"; "conflict.state" where nothing is signed off */
export async function reopenSeries(
  trx: Trx,
  by: By,
  seriesId: string,
  reason: string,
): Promise<void> {
  const { labId } = by;
  const series = await lockSeries(trx, labId, seriesId);
  if (series.archived_at !== null) {
    throw new AppError("conflict.state", "This series is archived. Restore it first.");
  }
  const signOff = await findStandingSignOff(trx, labId, seriesId);
  if (signOff === null) {
    throw new AppError("conflict.state", "This series is not signed off.");
  }
  const id = await reopenSignOff(trx, labId, by.accountId, seriesId, reason);
  // While it was signed, the list went on showing the signed version.
  const current = await findCurrentAnalysis(trx, labId, seriesId, "done");
  if (current !== null && current.id !== signOff.analysis_id) {
    const limits = toListLimits(await getResult(trx, labId, current.id));
    await updateSeries(trx, labId, seriesId, {
      listSummary: { analysis_id: current.id, version: current.version, limits },
      reachedDb: toReachedDb(limits),
    });
  }
  await recordEvent(trx, by, {
    act: "series.reopened",
    subjectType: "sign-off",
    subjectId: id ?? signOff.id,
    seriesId,
    details: { version: signOff.analysis_version, reason },
  });
  await noticeReopened(trx, by, seriesId, { version: signOff.analysis_version, reason });
  await deriveState(trx, by, await loadCapture(trx, labId, seriesId));
  await notifyChange(trx, { labId, seriesId });
}
