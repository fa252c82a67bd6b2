/**
 * What follows from any change to the recordings of a series: files that waited move into places
 * that have opened, the analysis starts by itself when nothing is missing, the state is derived
 * anew, and whoever looks at the series is told.
 */
import { AnalysisError } from "../../lib/errors/app-error";
import type { FollowUp } from "../../lib/jobs/follow-up";
import { isLive } from "../../lib/runs/ladder";
import { toSeriesState } from "../../lib/series/states";
import type { Trx } from "../client";
import type { LabScope } from "../in-lab";
import { recordEvent } from "../queries/audit";
import { notifyChange } from "../queries/changes";
import { findCurrentAnalysis } from "../queries/current-analysis";
import { assignRun, updateRun } from "../queries/runs";
import { updateSeries } from "../queries/series";
import { isSignedOff } from "../queries/sign-offs";
import { countCaptured, loadCapture, type Capture } from "./capture";
import { requestAnalysis, toAnalysisInputs } from "./request-analysis";

/** The caller holds the series (lockSeries). @returns what the workers have to do after the commit. */
export async function settleSeries(trx: Trx, by: LabScope, seriesId: string): Promise<FollowUp> {
  const runIds = await placeWaiting(trx, by, await loadCapture(trx, by.labId, seriesId));
  const capture = await loadCapture(trx, by.labId, seriesId);
  const analysisIds = await startByItself(trx, by, capture);
  await deriveState(trx, by, capture);
  await notifyChange(trx, { labId: by.labId, seriesId });
  return { labId: by.labId, runIds, analysisIds };
}

/** State and failure from what is stored now. */
export async function deriveState(trx: Trx, by: LabScope, capture: Capture): Promise<void> {
  const { series } = capture;
  const current = await findCurrentAnalysis(trx, by.labId, series.id);
  await updateSeries(trx, by.labId, series.id, {
    state: toSeriesState({
      begun: capture.runs.length > 0 || capture.excuses.size > 0,
      captured: countCaptured(capture),
      planned: capture.planned.length,
      analysis: current === null || current.state === "cancelled" ? null : current.state,
      signedOff: await isSignedOff(trx, by.labId, series.id),
    }),
    failure: current?.state === "failed" ? current.error : null,
    ...(by.accountId === null ? {} : { changedBy: by.accountId }),
  });
}

async function placeWaiting(trx: Trx, by: LabScope, capture: Capture): Promise<string[]> {
  const moved: string[] = [];
  for (const run of capture.runs) {
    if (run.slot !== null || run.wanted_slot === null || !isLive(run.state)) continue;
    const place = capture.planned.find((p) => p.slot === run.wanted_slot);
    const slot = capture.ladder.find((l) => l.slot === run.wanted_slot);
    if (place === undefined || slot?.waits !== false) continue;
    await assignRun(trx, by.labId, { id: run.id, seriesId: capture.series.id }, place);
    await updateRun(trx, by.labId, run.id, {
      state: "checking",
      reason: null,
      reason_by: null,
      reason_at: null,
    });
    await recordEvent(
      trx,
      { ...by, accountId: null, tokenId: null },
      {
        act: "run.placed",
        subjectType: "run",
        subjectId: run.id,
        seriesId: capture.series.id,
        details: { file: run.file_name, slot: place.slot, label: place.label },
      },
    );
    moved.push(run.id);
  }
  return moved;
}

/** When the last planned run has passed or been excused, once for the same recordings. */
async function startByItself(trx: Trx, by: LabScope, capture: Capture): Promise<string[]> {
  const { series, planned } = capture;
  const checking = capture.runs.some((run) => run.state === "checking" && run.slot !== null);
  const complete = planned.length > 0 && countCaptured(capture) === planned.length;
  if (!complete || checking || series.state === "signed off" || series.archived_at !== null) {
    return [];
  }
  const current = await findCurrentAnalysis(trx, by.labId, series.id);
  try {
    const inputs = toAnalysisInputs(capture);
    // What was analysed, or failed, on the same recordings is tried again only when somebody asks.
    if (current?.inputs_digest === inputs.inputsDigest) return [];
    return (await requestAnalysis(trx, by, capture)).followUp.analysisIds;
  } catch (error) {
    // Too much was excused: the page says what is missing when somebody starts it by hand.
    if (error instanceof AnalysisError) return [];
    throw error;
  }
}
