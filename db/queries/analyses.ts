/** Analyses: one row per version; the row is the truth, the queue only carries ids. */
import { sql, type Selectable } from "kysely";
import type { Failure, Progress } from "../../lib/api/series";
import { AppError } from "../../lib/errors/app-error";
import type { Settings } from "../../lib/series/series-schema";
import type { Db, Trx } from "../client";
import type { AnalysesTable, AnalysisInputs } from "../schema/analyses";

export type AnalysisRow = Omit<Selectable<AnalysesTable>, "head"> & {
  requestedByName: string | null;
};

/** Everything but the result itself. @throws AppError "not-found" */
export async function getAnalysis(
  trx: Trx,
  labId: string,
  analysisId: string,
): Promise<AnalysisRow> {
  const row = await analysesOf(trx, labId).where("n.id", "=", analysisId).executeTakeFirst();
  if (row === undefined) throw new AppError("not-found", "There is no such analysis.");
  return row;
}

/** Newest first. */
export async function listAnalyses(
  trx: Trx,
  labId: string,
  seriesId: string,
): Promise<AnalysisRow[]> {
  return analysesOf(trx, labId)
    .where("n.series_id", "=", seriesId)
    .orderBy("n.version", "desc")
    .execute();
}

/** By inputs and engine: the same again makes no new version. */
export async function findAnalysisByInputs(
  trx: Trx,
  labId: string,
  key: { seriesId: string; inputsDigest: string; engineVersion: string },
): Promise<AnalysisRow | null> {
  const row = await analysesOf(trx, labId)
    .where("n.series_id", "=", key.seriesId)
    .where("n.inputs_digest", "=", key.inputsDigest)
    .where("n.engine_version", "=", key.engineVersion)
    .executeTakeFirst();
  return row ?? null;
}

/** The next version of a series, queued. Hold the series (lockSeries) while asking. */
export async function createAnalysis(
  trx: Trx,
  labId: string,
  analysis: {
    seriesId: string;
    inputs: AnalysisInputs;
    inputsDigest: string;
    settings: Settings;
    engineVersion: string;
    requestedBy: string | null;
  },
): Promise<string> {
  const row = await trx
    .insertInto("analyses")
    .values((eb) => ({
      lab_id: labId,
      series_id: analysis.seriesId,
      version: eb
        .selectFrom("analyses as o")
        .select(sql<number>`coalesce(max(o.version), 0) + 1`.as("next"))
        .where("o.lab_id", "=", labId)
        .where("o.series_id", "=", analysis.seriesId)
        .$asScalar()
        .$notNull(),
      inputs: JSON.stringify(analysis.inputs),
      inputs_digest: analysis.inputsDigest,
      settings: JSON.stringify(analysis.settings),
      engine_version: analysis.engineVersion,
      requested_by: analysis.requestedBy,
    }))
    .returning("id")
    .executeTakeFirstOrThrow();
  return row.id;
}

/** A failed or cancelled version is tried again under its own number. */
export async function requeueAnalysis(
  trx: Trx,
  labId: string,
  analysisId: string,
  requestedBy: string | null,
): Promise<void> {
  await trx
    .updateTable("analyses")
    .set({
      state: "queued",
      error: null,
      progress: null,
      attempts: 0,
      heartbeat_at: null,
      started_at: null,
      finished_at: null,
      requested_at: new Date(),
      requested_by: requestedBy,
    })
    .where("lab_id", "=", labId)
    .where("id", "=", analysisId)
    .where("state", "in", ["failed", "cancelled"])
    .execute();
}

/**
 * Takes a queued analysis, or one whose worker has been silent for `staleAfterS`.
 *
 * @returns false where another worker is at it, or it is over.
 */
export async function claimAnalysis(
  trx: Trx,
  labId: string,
  analysisId: string,
  staleAfterS: number,
): Promise<boolean> {
  const row = await trx
    .updateTable("analyses")
    .set({
      state: "running",
      attempts: sql<number>`attempts + 1`,
      started_at: sql<Date>`coalesce(started_at, now())`,
      heartbeat_at: sql<Date>`now()`,
      progress: null,
    })
    .where("lab_id", "=", labId)
    .where("id", "=", analysisId)
    .where(
      sql<boolean>`(state = 'queued' or (state = 'running'
        and heartbeat_at <= now() - make_interval(secs => ${staleAfterS})))`,
    )
    .returning("id")
    .executeTakeFirst();
  return row !== undefined;
}

/** Where it stands; also the sign of life. @returns false where it was cancelled meanwhile. */
export async function setProgress(
  trx: Trx,
  labId: string,
  analysisId: string,
  progress: Progress,
): Promise<boolean> {
  const row = await trx
    .updateTable("analyses")
    .set({ progress: JSON.stringify(progress), heartbeat_at: sql<Date>`now()` })
    .where("lab_id", "=", labId)
    .where("id", "=", analysisId)
    .where("state", "=", "running")
    .returning("id")
    .executeTakeFirst();
  return row !== undefined;
}

/** Back to the queue: the worker stops, or a passing fault wants another try. */
export async function releaseAnalysis(trx: Trx, labId: string, analysisId: string): Promise<void> {
  await trx
    .updateTable("analyses")
    .set({ state: "queued", progress: null, heartbeat_at: sql<Date>`now()` })
    .where("lab_id", "=", labId)
    .where("id", "=", analysisId)
    .where("state", "=", "running")
    .execute();
}

/** @returns false where it was over already. */
export async function failAnalysis(
  trx: Trx,
  labId: string,
  analysisId: string,
  failure: Failure,
): Promise<boolean> {
  return endAnalysis(trx, labId, analysisId, "failed", JSON.stringify(failure));
}

/** @returns false where it was over already. */
export async function cancelAnalysis(
  trx: Trx,
  labId: string,
  analysisId: string,
): Promise<boolean> {
  return endAnalysis(trx, labId, analysisId, "cancelled", null);
}

/** Analyses that nobody works on, over all labs: for the sweep. */
export async function findForgottenAnalyses(
  db: Db,
  olderThanS: number,
): Promise<{ labId: string; analysisId: string }[]> {
  const { rows } = await sql<{ lab_id: string; analysis_id: string }>`
    select lab_id, analysis_id
    from find_forgotten_analyses(make_interval(secs => ${olderThanS}))`.execute(db);
  return rows.map((row) => ({ labId: row.lab_id, analysisId: row.analysis_id }));
}

async function endAnalysis(
  trx: Trx,
  labId: string,
  analysisId: string,
  state: "failed" | "cancelled",
  error: string | null,
): Promise<boolean> {
  const row = await trx
    .updateTable("analyses")
    .set({ state, error, progress: null, finished_at: new Date() })
    .where("lab_id", "=", labId)
    .where("id", "=", analysisId)
    .where("state", "in", ["queued", "running"])
    .returning("id")
    .executeTakeFirst();
  return row !== undefined;
}

function analysesOf(trx: Trx, labId: string) {
  return trx
    .selectFrom("analyses as n")
    .leftJoin("accounts as a", "a.id", "n.requested_by")
    .select([
      "n.id",
      "n.lab_id",
      "n.series_id",
      "n.version",
      "n.state",
      "n.inputs",
      "n.inputs_digest",
      "n.settings",
      "n.engine_version",
      "n.source_commit",
      "n.progress",
      "n.error",
      "n.requested_by",
      "n.requested_at",
      "n.started_at",
      "n.finished_at",
      "n.attempts",
      "n.heartbeat_at",
      "a.name as requestedByName",
    ])
    .where("n.lab_id", "=", labId);
}
