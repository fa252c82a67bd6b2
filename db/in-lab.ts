/** Transactions that carry who acts and in which lab; row-level security reads it. */
import { sql } from "kysely";
import type { Db, Trx } from "./client";
import { toDatabaseError } from "./database-error";

export interface LabScope {
  labId: string;
  /** null where a worker acts. */
  accountId: string | null;
  /** The token behind the act, for the audit trail. */
  tokenId?: string | null;
}

/** Runs `act` in one transaction that sees the rows of this lab and no others. */
export function inLab<T>(db: Db, scope: LabScope, act: (trx: Trx) => Promise<T>): Promise<T> {
  return inScope(db, scope.labId, scope.accountId, act);
}

/** Runs `act` in one transaction that sees what belongs to the account itself. */
export function asAccount<T>(db: Db, accountId: string, act: (trx: Trx) => Promise<T>): Promise<T> {
  return inScope(db, null, accountId, act);
}

async function inScope<T>(
  db: Db,
  labId: string | null,
  accountId: string | null,
  act: (trx: Trx) => Promise<T>,
): Promise<T> {
  try {
    return await db.transaction().execute(async (trx) => {
      await sql`select set_config('tidemark.lab', ${labId ?? ""}, true),
        set_config('tidemark.account', ${accountId ?? ""}, true)`.execute(trx);
      return act(trx);
    });
  } catch (error) {
    throw toDatabaseError(error);
  }
}
