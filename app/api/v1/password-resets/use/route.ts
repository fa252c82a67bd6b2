import { resetPassword as reset } from "@/app/_server/account-links";
import { getAttempts } from "@/app/_server/auth";
import { findIp } from "@/app/_server/client-address";
import { getDatabase } from "@/app/_server/database";
import { handleAnyone } from "@/app/_server/handle";
import { resetPassword } from "@/lib/api/account-links";

export const POST = handleAnyone(resetPassword, ({ body, request }) =>
  reset(getDatabase(), getAttempts(), { ...body, ip: findIp(request.headers) }),
);
