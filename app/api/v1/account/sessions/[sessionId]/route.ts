import { requireSession } from "@/app/_server/caller";
import { getDatabase } from "@/app/_server/database";
import { handleAccount } from "@/app/_server/handle";
import { asAccount } from "@/db/in-lab";
import { endSession as endRow } from "@/db/queries/sessions";
import { endSession } from "@/lib/api/account";
import { AppError } from "@/lib/errors/app-error";

export const DELETE = handleAccount(endSession, async ({ caller, params }) => {
  requireSession(caller);
  const { accountId } = caller;
  const ended = await asAccount(getDatabase(), accountId, (trx) =>
    endRow(trx, accountId, params.sessionId),
  );
  if (!ended) throw new AppError("not-found", "There is no such session under way.");
  return undefined;
});
