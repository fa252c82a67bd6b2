/** Invitations: a one-time link each. */
import { sql, type Selectable } from "kysely";
import { AppError } from "../../lib/errors/app-error";
import type { Role } from "../../lib/roles/roles";
import type { Db, Trx } from "../client";
import type { InvitationsTable } from "../schema/invitations";

export type InvitationRow = Selectable<InvitationsTable>;

/** Days that a link stays good. */
export const INVITATION_DAYS = 14;

/** Ids behind a link that is neither used, withdrawn nor expired. */
export async function findInvitation(
  db: Db,
  tokenHash: string,
): Promise<{ invitationId: string; labId: string } | null> {
  const { rows } = await sql<{
    invitation_id: string;
    lab_id: string;
  }>`select invitation_id, lab_id from find_invitation(${tokenHash})`.execute(db);
  const row = rows[0];
  return row === undefined ? null : { invitationId: row.invitation_id, labId: row.lab_id };
}

export async function createInvitation(
  trx: Trx,
  invitation: {
    labId: string;
    email: string;
    name: string;
    roles: Role[];
    tokenHash: string;
    createdBy: string | null;
  },
): Promise<InvitationRow> {
  return trx
    .insertInto("invitations")
    .values({
      lab_id: invitation.labId,
      email: invitation.email.toLowerCase(),
      name: invitation.name,
      roles: invitation.roles,
      token_hash: invitation.tokenHash,
      created_by: invitation.createdBy,
      expires_at: sql`now() + make_interval(days => ${INVITATION_DAYS})`,
    })
    .returningAll()
    .executeTakeFirstOrThrow();
}

/** Open ones, newest first. */
export async function listInvitations(trx: Trx, labId: string): Promise<InvitationRow[]> {
  return trx
    .selectFrom("invitations")
    .selectAll()
    .where("lab_id", "=", labId)
    .where("used_at", "is", null)
    .where("withdrawn_at", "is", null)
    .where("expires_at", ">", sql<Date>`now()`)
    .orderBy("created_at", "desc")
    .execute();
}

/**
 * Holds the invitation until the transaction ends, so that a link is used once.
 *
 * @throws AppError "invitation.invalid"
 */
export async function lockInvitation(
  trx: Trx,
  labId: string,
  invitationId: string,
): Promise<InvitationRow> {
  const row = await trx
    .selectFrom("invitations")
    .selectAll()
    .where("lab_id", "=", labId)
    .where("id", "=", invitationId)
    .where("used_at", "is", null)
    .where("withdrawn_at", "is", null)
    .where("expires_at", ">", sql<Date>`now()`)
    .forUpdate()
    .executeTakeFirst();
  if (row === undefined) {
    throw new AppError(
      "invitation.invalid",
      "This invitation was used, was withdrawn or has expired. Ask the admin for a new one.",
    );
  }
  return row;
}

export async function useInvitation(trx: Trx, labId: string, invitationId: string): Promise<void> {
  await trx
    .updateTable("invitations")
    .set({ used_at: new Date() })
    .where("lab_id", "=", labId)
    .where("id", "=", invitationId)
    .execute();
}

/** @throws AppError "not-found" where it is not open. */
export async function withdrawInvitation(
  trx: Trx,
  labId: string,
  invitationId: string,
): Promise<InvitationRow> {
  const row = await trx
    .updateTable("invitations")
    .set({ withdrawn_at: new Date() })
    .where("lab_id", "=", labId)
    .where("id", "=", invitationId)
    .where("used_at", "is", null)
    .where("withdrawn_at", "is", null)
    .returningAll()
    .executeTakeFirst();
  if (row === undefined) throw new AppError("not-found", "There is no such open invitation.");
  return row;
}
