import { signOffAnalysis } from "@/db/acts/sign-off";
import { signOff } from "@/lib/api/review";
import { handle } from "../../../../../_server/handle";

export const POST = handle(signOff, ({ params, body, inLab, caller, scope }) =>
  inLab((trx) =>
    signOffAnalysis(trx, { ...scope, accountId: caller.accountId }, params.analysisId, {
      criterion: body.criterion,
      decisionsDigest: body.decisions_digest,
    }),
  ),
);
