/** Decisions on the bands of an analysis, and comments. Each decision is a new row; none is changed. */
import { sql } from "kysely";
import type { NewDecision } from "../../lib/review/decide";
import type { BandComment, Decision } from "../../lib/review/review-schema";
import { decisionCauseSchema } from "../../lib/review/review-schema";
import type { Trx } from "../client";

/** The newest version of every band that has one, rising frequency; bands opened again have cause null. */
export async function listDecisions(
  trx: Trx,
  labId: string,
  analysisId: string,
): Promise<Decision[]> {
  const rows = await trx
    .selectFrom("band_decisions as d")
    .leftJoin("accounts as a", "a.id", "d.decided_by")
    .distinctOn("d.nominal_hz")
    .selectAll("d")
    .select("a.name as byName")
    .where("d.lab_id", "=", labId)
    .where("d.analysis_id", "=", analysisId)
    .orderBy("d.nominal_hz")
    .orderBy("d.version", "desc")
    .execute();
  return rows.map((row) => {
    const computed = decisionCauseSchema.parse(row.computed_cause);
    const cause = row.cause === null ? null : decisionCauseSchema.parse(row.cause);
    return {
      nominal_Hz: row.nominal_hz,
      version: row.version,
      cause,
      computed_cause: computed,
      changed: cause !== null && cause !== computed,
      reason: row.reason,
      by: { id: row.decided_by, name: row.byName ?? "somebody" },
      at: row.decided_at.toISOString(),
    };
  });
}

/** Hold the series (lockSeries) while deciding. */
export async function addDecisions(
  trx: Trx,
  labId: string,
  accountId: string,
  analysisId: string,
  decisions: readonly NewDecision[],
): Promise<void> {
  if (decisions.length === 0) return;
  await trx
    .insertInto("band_decisions")
    .values(
      decisions.map((one) => ({
        lab_id: labId,
        analysis_id: analysisId,
        nominal_hz: one.nominalHz,
        version: one.version,
        cause: one.cause,
        computed_cause: one.computedCause,
        reason: one.reason,
        decided_by: accountId,
      })),
    )
    .execute();
}

/** Bands of an analysis, and those whose newest decision names a cause. */
export async function countDecided(
  trx: Trx,
  labId: string,
  analysisIds: readonly string[],
): Promise<Map<string, { total: number; decided: number }>> {
  if (analysisIds.length === 0) return new Map();
  const rows = await trx
    .selectFrom("analyses as n")
    .select([
      "n.id",
      sql<number>`(select count(*) from analysis_bands b
        where b.lab_id = n.lab_id and b.analysis_id = n.id)::int`.as("total"),
      sql<number>`(select count(*) from (
          select distinct on (d.nominal_hz) d.cause from band_decisions d
          where d.lab_id = n.lab_id and d.analysis_id = n.id
          order by d.nominal_hz, d.version desc) newest
        where newest.cause is not null)::int`.as("decided"),
    ])
    .where("n.lab_id", "=", labId)
    .where("n.id", "in", analysisIds)
    .execute();
  return new Map(rows.map(({ id, total, decided }) => [id, { total, decided }]));
}

/** Oldest first. */
export async function listComments(
  trx: Trx,
  labId: string,
  analysisId: string,
): Promise<BandComment[]> {
  const rows = await trx
    .selectFrom("band_comments as c")
    .leftJoin("accounts as a", "a.id", "c.written_by")
    .selectAll("c")
    .select("a.name as byName")
    .where("c.lab_id", "=", labId)
    .where("c.analysis_id", "=", analysisId)
    .orderBy("c.written_at")
    .orderBy("c.id")
    .execute();
  return rows.map((row) => ({
    id: row.id,
    nominal_Hz: row.nominal_hz,
    words: row.words,
    by: { id: row.written_by, name: row.byName ?? "somebody" },
    at: row.written_at.toISOString(),
  }));
}

/** @returns its id. */
export async function addComment(
  trx: Trx,
  labId: string,
  accountId: string,
  comment: { analysisId: string; nominalHz: number | null; words: string },
): Promise<string> {
  const row = await trx
    .insertInto("band_comments")
    .values({
      lab_id: labId,
      analysis_id: comment.analysisId,
      nominal_hz: comment.nominalHz,
      words: comment.words,
      written_by: accountId,
    })
    .returning("id")
    .executeTakeFirstOrThrow();
  return row.id;
}
