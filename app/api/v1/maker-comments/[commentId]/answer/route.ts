import { handle } from "@/app/_server/handle";
import { toMakerComment } from "@/app/_server/views/publication-view";
import { answerMakerComment as answer } from "@/db/acts/previews";
import { getMakerComment } from "@/db/queries/previews";
import { answerMakerComment } from "@/lib/api/publications";

export const PUT = handle(answerMakerComment, ({ params, body, inLab, caller, scope }) =>
  inLab(async (trx) => {
    await answer(trx, { ...scope, accountId: caller.accountId }, params.commentId, body.answer);
    return toMakerComment(await getMakerComment(trx, caller.labId, params.commentId));
  }),
);
