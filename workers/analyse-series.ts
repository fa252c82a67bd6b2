/** The job that computes an analysis: claim, compute beside, save or explain. */
import { randomInt } from "node:crypto";
import { AppError } from "../lib/errors/app-error";
import { analyseSeriesPayloadSchema, type AnalyseSeriesPayload } from "../lib/jobs/analyse-series";
import { mayRetry } from "../lib/jobs/failure";
import { advanceProgress, startProgress } from "../lib/jobs/progress";
import { inLab } from "../db/in-lab";
import { endAsDone, endAsFailed } from "../db/acts/end-analysis";
import { claimAnalysis, getAnalysis, releaseAnalysis, setProgress } from "../db/queries/analyses";
import { notifyChange } from "../db/queries/changes";
import { loadAnalysisWork, type AnalysisWork } from "../db/acts/analysis-work";
import { workerScope, type JobTools } from "./tools";

/** A worker that has been silent so long is gone; ours gives a sign of life every 2 s. */
const STALE_AFTER_S = 7;
const SIGN_OF_LIFE_MS = 2000;
const PROGRESS_EVERY_MS = 250;
/** An analysis that took its worker down so often is not tried again. */
const MOST_ATTEMPTS = 10;

export async function analyseSeriesJob(tools: JobTools, data: unknown): Promise<void> {
  const payload = analyseSeriesPayloadSchema.parse(data);
  const work = await claim(tools, payload);
  if (work === null) return;
  try {
    if (work.attempt > MOST_ATTEMPTS) {
      throw new AppError("analysis.argument", "The analysis brought its worker down each time.");
    }
    const result = await compute(tools, payload, work);
    await inLab(tools.db, workerScope(payload.labId), (trx) =>
      endAsDone(trx, workerScope(payload.labId), work, result, tools.sourceCommit),
    );
  } catch (error) {
    await handleFault(tools, payload, work, error);
  }
}

/** Called when no try is left, also where the queue gave up by itself. */
export async function giveUpAnalysis(
  tools: JobTools,
  data: unknown,
  error: unknown,
): Promise<void> {
  const { labId, analysisId } = analyseSeriesPayloadSchema.parse(data);
  const scope = workerScope(labId);
  await inLab(tools.db, scope, async (trx) => {
    const work = await loadAnalysisWork(trx, labId, analysisId);
    await endAsFailed(trx, scope, work, error, new Date());
  });
}

/**
 * @returns null where it has ended already.
 * @throws Error while another worker is at it: the queue asks again later.
 */
async function claim(
  tools: JobTools,
  { labId, analysisId }: AnalyseSeriesPayload,
): Promise<AnalysisWork | null> {
  return inLab(tools.db, workerScope(labId), async (trx) => {
    if (await claimAnalysis(trx, labId, analysisId, STALE_AFTER_S)) {
      const work = await loadAnalysisWork(trx, labId, analysisId);
      await notifyChange(trx, { labId, seriesId: work.seriesId, analysisId });
      return work;
    }
    const { state } = await getAnalysis(trx, labId, analysisId);
    if (state === "running") throw new Error("another worker is at this analysis");
    return null;
  });
}

async function compute(tools: JobTools, payload: AnalyseSeriesPayload, work: AnalysisWork) {
  const { labId, analysisId } = payload;
  const stop = new AbortController();
  let progress = startProgress(work.runs);
  let writing: Promise<void> = Promise.resolve();
  let writtenAt = 0;

  const write = (): Promise<void> => {
    writtenAt = Date.now();
    const written = progress;
    writing = writing
      .then(() =>
        inLab(tools.db, workerScope(labId), async (trx) => {
          const wanted = await setProgress(trx, labId, analysisId, written);
          if (!wanted) stop.abort();
          await notifyChange(trx, { labId, seriesId: work.seriesId, analysisId });
        }),
      )
      // A sign of life that is lost once is not the end; the next one follows.
      .catch((error: unknown) => tools.log.warn({ err: error }, "progress was not written"));
    return writing;
  };

  const paths: Record<string, string> = {};
  for (const { file, digest } of work.files) paths[file] = await tools.store.localPath(digest);
  await write();
  const beat = setInterval(() => void write(), SIGN_OF_LIFE_MS + randomInt(200));
  try {
    return await tools.child.run(
      { kind: "analyse", series: work.series, paths },
      {
        signal: stop.signal,
        onProgress: (event) => {
          progress = advanceProgress(progress, event);
          if (Date.now() - writtenAt >= PROGRESS_EVERY_MS) void write();
        },
      },
    );
  } finally {
    clearInterval(beat);
    await writing;
  }
}

async function handleFault(
  tools: JobTools,
  { labId, analysisId }: AnalyseSeriesPayload,
  work: AnalysisWork,
  error: unknown,
): Promise<void> {
  // Newer recordings replaced it while it ran: whoever asked for them ended it.
  if (error instanceof AppError && error.code === "analysis.cancelled") return;
  const scope = workerScope(labId);
  if (mayRetry(error)) {
    tools.log.error({ err: error, analysisId }, "an analysis is tried again");
    await inLab(tools.db, scope, (trx) => releaseAnalysis(trx, labId, analysisId));
    throw error;
  }
  tools.log.info({ code: error instanceof AppError ? error.code : null, analysisId }, "failed");
  await inLab(tools.db, scope, (trx) => endAsFailed(trx, scope, work, error, new Date()));
}
