/** The result of an analysis, kept as head, runs and bands. */
import { AppError } from "../../lib/errors/app-error";
import type { Result } from "../../lib/result/result-schema";
import { composeResult, toResultParts } from "../../lib/result/result-text";
import type { Trx } from "../client";

/**
 * Writes a whole result and ends the analysis, all in the transaction given. Doing so again leaves
 * the same rows.
 *
 * @param runIds of the recordings, by the file names in the result.
 * @returns false where the analysis was cancelled or saved meanwhile; then nothing is written.
 */
export async function saveResult(
  trx: Trx,
  labId: string,
  analysisId: string,
  result: Result,
  runIds: ReadonlyMap<string, string>,
  sourceCommit: string | null = null,
): Promise<boolean> {
  const { head, runs, bands } = toResultParts(result);
  const row = await trx
    .updateTable("analyses")
    .set({
      state: "done",
      head: JSON.stringify(head),
      source_commit: sourceCommit,
      error: null,
      progress: null,
      finished_at: new Date(),
    })
    .where("lab_id", "=", labId)
    .where("id", "=", analysisId)
    .where("state", "=", "running")
    .returning("id")
    .executeTakeFirst();
  if (row === undefined) return false;
  for (const table of ["analysis_runs", "analysis_bands"] as const) {
    await trx
      .deleteFrom(table)
      .where("lab_id", "=", labId)
      .where("analysis_id", "=", analysisId)
      .execute();
  }
  if (runs.length > 0) {
    await trx
      .insertInto("analysis_runs")
      .values(
        runs.map((run, position) => ({
          lab_id: labId,
          analysis_id: analysisId,
          position,
          run_id: runIds.get(run.file) ?? null,
          payload: JSON.stringify(run),
        })),
      )
      .execute();
  }
  if (bands.length > 0) {
    await trx
      .insertInto("analysis_bands")
      .values(
        bands.map((band, position) => ({
          lab_id: labId,
          analysis_id: analysisId,
          position,
          nominal_hz: band.nominal_Hz,
          exact_hz: band.exact_Hz,
          cause: band.cause,
          onset_status: band.onset.status,
          onset_db: band.onset.nominal_dB,
          payload: JSON.stringify(band),
        })),
      )
      .execute();
  }
  return true;
}

/** @throws AppError "not-found"; "conflict.state" while there is no result */
export async function getResult(trx: Trx, labId: string, analysisId: string): Promise<Result> {
  const row = await trx
    .selectFrom("analyses")
    .select(["state", "head"])
    .where("lab_id", "=", labId)
    .where("id", "=", analysisId)
    .executeTakeFirst();
  if (row === undefined) throw new AppError("not-found", "There is no such analysis.");
  if (row.state !== "done" || row.head === null) {
    throw new AppError("conflict.state", `This analysis is ${row.state}; it has no result.`, {
      details: { state: row.state },
    });
  }
  const runs = await trx
    .selectFrom("analysis_runs")
    .select("payload")
    .where("lab_id", "=", labId)
    .where("analysis_id", "=", analysisId)
    .orderBy("position")
    .execute();
  const bands = await trx
    .selectFrom("analysis_bands")
    .select("payload")
    .where("lab_id", "=", labId)
    .where("analysis_id", "=", analysisId)
    .orderBy("position")
    .execute();
  return composeResult(
    row.head,
    runs.map((run) => run.payload),
    bands.map((band) => band.payload),
  );
}

/** Nominal frequencies, rising; empty while there is no result. */
export async function listBandsHz(trx: Trx, labId: string, analysisId: string): Promise<number[]> {
  const rows = await trx
    .selectFrom("analysis_bands")
    .select("nominal_hz")
    .where("lab_id", "=", labId)
    .where("analysis_id", "=", analysisId)
    .orderBy("position")
    .execute();
  return rows.map((row) => row.nominal_hz);
}
