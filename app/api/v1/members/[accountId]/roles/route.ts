import { handle } from "@/app/_server/handle";
import { toMember } from "@/app/_server/views/people";
import { recordEvent } from "@/db/queries/audit";
import { getMember, setRoles } from "@/db/queries/members";
import { setMemberRoles } from "@/lib/api/members";

export const PUT = handle(setMemberRoles, ({ inLab, scope, params, body }) =>
  inLab(async (trx) => {
    const before = await getMember(trx, scope.labId, params.accountId);
    await setRoles(trx, scope.labId, params.accountId, body.roles);
    await recordEvent(trx, scope, {
      act: "member.roles-changed",
      subjectType: "account",
      subjectId: params.accountId,
      details: { name: before.name, from: before.roles, to: body.roles },
    });
    return toMember({ ...before, roles: body.roles });
  }),
);
