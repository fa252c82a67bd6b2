/** A sign-off on an analysis as its rows stand, for suites that begin where review has ended. */
import type { Trx } from "../../db/client";
import type { LabScope } from "../../db/in-lab";
import { getResult } from "../../db/queries/results";
import { digestText } from "../../lib/publication/canonical";
import { toResultText } from "../../lib/result/result-text";
import type { SignedDecision } from "../../lib/review/review-schema";
import type { Criterion } from "../../lib/series/series-schema";

export const SIGNED_AT = new Date("2026-05-12T10:00:00.000Z");

/** Confirms every band, but for `changed`, and signs. @returns id of the sign-off */
export async function signTestSeries(
  trx: Trx,
  by: LabScope & { accountId: string },
  signed: {
    seriesId: string;
    analysisId: string;
    criterion: Criterion;
    changed?: { nominal_Hz: number; cause: SignedDecision["cause"]; reason: string };
  },
): Promise<string> {
  const result = await getResult(trx, by.labId, signed.analysisId);
  const decisions = result.bands.map((band): SignedDecision => {
    const changed = signed.changed?.nominal_Hz === band.nominal_Hz ? signed.changed : null;
    return {
      nominal_Hz: band.nominal_Hz,
      cause: changed?.cause ?? band.cause,
      computed_cause: band.cause,
      reason: changed?.reason ?? null,
      by: "all",
      at: SIGNED_AT.toISOString(),
    };
  });
  const row = await trx
    .insertInto("sign_offs")
    .values({
      lab_id: by.labId,
      series_id: signed.seriesId,
      analysis_id: signed.analysisId,
      criterion: JSON.stringify(signed.criterion),
      decisions: JSON.stringify(decisions),
      decisions_digest: digestText(JSON.stringify(decisions)),
      result_digest: digestText(toResultText(result)),
      signed_by: by.accountId,
      signed_at: SIGNED_AT,
    })
    .returning("id")
    .executeTakeFirstOrThrow();
  await trx
    .updateTable("series")
    .set({ state: "signed off" })
    .where("lab_id", "=", by.labId)
    .where("id", "=", signed.seriesId)
    .execute();
  return row.id;
}
