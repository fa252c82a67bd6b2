import { getAttempts } from "@/app/_server/auth";
import { requireSession } from "@/app/_server/caller";
import { changePassword as change } from "@/app/_server/change-password";
import { findIp } from "@/app/_server/client-address";
import { getDatabase } from "@/app/_server/database";
import { handleAccount } from "@/app/_server/handle";
import { changePassword } from "@/lib/api/account";

export const PUT = handleAccount(changePassword, async ({ caller, body, request }) => {
  const sessionId = requireSession(caller);
  const ended = await change(
    getDatabase(),
    getAttempts(),
    { ...caller, sessionId },
    { ...body, ip: findIp(request.headers) },
  );
  return { ended_sessions: ended };
});
