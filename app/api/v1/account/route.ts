import { requireSession } from "@/app/_server/caller";
import { getDatabase } from "@/app/_server/database";
import { handleAccount } from "@/app/_server/handle";
import { getSessionView } from "@/app/_server/session-view";
import { asAccount } from "@/db/in-lab";
import { updateAccount as saveAccount } from "@/db/queries/accounts";
import { updateAccount } from "@/lib/api/account";

export const PATCH = handleAccount(updateAccount, async ({ caller, body }) => {
  requireSession(caller);
  await asAccount(getDatabase(), caller.accountId, (trx) =>
    saveAccount(trx, caller.accountId, body),
  );
  return getSessionView(getDatabase(), caller);
});
