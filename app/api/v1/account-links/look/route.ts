import { getOpenLink } from "@/app/_server/account-links";
import { getDatabase } from "@/app/_server/database";
import { handleAnyone } from "@/app/_server/handle";
import { lookAtAccountLink } from "@/lib/api/account-links";

export const POST = handleAnyone(lookAtAccountLink, ({ body }) =>
  getOpenLink(getDatabase(), body.secret),
);
