import { requireSession } from "@/app/_server/caller";
import { getDatabase } from "@/app/_server/database";
import { handleAccount } from "@/app/_server/handle";
import { asAccount } from "@/db/in-lab";
import { listSessions as listRows } from "@/db/queries/sessions";
import { listSessions } from "@/lib/api/account";

export const GET = handleAccount(listSessions, async ({ caller }) => {
  const currentId = requireSession(caller);
  const rows = await asAccount(getDatabase(), caller.accountId, (trx) =>
    listRows(trx, caller.accountId),
  );
  return {
    sessions: rows.map((row) => ({
      id: row.id,
      created_at: row.created_at.toISOString(),
      last_seen_at: row.last_seen_at.toISOString(),
      user_agent: row.user_agent,
      ip: row.ip,
      current: row.id === currentId,
    })),
  };
});
