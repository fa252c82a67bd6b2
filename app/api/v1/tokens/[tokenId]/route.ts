import { handle } from "@/app/_server/handle";
import { recordEvent } from "@/db/queries/audit";
import { getTokenRow, revokeToken as revokeRow } from "@/db/queries/tokens";
import { revokeToken } from "@/lib/api/tokens";
import { AppError } from "@/lib/errors/app-error";
import { may } from "@/lib/roles/roles";

export const DELETE = handle(revokeToken, async ({ inLab, caller, scope, params }) => {
  await inLab(async (trx) => {
    const row = await getTokenRow(trx, caller.labId, params.tokenId);
    // Somebody else's token does not exist for a member who is no admin: the list hides it too.
    if (row.account_id !== caller.accountId && !may(caller.roles, "administer")) {
      throw new AppError("not-found", "There is no such token of yours.");
    }
    await revokeRow(trx, caller.labId, row.id);
    await recordEvent(trx, scope, {
      act: "token.revoked",
      subjectType: "token",
      subjectId: row.id,
      details: { name: row.name, owner: row.ownerName },
    });
  });
  return undefined;
});
