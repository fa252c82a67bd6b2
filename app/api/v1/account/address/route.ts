import { askForAddressChange } from "@/app/_server/account-links";
import { getAttempts } from "@/app/_server/auth";
import { requireSession } from "@/app/_server/caller";
import { findIp } from "@/app/_server/client-address";
import { getDatabase } from "@/app/_server/database";
import { handleAccount } from "@/app/_server/handle";
import { countLinkAsked } from "@/app/_server/mail-limit";
import { requestAddressChange } from "@/lib/api/account-links";

export const POST = handleAccount(requestAddressChange, async ({ caller, body, request }) => {
  requireSession(caller);
  const ip = findIp(request.headers);
  await countLinkAsked(body.email, ip);
  await askForAddressChange(getDatabase(), getAttempts(), caller.accountId, { ...body, ip });
  return new Response(null, { status: 202 });
});
