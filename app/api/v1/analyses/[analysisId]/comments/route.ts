import { writeComment as write } from "@/db/acts/decide-bands";
import { writeComment } from "@/lib/api/review";
import { handle } from "../../../../../_server/handle";

export const POST = handle(writeComment, ({ params, body, inLab, caller, scope }) =>
  inLab((trx) =>
    write(
      trx,
      { ...scope, accountId: caller.accountId },
      { analysisId: params.analysisId, nominalHz: body.nominal_Hz, words: body.words },
    ),
  ),
);
