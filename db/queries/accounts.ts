/** Accounts and their passwords. The transaction is the account's own (asAccount or inLab). */
import type { Kysely, Selectable } from "kysely";
import { sql } from "kysely";
import { AppError } from "../../lib/errors/app-error";
import type { Theme } from "../../lib/labs/settings-schema";
import type { Db, Trx } from "../client";
import { isUniqueViolation } from "../database-error";
import type { AccountsTable } from "../schema/accounts";
import type { Database } from "../schema/database";

export type AccountRow = Selectable<AccountsTable>;

/** Before anybody is known: the id behind an address, null where there is none or it is disabled. */
export async function findAccountForSignIn(
  db: Db | Kysely<Database>,
  email: string,
): Promise<string | null> {
  const { rows } = await sql<{
    account_id: string;
  }>`select account_id from find_account_for_sign_in(${email})`.execute(db);
  return rows[0]?.account_id ?? null;
}

export async function findAccount(trx: Trx, accountId: string): Promise<AccountRow | null> {
  const row = await trx
    .selectFrom("accounts")
    .selectAll()
    .where("id", "=", accountId)
    .executeTakeFirst();
  return row ?? null;
}

export async function findPasswordHash(trx: Trx, accountId: string): Promise<string | null> {
  const row = await trx
    .selectFrom("account_passwords")
    .select("password_hash")
    .where("account_id", "=", accountId)
    .executeTakeFirst();
  return row?.password_hash ?? null;
}

/** The transaction must carry the new account's id. */
export async function createAccount(
  trx: Trx,
  account: { id: string; email: string; name: string; passwordHash: string },
): Promise<void> {
  await trx
    .insertInto("accounts")
    .values({ id: account.id, email: account.email.toLowerCase(), name: account.name })
    .execute();
  await trx
    .insertInto("account_passwords")
    .values({ account_id: account.id, password_hash: account.passwordHash })
    .execute();
}

export async function updateAccount(
  trx: Trx,
  accountId: string,
  change: { name?: string; theme?: Theme },
): Promise<void> {
  if (change.name === undefined && change.theme === undefined) return;
  await trx.updateTable("accounts").set(change).where("id", "=", accountId).execute();
}

/** @throws AppError "conflict.exists" where another account has it */
export async function setEmail(trx: Trx, accountId: string, email: string): Promise<void> {
  try {
    await trx
      .updateTable("accounts")
      .set({ email: email.toLowerCase() })
      .where("id", "=", accountId)
      .execute();
  } catch (error) {
    if (!isUniqueViolation(error, "accounts_email_key")) throw error;
    throw new AppError("conflict.exists", "Another account has this address meanwhile.", {
      cause: error,
    });
  }
}

export async function setPasswordHash(
  trx: Trx,
  accountId: string,
  passwordHash: string,
): Promise<void> {
  await trx
    .updateTable("account_passwords")
    .set({ password_hash: passwordHash, password_changed_at: new Date() })
    .where("account_id", "=", accountId)
    .execute();
}
