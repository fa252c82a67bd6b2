import { findCaller, requireSession } from "@/app/_server/caller";
import { getDatabase } from "@/app/_server/database";
import { handleAccount } from "@/app/_server/handle";
import { getSessionView } from "@/app/_server/session-view";
import { asAccount } from "@/db/in-lab";
import { findRoles } from "@/db/queries/members";
import { setSessionLab } from "@/db/queries/sessions";
import { switchLab } from "@/lib/api/session";
import { AppError } from "@/lib/errors/app-error";

export const PUT = handleAccount(switchLab, async ({ caller, body, request }) => {
  const sessionId = requireSession(caller);
  await asAccount(getDatabase(), caller.accountId, async (trx) => {
    if ((await findRoles(trx, body.lab_id, caller.accountId)).length === 0) {
      throw new AppError("not-found", "You are no member of such a lab.");
    }
    await setSessionLab(trx, sessionId, body.lab_id);
  });
  const now = await findCaller(getDatabase(), request.headers);
  return getSessionView(getDatabase(), now ?? caller);
});
