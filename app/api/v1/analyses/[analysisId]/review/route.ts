import { getReview } from "@/lib/api/review";
import { handle } from "../../../../../_server/handle";
import { loadReview } from "../../../../../_server/views/review-view";

export const GET = handle(getReview, ({ params, inLab, caller }) =>
  inLab((trx) => loadReview(trx, caller, params.analysisId)),
);
