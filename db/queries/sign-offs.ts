/** Sign-offs of a series; at most one stands. */
import { AppError } from "../../lib/errors/app-error";
import type { SignedDecision, SignOff } from "../../lib/review/review-schema";
import { toDecisionsText } from "../../lib/review/digest-decisions";
import type { Criterion } from "../../lib/series/series-schema";
import type { Trx } from "../client";

/** Newest first. */
export async function listSignOffs(trx: Trx, labId: string, seriesId: string): Promise<SignOff[]> {
  const rows = await trx
    .selectFrom("sign_offs as s")
    .innerJoin("analyses as n", (join) =>
      join.onRef("n.lab_id", "=", "s.lab_id").onRef("n.id", "=", "s.analysis_id"),
    )
    .leftJoin("accounts as a", "a.id", "s.signed_by")
    .leftJoin("accounts as r", "r.id", "s.reopened_by")
    .selectAll("s")
    .select(["n.version", "a.name as byName", "r.name as reopenedByName"])
    .where("s.lab_id", "=", labId)
    .where("s.series_id", "=", seriesId)
    .orderBy("s.signed_at", "desc")
    .orderBy("s.id")
    .execute();
  return rows.map((row) => ({
    id: row.id,
    analysis_id: row.analysis_id,
    analysis_version: row.version,
    criterion: row.criterion,
    decisions_digest: row.decisions_digest,
    result_digest: row.result_digest,
    one_person: row.one_person,
    by: { id: row.signed_by, name: row.byName ?? "somebody" },
    at: row.signed_at.toISOString(),
    reopened:
      row.reopened_at === null || row.reopened_by === null
        ? null
        : {
            by: { id: row.reopened_by, name: row.reopenedByName ?? "somebody" },
            at: row.reopened_at.toISOString(),
            reason: row.reopen_reason ?? "",
          },
  }));
}

/** The sign-off in force; null where none stands. */
export async function findStandingSignOff(
  trx: Trx,
  labId: string,
  seriesId: string,
): Promise<SignOff | null> {
  return (await listSignOffs(trx, labId, seriesId)).find((one) => one.reopened === null) ?? null;
}

/** What a sign-off bound, standing or reopened since. @throws AppError "not-found" */
export async function getSignedParts(
  trx: Trx,
  labId: string,
  signOffId: string,
): Promise<{ analysisId: string; decisions: SignedDecision[] }> {
  const row = await trx
    .selectFrom("sign_offs")
    .select(["analysis_id", "decisions"])
    .where("lab_id", "=", labId)
    .where("id", "=", signOffId)
    .executeTakeFirst();
  if (row === undefined) throw new AppError("not-found", "There is no such sign-off.");
  return { analysisId: row.analysis_id, decisions: row.decisions };
}

/** Whether the series is signed off: what its state is derived from. */
export async function isSignedOff(trx: Trx, labId: string, seriesId: string): Promise<boolean> {
  const row = await trx
    .selectFrom("sign_offs")
    .select("id")
    .where("lab_id", "=", labId)
    .where("series_id", "=", seriesId)
    .where("reopened_at", "is", null)
    .executeTakeFirst();
  return row !== undefined;
}

/** Hold the series (lockSeries) while signing. @returns its id. */
export async function addSignOff(
  trx: Trx,
  labId: string,
  accountId: string,
  signOff: {
    seriesId: string;
    analysisId: string;
    criterion: Criterion;
    decisions: SignedDecision[];
    decisionsDigest: string;
    resultDigest: string;
    onePerson: boolean;
  },
): Promise<string> {
  const row = await trx
    .insertInto("sign_offs")
    .values({
      lab_id: labId,
      series_id: signOff.seriesId,
      analysis_id: signOff.analysisId,
      criterion: JSON.stringify(signOff.criterion),
      decisions: toDecisionsText(signOff.decisions),
      decisions_digest: signOff.decisionsDigest,
      result_digest: signOff.resultDigest,
      one_person: signOff.onePerson,
      signed_by: accountId,
    })
    .returning("id")
    .executeTakeFirstOrThrow();
  return row.id;
}

/** Takes the standing sign-off back; its row stays. @returns its id, null where none stood. */
export async function reopenSignOff(
  trx: Trx,
  labId: string,
  accountId: string,
  seriesId: string,
  reason: string,
): Promise<string | null> {
  const row = await trx
    .updateTable("sign_offs")
    .set({ reopened_by: accountId, reopened_at: new Date(), reopen_reason: reason })
    .where("lab_id", "=", labId)
    .where("series_id", "=", seriesId)
    .where("reopened_at", "is", null)
    .returning("id")
    .executeTakeFirst();
  return row?.id ?? null;
}

/** Runs of an analysis by who brought them, by hand or by a token of theirs. */
export async function countUploads(
  trx: Trx,
  labId: string,
  runIds: readonly string[],
): Promise<Map<string, number>> {
  if (runIds.length === 0) return new Map();
  const rows = await trx
    .selectFrom("runs")
    .select(["uploaded_by"])
    .where("lab_id", "=", labId)
    .where("id", "in", runIds)
    .execute();
  const counts = new Map<string, number>();
  for (const row of rows) counts.set(row.uploaded_by, (counts.get(row.uploaded_by) ?? 0) + 1);
  return counts;
}
