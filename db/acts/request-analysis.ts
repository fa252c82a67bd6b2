/** Asking for an analysis of the recordings that are in. */
import type { FollowUp } from "../../lib/jobs/follow-up";
import { ENGINE_VERSION } from "../../lib/analysis/engine-version";
import { digestInputs } from "../../lib/series/inputs-digest";
import { toSeriesJson, type SeriesFiles } from "../../lib/series/to-series-json";
import type { Trx } from "../client";
import type { LabScope } from "../in-lab";
import {
  cancelAnalysis,
  createAnalysis,
  findAnalysisByInputs,
  requeueAnalysis,
} from "../queries/analyses";
import { recordEvent } from "../queries/audit";
import { listOpenAnalyses, renewRequest } from "../queries/current-analysis";
import { toSeriesSource, type Capture } from "./capture";

/**
 * What an analysis of the recordings that are in would be given.
 *
 * @throws AnalysisError "series.too-few-runs", "calibration.missing"
 */
export function toAnalysisInputs(capture: Capture): SeriesFiles & { inputsDigest: string } {
  const inputs = toSeriesJson(toSeriesSource(capture));
  return { ...inputs, inputsDigest: digestInputs(inputs) };
}

/**
 * Finds or makes the version of these inputs, settings and engine. The caller holds the series.
 * Analyses of other inputs that are under way are no longer wanted and end as cancelled.
 *
 * @returns the analysis, and what the workers have to do.
 * @throws AnalysisError "series.too-few-runs", "calibration.missing"
 */
export async function requestAnalysis(
  trx: Trx,
  by: LabScope,
  capture: Capture,
): Promise<{ analysisId: string; followUp: FollowUp }> {
  const seriesId = capture.series.id;
  const { series, files, inputsDigest } = toAnalysisInputs(capture);
  const existing = await findAnalysisByInputs(trx, by.labId, {
    seriesId,
    inputsDigest,
    engineVersion: ENGINE_VERSION,
  });
  const again = existing?.state === "failed" || existing?.state === "cancelled";
  let analysisId: string;
  if (existing === null) {
    analysisId = await createAnalysis(trx, by.labId, {
      seriesId,
      inputs: { series, files },
      inputsDigest,
      settings: series.settings,
      engineVersion: ENGINE_VERSION,
      requestedBy: by.accountId,
    });
  } else {
    analysisId = existing.id;
    if (again) await requeueAnalysis(trx, by.labId, analysisId, by.accountId);
    else await renewRequest(trx, by.labId, analysisId);
  }
  for (const id of await listOpenAnalyses(trx, by.labId, seriesId, analysisId)) {
    await cancelAnalysis(trx, by.labId, id);
    await recordEvent(trx, by, {
      act: "analysis.cancelled",
      subjectType: "analysis",
      subjectId: id,
      seriesId,
    });
  }
  const starts = existing === null || again;
  if (starts) {
    await recordEvent(trx, by, {
      act: "analysis.requested",
      subjectType: "analysis",
      subjectId: analysisId,
      seriesId,
      details: { recordings: files.length },
    });
  }
  return {
    analysisId,
    followUp: { labId: by.labId, runIds: [], analysisIds: starts ? [analysisId] : [] },
  };
}
