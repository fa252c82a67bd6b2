import { setTimeout as sleep } from "node:timers/promises";
import { askForPasswordReset } from "@/app/_server/account-links";
import { findIp } from "@/app/_server/client-address";
import { getDatabase } from "@/app/_server/database";
import { handleAnyone } from "@/app/_server/handle";
import { countLinkAsked } from "@/app/_server/mail-limit";
import { requestPasswordReset } from "@/lib/api/account-links";

/** Longer than the work takes: how long the answer took tells nothing. */
const ANSWER_AFTER_MS = 300;

export const POST = handleAnyone(requestPasswordReset, async ({ body, request }) => {
  await countLinkAsked(body.email, findIp(request.headers));
  await Promise.all([askForPasswordReset(getDatabase(), body.email), sleep(ANSWER_AFTER_MS)]);
  return new Response(null, { status: 202 });
});
