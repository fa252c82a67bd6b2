import { getDatabase } from "@/app/_server/database";
import { handleAnyone } from "@/app/_server/handle";
import { getOpenInvitation } from "@/app/_server/invitations";
import { lookAtInvitation } from "@/lib/api/members";

export const POST = handleAnyone(lookAtInvitation, ({ body }) =>
  getOpenInvitation(getDatabase(), body.secret),
);
