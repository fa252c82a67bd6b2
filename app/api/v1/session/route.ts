import { getDatabase } from "@/app/_server/database";
import { handleAccount } from "@/app/_server/handle";
import { getSessionView } from "@/app/_server/session-view";
import { getSession } from "@/lib/api/session";

export const GET = handleAccount(getSession, ({ caller }) => getSessionView(getDatabase(), caller));
