/** From rows of the people side to the shapes of the API. */
import type { AuditRow } from "../../../db/queries/audit";
import type { InvitationRow } from "../../../db/queries/invitations";
import type { LabRow } from "../../../db/queries/labs";
import type { MailRow } from "../../../db/queries/mails";
import type { MemberRow } from "../../../db/queries/members";
import type { TokenRow } from "../../../db/queries/tokens";
import type { Lab, TrailEvent } from "../../../lib/api/labs";
import type { Invitation, Member } from "../../../lib/api/members";
import type { Token } from "../../../lib/api/tokens";
import type { Person } from "../../../lib/api/common";
import { labSettingsSchema } from "../../../lib/labs/settings-schema";

export const toMember = (row: MemberRow): Member => ({
  id: row.accountId,
  name: row.name,
  email: row.email,
  roles: row.roles,
  since: row.createdAt.toISOString(),
});

export const toInvitation = (
  row: InvitationRow,
  names: ReadonlyMap<string, string>,
  mail: MailRow | undefined,
): Invitation => ({
  id: row.id,
  email: row.email,
  name: row.name,
  roles: row.roles,
  created_at: row.created_at.toISOString(),
  created_by: toPerson(row.created_by, row.created_by === null ? null : names.get(row.created_by)),
  expires_at: row.expires_at.toISOString(),
  mail: mail === undefined ? null : { state: toMailState(mail), error: mail.last_error },
});

function toMailState(mail: MailRow): NonNullable<Invitation["mail"]>["state"] {
  if (mail.sent_at !== null) return "sent";
  return mail.given_up_at === null ? "waiting" : "not delivered";
}

export const toToken = (row: TokenRow): Token => ({
  id: row.id,
  name: row.name,
  prefix: row.prefix,
  owner: { id: row.account_id, name: row.ownerName },
  roles: row.roles,
  created_at: row.created_at.toISOString(),
  last_used_at: row.last_used_at?.toISOString() ?? null,
  expires_at: row.expires_at?.toISOString() ?? null,
  revoked_at: row.revoked_at?.toISOString() ?? null,
});

export const toLab = (row: LabRow): Lab => ({
  id: row.id,
  slug: row.slug,
  name: row.name,
  time_zone: row.time_zone,
  settings: labSettingsSchema.parse(row.settings),
});

export const toTrailEvent = (row: AuditRow): TrailEvent => ({
  id: row.id,
  at: row.at.toISOString(),
  who: toPerson(row.accountId, row.name),
  by_token: row.tokenName,
  act: row.act,
  subject_type: row.subjectType,
  subject_id: row.subjectId,
  series_id: row.seriesId,
  details: row.details,
});

function toPerson(id: string | null, name: string | null | undefined): Person | null {
  return id === null ? null : { id, name: name ?? "somebody" };
}
