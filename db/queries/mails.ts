/**
 * The outbox: a mail is written in the transaction of the act that it reports, and sent by a worker.
 * A mail of a lab is seen in that lab, one about an account alone by that account.
 */
import { sql, type Selectable } from "kysely";
import type { MailContent } from "../../lib/mail/mail-schema";
import type { Db, Trx } from "../client";
import type { MailsTable } from "../schema/mails";

export type MailRow = Selectable<MailsTable>;

/** Whose mail it is: one of the two is set, or both. */
export interface MailOwner {
  labId: string | null;
  accountId: string | null;
}

/** @param mail.content its kind goes to a column, the rest into the payload. */
export async function enqueueMail(
  trx: Trx,
  mail: MailOwner & { to: string; content: MailContent },
): Promise<string> {
  const { kind, ...payload } = mail.content;
  const row = await trx
    .insertInto("mails")
    .values({
      lab_id: mail.labId,
      account_id: mail.accountId,
      kind,
      to_address: mail.to,
      payload: JSON.stringify(payload),
    })
    .returning("id")
    .executeTakeFirstOrThrow();
  return row.id;
}

/** Ids of what is to be sent now, the longest waiting first. */
export async function findDueMails(db: Db): Promise<(MailOwner & { mailId: string })[]> {
  const { rows } = await sql<{
    lab_id: string | null;
    account_id: string | null;
    mail_id: string;
  }>`select lab_id, account_id, mail_id from find_due_mails()`.execute(db);
  return rows.map((row) => ({
    labId: row.lab_id,
    accountId: row.account_id,
    mailId: row.mail_id,
  }));
}

/**
 * Takes a mail that is due for one attempt. Should its worker die, it is due again after the lease.
 *
 * @returns null where it was sent, given up or taken meanwhile.
 */
export async function claimMail(trx: Trx, mailId: string, leaseS: number): Promise<MailRow | null> {
  const row = await trx
    .updateTable("mails")
    .set({
      attempts: sql<number>`attempts + 1`,
      next_attempt_at: sql<Date>`now() + make_interval(secs => ${leaseS})`,
    })
    .where("id", "=", mailId)
    .where("sent_at", "is", null)
    .where("given_up_at", "is", null)
    .where("next_attempt_at", "<=", sql<Date>`now()`)
    .returningAll()
    .executeTakeFirst();
  return row ?? null;
}

/** The one-time link is in the mail now, and nowhere else. */
export async function markSent(trx: Trx, mailId: string): Promise<void> {
  await trx
    .updateTable("mails")
    .set({ sent_at: new Date(), last_error: null, payload: withoutSecret })
    .where("id", "=", mailId)
    .execute();
}

export async function postponeMail(
  trx: Trx,
  mailId: string,
  { pauseS, why }: { pauseS: number; why: string },
): Promise<void> {
  await trx
    .updateTable("mails")
    .set({
      next_attempt_at: sql<Date>`now() + make_interval(secs => ${pauseS})`,
      last_error: why,
    })
    .where("id", "=", mailId)
    .execute();
}

export async function giveUpMail(trx: Trx, mailId: string, why: string): Promise<void> {
  await trx
    .updateTable("mails")
    .set({ given_up_at: new Date(), last_error: why, payload: withoutSecret })
    .where("id", "=", mailId)
    .execute();
}

/** Mails of these invitations by their ids. */
export async function listInvitationMails(
  trx: Trx,
  labId: string,
  invitationIds: readonly string[],
): Promise<ReadonlyMap<string, MailRow>> {
  if (invitationIds.length === 0) return new Map();
  const rows = await trx
    .selectFrom("mails")
    .selectAll()
    .where("lab_id", "=", labId)
    .where("kind", "=", "invitation")
    .where(invitationIdOf, "in", invitationIds)
    .execute();
  return new Map(rows.map((row) => [String(row.payload["invitation_id"]), row]));
}

/** What has not gone out yet stays here. */
export async function stopInvitationMail(
  trx: Trx,
  labId: string,
  invitationId: string,
): Promise<void> {
  await trx
    .updateTable("mails")
    .set({
      given_up_at: new Date(),
      last_error: "the invitation was withdrawn",
      payload: withoutSecret,
    })
    .where("lab_id", "=", labId)
    .where("kind", "=", "invitation")
    .where(invitationIdOf, "=", invitationId)
    .where("sent_at", "is", null)
    .where("given_up_at", "is", null)
    .execute();
}

const invitationIdOf = sql<string>`payload ->> 'invitation_id'`;
const withoutSecret = sql<string>`(payload::jsonb - 'secret')::json`;
