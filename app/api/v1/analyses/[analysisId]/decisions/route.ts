import { decideBands as decide } from "@/db/acts/decide-bands";
import { decideBands } from "@/lib/api/review";
import { AppError } from "@/lib/errors/app-error";
import { handle } from "../../../../../_server/handle";
import { loadReview } from "../../../../../_server/views/review-view";

export const PUT = handle(decideBands, async ({ params, body, inLab, caller, scope }) => {
  const by = { ...scope, accountId: caller.accountId };
  // The attempt that came too late is committed to the history before it is refused.
  const { conflicts, review } = await inLab(async (trx) => ({
    ...(await decide(trx, by, params.analysisId, body.decisions)),
    review: await loadReview(trx, caller, params.analysisId),
  }));
  if (conflicts.length === 0) return review;
  const bands = conflicts.map((one) => `${one.nominal_Hz} Hz`).join(", ");
  throw new AppError(
    "conflict.changed",
    `${bands}: decided by ${conflicts[0]?.by.name ?? "somebody"} while you were looking. Nothing of yours was taken; look at both and send again.`,
    { details: { conflicts } },
  );
});
