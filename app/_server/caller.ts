/**
 * Who is calling, in which lab, with which roles. Read from the database at every request, so that
 * sign-out, a changed password and a removed role take effect at once.
 */
import { asAccount, inLab, type LabScope } from "../../db/in-lab";
import type { Db } from "../../db/client";
import { findRoles } from "../../db/queries/members";
import { findSession, touchSession } from "../../db/queries/sessions";
import { findToken, findTokenRoles, touchToken } from "../../db/queries/tokens";
import { toDatabaseError } from "../../db/database-error";
import { digestSecret, TOKEN_PREFIX } from "../../lib/account/secrets";
import { AppError } from "../../lib/errors/app-error";
import { type Capability, may, type Role, tokenRoles } from "../../lib/roles/roles";
import { readSessionId } from "./session-cookie";

export interface Caller {
  accountId: string;
  /** The lab that the caller works in; null where the account is in none (any more). */
  labId: string | null;
  /** Roles in that lab, now. */
  roles: Role[];
  /** One of the two is set: the way the caller came in. */
  sessionId: string | null;
  tokenId: string | null;
}

export interface LabCaller extends Caller {
  labId: string;
}

/**
 * @returns null where nobody is signed in.
 * @throws AppError "auth.token-invalid" where a token was sent that is not good (any more).
 */
export async function findCaller(db: Db, headers: Headers): Promise<Caller | null> {
  try {
    const bearer = /^Bearer\s+(\S+)$/i.exec(headers.get("authorization") ?? "")?.[1];
    if (headers.has("authorization")) return await callerByToken(db, bearer ?? "");
    const sessionId = await readSessionId(headers);
    return sessionId === null ? null : await callerBySession(db, sessionId);
  } catch (error) {
    throw toDatabaseError(error);
  }
}

async function callerBySession(db: Db, sessionId: string): Promise<Caller | null> {
  const found = await findSession(db, sessionId);
  if (found === null) return null;
  const { accountId, labId } = found;
  const roles = await asAccount(db, accountId, async (trx) => {
    await touchSession(trx, sessionId);
    return labId === null ? [] : findRoles(trx, labId, accountId);
  });
  return {
    accountId,
    labId: roles.length === 0 ? null : labId,
    roles,
    sessionId,
    tokenId: null,
  };
}

async function callerByToken(db: Db, token: string): Promise<Caller> {
  const found = token.startsWith(TOKEN_PREFIX) ? await findToken(db, digestSecret(token)) : null;
  if (found === null) {
    throw new AppError(
      "auth.token-invalid",
      "This token is unknown, revoked or expired. Make a new one on the tokens page.",
    );
  }
  const { tokenId, labId, accountId } = found;
  const roles = await inLab(db, { labId, accountId, tokenId }, async (trx) => {
    await touchToken(trx, labId, tokenId);
    return tokenRoles(
      await findTokenRoles(trx, labId, tokenId),
      await findRoles(trx, labId, accountId),
    );
  });
  return {
    accountId,
    labId: roles.length === 0 ? null : labId,
    roles,
    sessionId: null,
    tokenId,
  };
}

/** @throws AppError "auth.required", "auth.forbidden" */
export function checkCapability(caller: Caller | null, capability: Capability): LabCaller {
  if (caller === null) throw signInFirst();
  const { labId } = caller;
  if (labId === null) {
    throw new AppError(
      "auth.forbidden",
      "You are no member of this lab (any more). Choose another lab, or ask its admin.",
    );
  }
  if (!may(caller.roles, capability)) {
    throw new AppError(
      "auth.forbidden",
      `Your roles (${caller.roles.join(", ")}) do not allow this. An admin of the lab can change them.`,
      { details: { capability } },
    );
  }
  return { ...caller, labId };
}

export function signInFirst(): AppError {
  return new AppError("auth.required", "Sign in first, or send a token.");
}

/** @throws AppError "auth.session-needed": some acts are for a person at a browser. */
export function requireSession(caller: Caller): string {
  if (caller.sessionId === null) {
    throw new AppError("auth.session-needed", "A token cannot do this. Sign in and do it there.");
  }
  return caller.sessionId;
}

export function toScope(caller: LabCaller): LabScope {
  return { labId: caller.labId, accountId: caller.accountId, tokenId: caller.tokenId };
}
