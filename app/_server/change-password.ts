import type { Db, Trx } from "../../db/client";
import { asAccount, inLab } from "../../db/in-lab";
import { findAccount, setPasswordHash } from "../../db/queries/accounts";
import { recordEvent } from "../../db/queries/audit";
import { endOtherSessions } from "../../db/queries/sessions";
import { checkPassword, hashPassword } from "../../lib/account/passwords";
import { AppError } from "../../lib/errors/app-error";
import type { Attempts } from "./attempts";
import type { Caller } from "./caller";
import { checkPasswordOf } from "./sign-in";

/**
 * A new password ends every other session of the account.
 *
 * @returns sessions ended.
 * @throws AppError "auth.wrong", "auth.rate-limited", "password.weak"
 */
export async function changePassword(
  db: Db,
  attempts: Attempts,
  caller: Caller & { sessionId: string },
  change: { current: string; next: string; ip: string },
): Promise<number> {
  checkPassword(change.next);
  const { accountId, labId, sessionId } = caller;
  const account = await asAccount(db, accountId, (trx) => findAccount(trx, accountId));
  if (account === null) throw new AppError("auth.required", "Sign in again.");
  await checkPasswordOf(db, attempts, {
    email: account.email,
    password: change.current,
    ip: change.ip,
  });
  const passwordHash = await hashPassword(change.next);
  const save = async (trx: Trx): Promise<number> => {
    await setPasswordHash(trx, accountId, passwordHash);
    return endOtherSessions(trx, accountId, sessionId);
  };
  if (labId === null) return asAccount(db, accountId, save);
  const scope = { labId, accountId };
  return inLab(db, scope, async (trx) => {
    const ended = await save(trx);
    await recordEvent(trx, scope, {
      act: "account.password-changed",
      subjectType: "account",
      subjectId: accountId,
      details: { endedSessions: ended },
    });
    return ended;
  });
}
