import { loadReviewFacts } from "../../../db/acts/sign-off";
import type { Trx } from "../../../db/client";
import { getAnalysis } from "../../../db/queries/analyses";
import { listComments } from "../../../db/queries/decisions";
import { listMembers } from "../../../db/queries/members";
import { listBandsHz } from "../../../db/queries/results";
import { listRunRequests } from "../../../db/queries/run-requests";
import { getSeries } from "../../../db/queries/series";
import { listSignOffs } from "../../../db/queries/sign-offs";
import type { Review } from "../../../lib/api/review";
import { findSignOffRefusal } from "../../../lib/review/sign-off-rules";
import { may } from "../../../lib/roles/roles";
import { type LabCaller, toScope } from "../caller";

/** @throws AppError "not-found" */
export async function loadReview(trx: Trx, caller: LabCaller, analysisId: string): Promise<Review> {
  const { labId, accountId } = caller;
  const analysis = await getAnalysis(trx, labId, analysisId);
  const series = await getSeries(trx, labId, analysis.series_id);
  const bandsHz = await listBandsHz(trx, labId, analysisId);
  const facts = await loadReviewFacts(trx, { ...toScope(caller), accountId }, series, analysis, {
    mayDecide: may(caller.roles, "decide"),
    bandsHz,
  });
  const signOffs = await listSignOffs(trx, labId, series.id);
  const { uploadedByCaller, twoPersonRule } = facts.signOff;
  return {
    analysis_id: analysisId,
    decisions: facts.decisions,
    comments: await listComments(trx, labId, analysisId),
    run_requests: await listRunRequests(trx, labId, series.id),
    sign_off: signOffs.find((one) => one.reopened === null) ?? null,
    past_sign_offs: signOffs.filter((one) => one.reopened !== null),
    bands_total: facts.signOff.bandsTotal,
    bands_decided: facts.signOff.bandsDecided,
    decisions_digest: facts.decisionsDigest,
    two_person_rule: twoPersonRule,
    sign_off_refusal: findSignOffRefusal(facts.signOff)?.words ?? null,
    others_who_may:
      twoPersonRule && uploadedByCaller > 0
        ? (await listMembers(trx, labId))
            .filter(
              (member) =>
                may(member.roles, "decide") &&
                member.accountId !== accountId &&
                !facts.uploads.has(member.accountId),
            )
            .map((member) => ({ id: member.accountId, name: member.name }))
        : [],
  };
}
