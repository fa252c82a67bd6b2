import { confirmAddress as confirm } from "@/app/_server/account-links";
import { getDatabase } from "@/app/_server/database";
import { handleAnyone } from "@/app/_server/handle";
import { confirmAddress } from "@/lib/api/account-links";

export const POST = handleAnyone(confirmAddress, ({ body }) => confirm(getDatabase(), body.secret));
