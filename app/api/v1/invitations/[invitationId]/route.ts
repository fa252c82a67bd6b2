import { handle } from "@/app/_server/handle";
import { recordEvent } from "@/db/queries/audit";
import { withdrawInvitation as withdrawRow } from "@/db/queries/invitations";
import { stopInvitationMail } from "@/db/queries/mails";
import { withdrawInvitation } from "@/lib/api/members";

export const DELETE = handle(withdrawInvitation, async ({ inLab, scope, params }) => {
  await inLab(async (trx) => {
    const row = await withdrawRow(trx, scope.labId, params.invitationId);
    await stopInvitationMail(trx, scope.labId, row.id);
    await recordEvent(trx, scope, {
      act: "invitation.withdrawn",
      subjectType: "invitation",
      subjectId: row.id,
      details: { email: row.email },
    });
  });
  return undefined;
});
