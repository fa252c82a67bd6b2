/** Sessions: read at every request. The transaction is the account's own. */
import { sql, type Selectable } from "kysely";
import type { Db, Trx } from "../client";
import type { SessionsTable } from "../schema/sessions";

export type SessionRow = Selectable<SessionsTable>;

/** A session ends after this long without a request. */
const IDLE = sql<Date>`now() + interval '14 days'`;

/** Ids behind a session that is neither ended nor expired, of an account that is not disabled. */
export async function findSession(
  db: Db,
  sessionId: string,
): Promise<{ accountId: string; labId: string | null } | null> {
  const { rows } = await sql<{
    account_id: string;
    lab_id: string | null;
  }>`select account_id, lab_id from find_session(${sessionId}::uuid)`.execute(db);
  const row = rows[0];
  return row === undefined ? null : { accountId: row.account_id, labId: row.lab_id };
}

export async function createSession(
  trx: Trx,
  session: { accountId: string; labId: string | null; userAgent: string; ip: string },
): Promise<string> {
  const row = await trx
    .insertInto("sessions")
    .values({
      account_id: session.accountId,
      lab_id: session.labId,
      user_agent: session.userAgent.slice(0, 300),
      ip: session.ip.slice(0, 64),
      expires_at: sql`now() + interval '14 days'`,
    })
    .returning("id")
    .executeTakeFirstOrThrow();
  return row.id;
}

/** The lab that the account's newest session worked in. */
export async function findLastLab(trx: Trx, accountId: string): Promise<string | null> {
  const row = await trx
    .selectFrom("sessions")
    .select("lab_id")
    .where("account_id", "=", accountId)
    .where("lab_id", "is not", null)
    .orderBy("created_at", "desc")
    .limit(1)
    .executeTakeFirst();
  return row?.lab_id ?? null;
}

/** Notes that the session is in use, once a minute at most. */
export async function touchSession(trx: Trx, sessionId: string): Promise<void> {
  await trx
    .updateTable("sessions")
    .set({ last_seen_at: new Date(), expires_at: IDLE })
    .where("id", "=", sessionId)
    .where("last_seen_at", "<", sql<Date>`now() - interval '1 minute'`)
    .execute();
}

/** The account must be a member of the lab: the foreign key says so too. */
export async function setSessionLab(trx: Trx, sessionId: string, labId: string): Promise<void> {
  await trx.updateTable("sessions").set({ lab_id: labId }).where("id", "=", sessionId).execute();
}

export async function listSessions(trx: Trx, accountId: string): Promise<SessionRow[]> {
  return trx
    .selectFrom("sessions")
    .selectAll()
    .where("account_id", "=", accountId)
    .where("ended_at", "is", null)
    .where("expires_at", ">", sql<Date>`now()`)
    .orderBy("last_seen_at", "desc")
    .execute();
}

/** @returns whether there was such a session under way. */
export async function endSession(trx: Trx, accountId: string, sessionId: string): Promise<boolean> {
  const row = await trx
    .updateTable("sessions")
    .set({ ended_at: new Date() })
    .where("account_id", "=", accountId)
    .where("id", "=", sessionId)
    .where("ended_at", "is", null)
    .returning("id")
    .executeTakeFirst();
  return row !== undefined;
}

/** @returns how many were ended. */
export async function endAllSessions(trx: Trx, accountId: string): Promise<number> {
  const rows = await trx
    .updateTable("sessions")
    .set({ ended_at: new Date() })
    .where("account_id", "=", accountId)
    .where("ended_at", "is", null)
    .returning("id")
    .execute();
  return rows.length;
}

/** @returns how many were ended. */
export async function endOtherSessions(
  trx: Trx,
  accountId: string,
  keptSessionId: string,
): Promise<number> {
  const rows = await trx
    .updateTable("sessions")
    .set({ ended_at: new Date() })
    .where("account_id", "=", accountId)
    .where("id", "!=", keptSessionId)
    .where("ended_at", "is", null)
    .returning("id")
    .execute();
  return rows.length;
}
