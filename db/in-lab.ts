/** Transactions that carry who acts and in which lab; row-level security reads it. */
import { sql, type Kysely } from "kysely";
import type { Db, Trx } from "./client";
import type { Database } from "./schema/database";

export interface LabScope {
  labId: string;
  /** null where a worker acts. */
  accountId: string | null;
  /** The token behind the act, for the audit trail. */
  tokenId?: string | null;
}

/** Runs `act` in one transaction that sees the rows of this lab and no others. */
export async function inLab<T>(db: Db, scope: LabScope, act: (trx: Trx) => Promise<T>): Promise<T> {
  return db.transaction().execute(async (trx) => {
    await setScope(trx, scope.labId, scope.accountId);
    return act(trx);
  });
}

/** Runs `act` in one transaction that sees what belongs to the account itself. */
export async function asAccount<T>(
  db: Db,
  accountId: string,
  act: (trx: Trx) => Promise<T>,
): Promise<T> {
  return db.transaction().execute(async (trx) => {
    await setScope(trx, null, accountId);
    return act(trx);
  });
}

async function setScope(
  trx: Kysely<Database>,
  labId: string | null,
  accountId: string | null,
): Promise<void> {
  await sql`select set_config('tidemark.lab', ${labId ?? ""}, true),
    set_config('tidemark.account', ${accountId ?? ""}, true)`.execute(trx);
}
