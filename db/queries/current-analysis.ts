/** Which analysis of a series counts now. */
import type { Progress } from "../../lib/api/series";
import type { Trx } from "../client";

/**
 * The analysis asked for last, cancelled ones left out: asking again for recordings that were
 * analysed before makes that version count again.
 *
 * @param only `done`: the last one with a result.
 */
export async function findCurrentAnalysis(
  trx: Trx,
  labId: string,
  seriesId: string,
  only: "any" | "done" = "any",
) {
  const row = await trx
    .selectFrom("analyses as n")
    .leftJoin("accounts as a", "a.id", "n.requested_by")
    .select([
      "n.id",
      "n.version",
      "n.state",
      "n.inputs_digest",
      "n.progress",
      "n.error",
      "n.requested_at",
      "n.finished_at",
      "a.name as requestedByName",
    ])
    .where("n.lab_id", "=", labId)
    .where("n.series_id", "=", seriesId)
    .where("n.state", "in", only === "done" ? ["done"] : ["queued", "running", "done", "failed"])
    .orderBy("n.requested_at", "desc")
    .limit(1)
    .executeTakeFirst();
  return row ?? null;
}

/** Makes a version that is done count again. */
export async function renewRequest(trx: Trx, labId: string, analysisId: string): Promise<void> {
  await trx
    .updateTable("analyses")
    .set({ requested_at: new Date() })
    .where("lab_id", "=", labId)
    .where("id", "=", analysisId)
    .execute();
}

/** Those of a series that have not ended, but for one. @returns their ids. */
export async function listOpenAnalyses(
  trx: Trx,
  labId: string,
  seriesId: string,
  exceptId: string,
): Promise<string[]> {
  const rows = await trx
    .selectFrom("analyses")
    .select("id")
    .where("lab_id", "=", labId)
    .where("series_id", "=", seriesId)
    .where("id", "!=", exceptId)
    .where("state", "in", ["queued", "running"])
    .execute();
  return rows.map((row) => row.id);
}

/** Progress of the analyses under way, by series. */
export async function listProgress(
  trx: Trx,
  labId: string,
  seriesIds: readonly string[],
): Promise<Map<string, Progress>> {
  if (seriesIds.length === 0) return new Map();
  const rows = await trx
    .selectFrom("analyses")
    .select(["series_id", "progress"])
    .where("lab_id", "=", labId)
    .where("series_id", "in", seriesIds)
    .where("state", "=", "running")
    .execute();
  return new Map(
    rows.flatMap((row) => (row.progress === null ? [] : [[row.series_id, row.progress]])),
  );
}
