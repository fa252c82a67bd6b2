import { handle } from "@/app/_server/handle";
import { recordEvent } from "@/db/queries/audit";
import { getMember, removeMember as removeRow } from "@/db/queries/members";
import { removeMember } from "@/lib/api/members";

export const DELETE = handle(removeMember, async ({ inLab, scope, params }) => {
  await inLab(async (trx) => {
    const member = await getMember(trx, scope.labId, params.accountId);
    await removeRow(trx, scope.labId, params.accountId);
    await recordEvent(trx, scope, {
      act: "member.removed",
      subjectType: "account",
      subjectId: params.accountId,
      details: { name: member.name, roles: member.roles },
    });
  });
  return undefined;
});
