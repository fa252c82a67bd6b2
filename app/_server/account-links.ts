/** A new password and a new address, each by a one-time link that goes to the address by mail. */
import type { Db, Trx } from "../../db/client";
import { asAccount, inLab } from "../../db/in-lab";
import {
  createAccountLink,
  endAccountLinks,
  findAccountLink,
  lockAccountLink,
  noSuchLink,
  type AccountLink,
  type LinkPurpose,
} from "../../db/queries/account-links";
import {
  findAccount,
  findAccountForSignIn,
  setEmail,
  setPasswordHash,
  type AccountRow,
} from "../../db/queries/accounts";
import { recordEvent, type AuditEvent } from "../../db/queries/audit";
import { enqueueMail } from "../../db/queries/mails";
import { endAllSessions } from "../../db/queries/sessions";
import { hashPassword } from "../../lib/account/passwords";
import { createSecret, digestSecret } from "../../lib/account/secrets";
import type { OpenAccountLink } from "../../lib/api/account-links";
import { AppError } from "../../lib/errors/app-error";
import type { Attempts } from "./attempts";
import { checkPasswordOf, findUsualLab } from "./sign-in";

/** Does the same to the eye of the caller, whether an account has the address or not. */
export async function askForPasswordReset(db: Db, email: string): Promise<void> {
  const accountId = await findAccountForSignIn(db, email);
  if (accountId === null) return;
  await asAccount(db, accountId, async (trx) => {
    const account = await getAccount(trx, accountId);
    const { secret, expiresAt } = await makeLink(trx, accountId, "reset-password", null);
    await enqueueMail(trx, {
      labId: null,
      accountId,
      to: account.email,
      content: { kind: "password-reset", name: account.name, expires_at: expiresAt, secret },
    });
  });
}

/**
 * Every session ends, and every other open link of the account.
 *
 * @throws AppError "link.invalid", "password.weak"
 */
export async function resetPassword(
  db: Db,
  attempts: Attempts,
  reset: { secret: string; password: string; ip: string },
): Promise<{ email: string }> {
  const found = await getLinkIds(db, reset.secret);
  const passwordHash = await hashPassword(reset.password);
  const email = await spendLink(db, found, "reset-password", async (trx, account) => {
    await setPasswordHash(trx, account.id, passwordHash);
    const ended = await endAllSessions(trx, account.id);
    return {
      value: account.email,
      event: { act: "account.password-reset", details: { endedSessions: ended } },
    };
  });
  // Whoever tried too often may come in with the new one at once.
  await attempts.forgive(email, reset.ip);
  return { email };
}

/** @throws AppError "link.invalid" */
export async function getOpenLink(db: Db, secret: string): Promise<OpenAccountLink> {
  const { accountId, linkId } = await getLinkIds(db, secret);
  return asAccount(db, accountId, async (trx) => {
    const link = await lockAccountLink(trx, accountId, linkId);
    const { email } = await getAccount(trx, accountId);
    return { purpose: link.purpose, email, new_address: link.newAddress };
  });
}

/**
 * The link goes to the new address. Where another account has it, that address is told instead, and
 * the caller learns nothing of it.
 *
 * @throws AppError "request.invalid" for the address that one has, "auth.wrong", "auth.rate-limited"
 */
export async function askForAddressChange(
  db: Db,
  attempts: Attempts,
  accountId: string,
  wanted: { email: string; password: string; ip: string },
): Promise<void> {
  const account = await asAccount(db, accountId, (trx) => getAccount(trx, accountId));
  if (wanted.email === account.email) {
    throw new AppError("request.invalid", "You sign in with this address already.", {
      details: { fields: [{ path: "email", message: "is your present address" }] },
    });
  }
  const { password, ip } = wanted;
  await checkPasswordOf(db, attempts, { email: account.email, password, ip });
  const taken = (await findAccountForSignIn(db, wanted.email)) !== null;
  await asAccount(db, accountId, async (trx) => {
    const mail = { labId: null, accountId, to: wanted.email };
    if (taken) {
      await enqueueMail(trx, { ...mail, content: { kind: "address-taken" } });
      return;
    }
    const link = await makeLink(trx, accountId, "change-address", wanted.email);
    await enqueueMail(trx, {
      ...mail,
      content: {
        kind: "address-change",
        name: account.name,
        old_address: account.email,
        expires_at: link.expiresAt,
        secret: link.secret,
      },
    });
  });
}

/**
 * The old address is told.
 *
 * @throws AppError "link.invalid"; "conflict.exists" where another account took it meanwhile
 */
export async function confirmAddress(db: Db, secret: string): Promise<{ email: string }> {
  const found = await getLinkIds(db, secret);
  const email = await spendLink(db, found, "change-address", async (trx, account, link) => {
    const next = link.newAddress ?? account.email;
    await setEmail(trx, account.id, next);
    await enqueueMail(trx, {
      labId: null,
      accountId: account.id,
      to: account.email,
      content: { kind: "address-changed", name: account.name, new_address: next },
    });
    return { value: next, event: { act: "account.address-changed", details: { email: next } } };
  });
  return { email };
}

/** What using a link changes, in one transaction, with its line in the trail of the account's lab. */
async function spendLink<T>(
  db: Db,
  { accountId, linkId }: { accountId: string; linkId: string },
  purpose: LinkPurpose,
  act: (
    trx: Trx,
    account: AccountRow,
    link: AccountLink,
  ) => Promise<{ value: T; event: Pick<AuditEvent, "act" | "details"> }>,
): Promise<T> {
  const labId = await asAccount(db, accountId, (trx) => findUsualLab(trx, accountId));
  const run = async (trx: Trx) => {
    const link = await lockAccountLink(trx, accountId, linkId);
    if (link.purpose !== purpose) throw noSuchLink();
    const done = await act(trx, await getAccount(trx, accountId), link);
    await endAccountLinks(trx, accountId);
    return done;
  };
  if (labId === null) return (await asAccount(db, accountId, run)).value;
  const scope = { labId, accountId };
  return inLab(db, scope, async (trx) => {
    const { value, event } = await run(trx);
    await recordEvent(trx, scope, { ...event, subjectType: "account", subjectId: accountId });
    return value;
  });
}

async function makeLink(
  trx: Trx,
  accountId: string,
  purpose: LinkPurpose,
  newAddress: string | null,
): Promise<{ secret: string; expiresAt: string }> {
  const secret = createSecret();
  const tokenHash = digestSecret(secret);
  const expiresAt = await createAccountLink(trx, { accountId, purpose, tokenHash, newAddress });
  return { secret, expiresAt: expiresAt.toISOString() };
}

async function getLinkIds(db: Db, secret: string): Promise<{ accountId: string; linkId: string }> {
  const found = await findAccountLink(db, digestSecret(secret));
  if (found === null) throw noSuchLink();
  return found;
}

async function getAccount(trx: Trx, accountId: string): Promise<AccountRow> {
  const account = await findAccount(trx, accountId);
  if (account === null) throw noSuchLink();
  return account;
}
