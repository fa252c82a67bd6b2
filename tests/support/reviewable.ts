/** A series with a finished analysis, written by the product's own queries: ready for review. */
import { randomBytes } from "node:crypto";
import { loadCapture } from "../../db/acts/capture";
import { deriveState } from "../../db/acts/settle-series";
import { inLab, type LabScope } from "../../db/in-lab";
import { claimAnalysis, createAnalysis } from "../../db/queries/analyses";
import { createLoudspeaker } from "../../db/queries/loudspeakers";
import { keepRecording } from "../../db/queries/recordings";
import { saveResult } from "../../db/queries/results";
import { createRun, updateRun } from "../../db/queries/runs";
import { createSeries, updateSeries } from "../../db/queries/series";
import { toFileStem, toPlannedRuns } from "../../lib/series/planned-runs";
import { toListLimits, toReachedDb } from "../../lib/result/list-limits";
import type { Result } from "../../lib/result/result-schema";
import { planSchema } from "../../lib/series/plan-schema";
import type { LabBench } from "./lab-bench";
import { makeSampleResult } from "./sample-result";

type By = LabScope & { accountId: string };

export interface ReviewableSeries {
  seriesId: string;
  analysisId: string;
  runIds: string[];
  result: Result;
}

/**
 * @param uploader brings every run of the plan; levels as in the sample result.
 * @param own another name than Osier 8A, another result than the sample's.
 */
export async function makeReviewableSeries(
  bench: Pick<LabBench, "app">,
  uploader: By,
  own: { model?: string; result?: Result } = {},
): Promise<ReviewableSeries> {
  const { labId, accountId } = uploader;
  return inLab(bench.app, uploader, async (trx) => {
    const model = own.model ?? "Osier 8A";
    const loudspeakerId = await createLoudspeaker(trx, labId, accountId, {
      maker: "Withy Lane",
      model,
      serial: "0417",
      kind: "active, two-way",
      largest_dimension_m: 0.4,
      tuning_hz: 52,
    });
    const plan = planSchema.parse({});
    const { id: seriesId } = await createSeries(trx, labId, accountId, { loudspeakerId, plan });
    const runIds: string[] = [];
    for (const place of toPlannedRuns(plan, toFileStem(model))) {
      const digest = randomBytes(32).toString("hex");
      await keepRecording(trx, labId, { digest, bytes: 100, media: "audio/wav" });
      const runId = await createRun(trx, labId, {
        seriesId,
        slot: place.slot,
        role: place.role,
        levelDb: place.levelDb,
        variant: null,
        fileName: place.fileName,
        digest,
        channel: 1,
        uploadedBy: accountId,
        uploadedByToken: null,
      });
      await updateRun(trx, labId, runId, { state: "passed" });
      runIds.push(runId);
    }
    const result = own.result ?? makeSampleResult();
    const analysisId = await addAnalysis(trx, labId, { seriesId, runIds, result });
    await deriveState(trx, uploader, await loadCapture(trx, labId, seriesId));
    return { seriesId, analysisId, runIds, result };
  });
}

/** Another finished version of a series. */
export function addVersion(
  bench: Pick<LabBench, "app">,
  by: By,
  series: Pick<ReviewableSeries, "seriesId" | "runIds">,
  result: Result,
): Promise<string> {
  return inLab(bench.app, by, async (trx) => {
    const id = await addAnalysis(trx, by.labId, { ...series, result });
    await deriveState(trx, by, await loadCapture(trx, by.labId, series.seriesId));
    return id;
  });
}

async function addAnalysis(
  trx: Parameters<Parameters<typeof inLab>[2]>[0],
  labId: string,
  { seriesId, runIds, result }: Pick<ReviewableSeries, "seriesId" | "runIds" | "result">,
): Promise<string> {
  const runs = await trx
    .selectFrom("runs")
    .select(["id as run_id", "file_name as file", "digest"])
    .where("id", "in", runIds)
    .orderBy("file_name")
    .execute();
  const analysisId = await createAnalysis(trx, labId, {
    seriesId,
    inputs: { series: {}, files: runs },
    inputsDigest: randomBytes(32).toString("hex"),
    settings: result.settings,
    engineVersion: result.engine.version,
    requestedBy: null,
  });
  await claimAnalysis(trx, labId, analysisId, 0);
  await saveResult(trx, labId, analysisId, result, new Map());
  const limits = toListLimits(result);
  await updateSeries(trx, labId, seriesId, {
    listSummary: { analysis_id: analysisId, version: 1, limits },
    reachedDb: toReachedDb(limits),
  });
  return analysisId;
}
