/** From address and password to a session row. */
import type { Db, Trx } from "../../db/client";
import { asAccount, inLab } from "../../db/in-lab";
import { findAccountForSignIn, findPasswordHash } from "../../db/queries/accounts";
import { recordEvent } from "../../db/queries/audit";
import { listLabsOfAccount } from "../../db/queries/labs";
import { createSession, endSession, findLastLab, findSession } from "../../db/queries/sessions";
import { toDatabaseError } from "../../db/database-error";
import { verifyPassword } from "../../lib/account/passwords";
import { AppError } from "../../lib/errors/app-error";
import type { Attempts } from "./attempts";

export interface SignInAttempt {
  email: string;
  password: string;
  ip: string;
  userAgent: string;
}

/**
 * @throws AppError "auth.wrong" with details.triesLeft, whether the address exists or not;
 *   "auth.rate-limited"; "database.unavailable"
 */
export async function signIn(
  db: Db,
  attempts: Attempts,
  attempt: SignInAttempt,
): Promise<{ accountId: string; sessionId: string }> {
  const accountId = await checkPasswordOf(db, attempts, attempt);
  const labId = await asAccount(db, accountId, (trx) => findUsualLab(trx, accountId));
  const session = { accountId, labId, userAgent: attempt.userAgent, ip: attempt.ip };
  if (labId === null) {
    const sessionId = await asAccount(db, accountId, (trx) => createSession(trx, session));
    return { accountId, sessionId };
  }
  const scope = { labId, accountId };
  const sessionId = await inLab(db, scope, async (trx) => {
    const id = await createSession(trx, session);
    await recordEvent(trx, scope, {
      act: "account.signed-in",
      subjectType: "account",
      subjectId: accountId,
    });
    return id;
  });
  return { accountId, sessionId };
}

/** The lab that the account worked in last, or any; null where it belongs to none. */
export async function findUsualLab(trx: Trx, accountId: string): Promise<string | null> {
  const labs = await listLabsOfAccount(trx, accountId);
  const last = await findLastLab(trx, accountId);
  return labs.find((lab) => lab.id === last)?.id ?? labs[0]?.id ?? null;
}

/** Counts the try, then looks. @returns id of the account. @throws as signIn does */
export async function checkPasswordOf(
  db: Db,
  attempts: Attempts,
  attempt: Pick<SignInAttempt, "email" | "password" | "ip">,
): Promise<string> {
  const triesLeft = await attempts.count(attempt.email, attempt.ip);
  try {
    const accountId = await findAccountForSignIn(db, attempt.email.trim());
    const stored =
      accountId === null
        ? null
        : await asAccount(db, accountId, (trx) => findPasswordHash(trx, accountId));
    if (!(await verifyPassword(stored, attempt.password)) || accountId === null) {
      throw new AppError("auth.wrong", "Address or password is wrong.", { details: { triesLeft } });
    }
    await attempts.forgive(attempt.email, attempt.ip);
    return accountId;
  } catch (error) {
    throw toDatabaseError(error);
  }
}

/** Ends the session and writes it down; nothing happens where it has ended already. */
export async function signOut(db: Db, sessionId: string): Promise<void> {
  const found = await findSession(db, sessionId);
  if (found === null) return;
  const { accountId, labId } = found;
  if (labId === null) {
    await asAccount(db, accountId, (trx) => endSession(trx, accountId, sessionId));
    return;
  }
  const scope = { labId, accountId };
  await inLab(db, scope, async (trx) => {
    await endSession(trx, accountId, sessionId);
    await recordEvent(trx, scope, {
      act: "account.signed-out",
      subjectType: "account",
      subjectId: accountId,
    });
  });
}
