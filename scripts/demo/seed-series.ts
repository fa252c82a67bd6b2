/** One demo series, by the steps of a tester: loudspeaker, plan, then recording after recording. */
import { randomBytes } from "node:crypto";
import { mkdirSync, renameSync, rmSync, statSync } from "node:fs";
import { join } from "node:path";
import { setTimeout as sleep } from "node:timers/promises";
import type { LabCaller } from "../../app/_server/caller";
import { createUpload } from "../../app/_server/uploads/create-upload";
import { finishUpload } from "../../app/_server/uploads/finish-upload";
import { toLoudspeakerFields } from "../../app/_server/views/loudspeaker-view";
import { actOnRun } from "../../db/acts/act-on-run";
import { startSeries } from "../../db/acts/plan-series";
import type { Db, Trx } from "../../db/client";
import { inLab } from "../../db/in-lab";
import { recordEvent } from "../../db/queries/audit";
import { createLoudspeaker, listLoudspeakers } from "../../db/queries/loudspeakers";
import { getRun, listRuns } from "../../db/queries/runs";
import { getSeries, listSeriesOfLoudspeaker } from "../../db/queries/series";
import { findUpload } from "../../db/queries/uploads";
import { enqueueFollowUp, type FollowUp } from "../../lib/jobs/follow-up";
import type { Queues } from "../../lib/jobs/queues";
import type { RunState } from "../../lib/runs/arrival-schema";
import type { SeriesState } from "../../lib/series/vocabulary";
import type { RecordingStore } from "../../lib/storage/recording-store";
import type { DemoSeries } from "./demo-labs";
import { recordSeries, type DemoRecording } from "./record-series";
import type { Recorders } from "./recorders";
import type { SeededLab } from "./seed-people";

export interface SeedTools {
  app: Db;
  queues: Queues;
  store: RecordingStore;
  /** On the file system of the store. */
  stagingFolder: string;
  recorders: Recorders;
  maxUploadBytes: number;
}

const LOOK_EVERY_MS = 150;
/** A check or an analysis takes a second; so long without an end means that no worker is there. */
const WORKER_PATIENCE_MS = 120_000;

/** @returns the series with this loudspeaker and plan; made where there is none. */
export function ensureSeries(
  { app }: Pick<SeedTools, "app">,
  { labId, testerId }: SeededLab,
  { loudspeaker, plan }: DemoSeries,
): Promise<string> {
  const by = { labId, accountId: testerId };
  return inLab(app, by, async (trx) => {
    const { maker, model, serial } = loudspeaker;
    const known = (await listLoudspeakers(trx, labId)).find(
      (one) => one.maker === maker && one.model === model && one.serial === serial,
    );
    if (known !== undefined) {
      const [first] = await listSeriesOfLoudspeaker(trx, labId, known.id);
      return first ?? startSeries(trx, by, known.id, plan);
    }
    const id = await createLoudspeaker(trx, labId, testerId, toLoudspeakerFields(loudspeaker));
    await recordEvent(trx, by, {
      act: "loudspeaker.created",
      subjectType: "loudspeaker",
      subjectId: id,
      details: { name: `${maker} ${model}` },
    });
    return startSeries(trx, by, id, plan);
  });
}

export interface FilledSeries {
  state: SeriesState;
  recordings: number;
}

/**
 * Uploads what is recorded of a series and not there yet, each after the check of the one before,
 * and waits for the analysis.
 *
 * @throws Error where no worker takes the work up
 */
export async function fillSeries(
  tools: SeedTools,
  lab: SeededLab,
  seriesId: string,
  series: DemoSeries,
): Promise<FilledSeries> {
  const { labId } = lab;
  const scope = { labId, accountId: lab.testerId };
  const inThisLab = <T>(act: (trx: Trx) => Promise<T>): Promise<T> => inLab(tools.app, scope, act);
  const before = await inThisLab(async (trx) => ({
    runs: await listRuns(trx, labId, seriesId),
    isOpen: (await getSeries(trx, labId, seriesId)).archived_at === null,
  }));
  const recordings = before.isOpen ? recordSeries(series) : [];
  for (const recording of recordings) {
    const fileName = recording.run.fileName;
    const known = before.runs.find((run) => run.file_name === fileName);
    const runId = known?.id ?? (await upload(tools, lab, seriesId, series, recording));
    const state = await settled<RunState>("checking", `${series.name}: check of ${fileName}`, () =>
      inThisLab(async (trx) => (await getRun(trx, labId, runId)).state),
    );
    const reason = recording.mishap?.keptBecause ?? null;
    if (state !== "failed" || reason === null) continue;
    const followUp = await inThisLab((trx) => actOnRun(trx, scope, runId, { act: "keep", reason }));
    await enqueueFollowUp(tools.queues, followUp);
  }
  const state = await settled<SeriesState>("analysing", `${series.name}: analysis`, () =>
    inThisLab(async (trx) => (await getSeries(trx, labId, seriesId)).state),
  );
  return { state, recordings: recordings.length };
}

/** The way of any upload, from the moment its last byte is staged. @returns id of the run */
async function upload(
  tools: SeedTools,
  { labId, testerId }: SeededLab,
  seriesId: string,
  series: DemoSeries,
  { run }: DemoRecording,
): Promise<string> {
  const id = randomBytes(16).toString("hex");
  const stagedPath = (uploadId: string): string => join(tools.stagingFolder, uploadId);
  mkdirSync(tools.stagingFolder, { recursive: true });
  const draft = `${stagedPath(id)}.recording`;
  try {
    await tools.recorders.record({ series, slot: run.slot, path: draft });
    const caller: LabCaller = {
      labId,
      accountId: testerId,
      roles: ["tester"],
      sessionId: null,
      tokenId: null,
    };
    const row = await inLab(tools.app, { labId, accountId: testerId }, async (trx) => {
      const metadata = { seriesId, fileName: run.fileName };
      const bytes = statSync(draft).size;
      const limits = { maxUploadBytes: tools.maxUploadBytes, now: new Date() };
      await createUpload(trx, caller, { id, bytes, metadata }, limits);
      return findUpload(trx, labId, id);
    });
    if (row === null) throw new Error(`${series.name}: an upload went away while it was made.`);
    renameSync(draft, stagedPath(id));
    const follow = (followUp: FollowUp): Promise<void> => enqueueFollowUp(tools.queues, followUp);
    return await finishUpload(
      { db: tools.app, store: tools.store, stagedPath, follow },
      caller,
      row,
    );
  } finally {
    rmSync(draft, { force: true });
  }
}

/** @returns the state that comes after `passing`. */
async function settled<State>(
  passing: State,
  what: string,
  look: () => Promise<State>,
): Promise<State> {
  const until = Date.now() + WORKER_PATIENCE_MS;
  for (;;) {
    const state = await look();
    if (state !== passing) return state;
    if (Date.now() > until) {
      throw new Error(
        `${what} has not ended for ${WORKER_PATIENCE_MS / 1000} s. Is there a worker?`,
      );
    }
    await sleep(LOOK_EVERY_MS);
  }
}
