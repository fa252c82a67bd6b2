/** One-time links of an account: a new password, a new address. The transaction is the account's own. */
import { sql } from "kysely";
import { AppError } from "../../lib/errors/app-error";
import type { Db, Trx } from "../client";
import type { AccountLinksTable } from "../schema/mails";

export type LinkPurpose = AccountLinksTable["purpose"];

export interface AccountLink {
  purpose: LinkPurpose;
  newAddress: string | null;
}

/** Minutes that a link stays good. */
export const LINK_MINUTES: Readonly<Record<LinkPurpose, number>> = {
  "reset-password": 60,
  "change-address": 24 * 60,
};

/** Ids behind a link that is neither used nor expired, of an account that is not disabled. */
export async function findAccountLink(
  db: Db,
  tokenHash: string,
): Promise<{ accountId: string; linkId: string } | null> {
  const { rows } = await sql<{
    account_id: string;
    link_id: string;
  }>`select account_id, link_id from find_account_link(${tokenHash})`.execute(db);
  const row = rows[0];
  return row === undefined ? null : { accountId: row.account_id, linkId: row.link_id };
}

/** @returns when it stops working. */
export async function createAccountLink(
  trx: Trx,
  link: {
    accountId: string;
    purpose: LinkPurpose;
    tokenHash: string;
    newAddress: string | null;
  },
): Promise<Date> {
  const row = await trx
    .insertInto("account_links")
    .values({
      account_id: link.accountId,
      purpose: link.purpose,
      token_hash: link.tokenHash,
      new_address: link.newAddress,
      expires_at: sql`now() + make_interval(mins => ${LINK_MINUTES[link.purpose]})`,
    })
    .returning("expires_at")
    .executeTakeFirstOrThrow();
  return row.expires_at;
}

/**
 * Holds the link until the transaction ends, so that it is used once.
 *
 * @throws AppError "link.invalid"
 */
export async function lockAccountLink(
  trx: Trx,
  accountId: string,
  linkId: string,
): Promise<AccountLink> {
  const row = await trx
    .selectFrom("account_links")
    .select(["purpose", "new_address as newAddress"])
    .where("account_id", "=", accountId)
    .where("id", "=", linkId)
    .where("used_at", "is", null)
    .where("expires_at", ">", sql<Date>`now()`)
    .forUpdate()
    .executeTakeFirst();
  if (row === undefined) throw noSuchLink();
  return row;
}

/** The used one, and every other that is still open: none of them was meant for what is now. */
export async function endAccountLinks(trx: Trx, accountId: string): Promise<void> {
  await trx
    .updateTable("account_links")
    .set({ used_at: new Date() })
    .where("account_id", "=", accountId)
    .where("used_at", "is", null)
    .execute();
}

export function noSuchLink(): AppError {
  return new AppError("link.invalid", "This link was used or has expired. Ask for a new one.");
}
