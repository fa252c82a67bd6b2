import { getAttempts } from "@/app/_server/auth";
import { findIp } from "@/app/_server/client-address";
import { getDatabase } from "@/app/_server/database";
import { handleAnyone } from "@/app/_server/handle";
import { acceptInvitation as accept } from "@/app/_server/invitations";
import { acceptInvitation } from "@/lib/api/members";

export const POST = handleAnyone(acceptInvitation, ({ body, request }) =>
  accept(getDatabase(), getAttempts(), { ...body, ip: findIp(request.headers) }),
);
