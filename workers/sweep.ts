/**
 * What nobody else comes back to: checks and analyses whose job was lost, uploads whose day is over,
 * bytes that no row names. The rows are the truth; this brings the rest in line with them.
 */
import { readdir, rm, stat } from "node:fs/promises";
import { join } from "node:path";
import type { Logger } from "pino";
import { inLab } from "../db/in-lab";
import type { Db } from "../db/client";
import { removeDueRecordings } from "../db/acts/remove-recordings";
import { findForgottenAnalyses } from "../db/queries/analyses";
import { findUnheldDigests } from "../db/queries/recordings";
import { findLabsWithRetention } from "../db/queries/retention";
import { findForgottenChecks } from "../db/queries/runs";
import { deleteUpload, findExpiredUploads } from "../db/queries/uploads";
import { UPLOAD_ID, UPLOAD_LIFETIME_MS } from "../lib/api/uploads";
import { enqueueAnalyseSeries } from "../lib/jobs/analyse-series";
import { enqueueCheckArrival } from "../lib/jobs/check-arrival";
import type { Queues } from "../lib/jobs/queues";
import type { RecordingStore } from "../lib/storage/recording-store";
import { workerScope } from "./tools";

export interface SweepTools {
  db: Db;
  queues: Queues;
  store: RecordingStore;
  stagingFolder: string;
  log: Logger;
}

const CHECK_FORGOTTEN_S = 15;
const ANALYSIS_FORGOTTEN_S = 15;
/** Bytes are put before their row is written: young ones are left alone. */
const ORPHAN_AGE_MS = 3600 * 1000;
const BATCH = 500;

/** Asking again for a job that waits changes nothing, so this may run as often as it likes. */
export async function sweepJobs({ db, queues, log }: SweepTools): Promise<number> {
  const checks = await findForgottenChecks(db, CHECK_FORGOTTEN_S);
  for (const { labId, runId } of checks) await enqueueCheckArrival(queues, { labId, runId });
  const analyses = await findForgottenAnalyses(db, ANALYSIS_FORGOTTEN_S);
  for (const { labId, analysisId } of analyses) {
    await enqueueAnalyseSeries(queues, { labId, analysisId });
  }
  const found = checks.length + analyses.length;
  if (found > 0) {
    log.info({ checks: checks.length, analyses: analyses.length }, "took up forgotten work");
  }
  return found;
}

/** @returns how many uploads went. */
export async function sweepUploads({ db, stagingFolder, log }: SweepTools): Promise<number> {
  const expired = await findExpiredUploads(db);
  for (const { labId, uploadId } of expired) {
    if (UPLOAD_ID.test(uploadId)) {
      await rm(join(stagingFolder, uploadId), { force: true });
      await rm(join(stagingFolder, `${uploadId}.json`), { force: true });
    }
    await inLab(db, workerScope(labId), (trx) => deleteUpload(trx, labId, uploadId));
  }
  if (expired.length > 0) log.info({ uploads: expired.length }, "removed expired uploads");
  return expired.length;
}

/** What the labs' retention has become due for; the next sweep of files takes the bytes. @returns how many recordings. */
export async function sweepRetention(
  { db, log }: Pick<SweepTools, "db" | "log">,
  now: Date,
): Promise<number> {
  let removed = 0;
  for (const labId of await findLabsWithRetention(db)) {
    const scope = workerScope(labId);
    const removals = await inLab(db, scope, (trx) => removeDueRecordings(trx, scope, now));
    removed += removals.reduce((sum, one) => sum + one.recordings, 0);
  }
  if (removed > 0) log.info({ recordings: removed }, "removed recordings by retention");
  return removed;
}

/** @returns how many files went. */
export async function sweepFiles(
  { db, store, stagingFolder, log }: Omit<SweepTools, "queues">,
  now: Date,
): Promise<number> {
  let removed = 0;
  const removeUnheld = async (digests: string[]): Promise<void> => {
    for (const digest of await findUnheldDigests(db, digests)) {
      await store.remove(digest);
      removed += 1;
    }
  };
  let batch: string[] = [];
  for await (const digest of store.listOlderThan(new Date(now.getTime() - ORPHAN_AGE_MS))) {
    batch.push(digest);
    if (batch.length < BATCH) continue;
    await removeUnheld(batch);
    batch = [];
  }
  if (batch.length > 0) await removeUnheld(batch);
  removed += await removeOldStaged(stagingFolder, new Date(now.getTime() - 2 * UPLOAD_LIFETIME_MS));
  if (removed > 0) log.info({ files: removed }, "removed files that nothing names");
  return removed;
}

/** Staged files of requests that were cut down before they had a row, or after it went. */
async function removeOldStaged(folder: string, before: Date): Promise<number> {
  let removed = 0;
  for (const name of await readdir(folder).catch(() => [])) {
    const path = join(folder, name);
    const found = await stat(path).catch(() => null);
    if (found === null || !found.isFile() || found.mtime >= before) continue;
    await rm(path, { force: true });
    removed += 1;
  }
  return removed;
}
