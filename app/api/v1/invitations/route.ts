import { handle } from "@/app/_server/handle";
import { invite, toInvitationLink } from "@/app/_server/invitations";
import { toInvitation } from "@/app/_server/views/people";
import { listInvitations as listRows } from "@/db/queries/invitations";
import { listInvitationMails } from "@/db/queries/mails";
import { listNames } from "@/db/queries/members";
import { createInvitation, listInvitations } from "@/lib/api/members";
import { getEnvironment } from "@/lib/config/environment";

export const GET = handle(listInvitations, ({ inLab, scope }) =>
  inLab(async (trx) => {
    const rows = await listRows(trx, scope.labId);
    const names = await listNames(
      trx,
      rows.map((row) => row.created_by),
    );
    const mails = await listInvitationMails(
      trx,
      scope.labId,
      rows.map((row) => row.id),
    );
    return { invitations: rows.map((row) => toInvitation(row, names, mails.get(row.id))) };
  }),
);

export const POST = handle(createInvitation, ({ inLab, scope, body }) =>
  inLab(async (trx) => {
    const { row, secret } = await invite(trx, scope, body);
    const names = await listNames(trx, [row.created_by]);
    const mails = await listInvitationMails(trx, scope.labId, [row.id]);
    return {
      invitation: toInvitation(row, names, mails.get(row.id)),
      link: toInvitationLink(getEnvironment().publicUrl, secret),
    };
  }),
);
