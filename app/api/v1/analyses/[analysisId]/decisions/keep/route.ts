import { keepDecisions as keep } from "@/db/acts/decide-bands";
import { keepDecisions } from "@/lib/api/review";
import { handle } from "../../../../../../_server/handle";
import { loadReview } from "../../../../../../_server/views/review-view";

export const POST = handle(keepDecisions, ({ params, body, inLab, caller, scope }) =>
  inLab(async (trx) => {
    await keep(trx, { ...scope, accountId: caller.accountId }, params.analysisId, body.from);
    return loadReview(trx, caller, params.analysisId);
  }),
);
