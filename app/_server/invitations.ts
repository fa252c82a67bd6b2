/** An invitation from the link to the member. */
import { randomUUID } from "node:crypto";
import type { Db, Trx } from "../../db/client";
import { isUniqueViolation } from "../../db/database-error";
import { inLab, type LabScope } from "../../db/in-lab";
import { createAccount, findAccountForSignIn } from "../../db/queries/accounts";
import { recordEvent } from "../../db/queries/audit";
import {
  createInvitation,
  findInvitation,
  type InvitationRow,
  lockInvitation,
  useInvitation as markUsed,
} from "../../db/queries/invitations";
import { getLab } from "../../db/queries/labs";
import { enqueueMail } from "../../db/queries/mails";
import { addMember, findMemberByEmail, listNames } from "../../db/queries/members";
import { hashPassword } from "../../lib/account/passwords";
import { createSecret, digestSecret } from "../../lib/account/secrets";
import type { OpenInvitation } from "../../lib/api/members";
import { AppError } from "../../lib/errors/app-error";
import type { Role } from "../../lib/roles/roles";
import type { Attempts } from "./attempts";
import { checkPasswordOf } from "./sign-in";

/**
 * Mails the link, too.
 *
 * @returns the row and the link's secret, which is nowhere else.
 * @throws AppError "conflict.exists" for a member
 */
export async function invite(
  trx: Trx,
  by: LabScope,
  person: { email: string; name: string; roles: Role[] },
): Promise<{ row: InvitationRow; secret: string }> {
  if ((await findMemberByEmail(trx, by.labId, person.email)) !== null) {
    throw new AppError("conflict.exists", `${person.email} is a member of this lab already.`);
  }
  const secret = createSecret();
  const row = await createInvitation(trx, {
    ...person,
    labId: by.labId,
    tokenHash: digestSecret(secret),
    createdBy: by.accountId,
  });
  await recordEvent(trx, by, {
    act: "invitation.created",
    subjectType: "invitation",
    subjectId: row.id,
    details: { email: row.email, roles: row.roles },
  });
  const lab = await getLab(trx, by.labId);
  const names = await listNames(trx, [by.accountId]);
  await enqueueMail(trx, {
    labId: by.labId,
    accountId: null,
    to: row.email,
    content: {
      kind: "invitation",
      invitation_id: row.id,
      lab: lab.name,
      time_zone: lab.time_zone,
      name: row.name,
      invited_by: names.get(by.accountId ?? "") ?? null,
      roles: row.roles,
      expires_at: row.expires_at.toISOString(),
      secret,
    },
  });
  return { row, secret };
}

export const toInvitationLink = (publicUrl: string, secret: string): string =>
  `${publicUrl}/invitation/${secret}`;

/** @throws AppError "invitation.invalid" */
export async function getOpenInvitation(db: Db, secret: string): Promise<OpenInvitation> {
  const { labId, invitationId } = await getInvitationIds(db, secret);
  return inLab(db, { labId, accountId: null }, async (trx) => {
    const row = await lockInvitation(trx, labId, invitationId);
    const lab = await getLab(trx, labId);
    return {
      lab: lab.name,
      email: row.email,
      name: row.name,
      roles: row.roles,
      account_exists: (await findAccountForSignIn(trx, row.email)) !== null,
    };
  });
}

/**
 * Makes the account where there is none, and the membership.
 *
 * @throws AppError "invitation.invalid"; "password.weak" for a new account; "auth.wrong" and
 *   "auth.rate-limited" where the address has an account with another password
 */
export async function acceptInvitation(
  db: Db,
  attempts: Attempts,
  acceptance: { secret: string; name?: string | undefined; password: string; ip: string },
): Promise<{ email: string; lab: string }> {
  const { labId, invitationId } = await getInvitationIds(db, acceptance.secret);
  const { email, name } = await inLab(db, { labId, accountId: null }, (trx) =>
    lockInvitation(trx, labId, invitationId),
  );
  const { password, ip } = acceptance;
  const existing = await findAccountForSignIn(db, email);
  const accountId =
    existing === null ? randomUUID() : await checkPasswordOf(db, attempts, { email, password, ip });
  const passwordHash = existing === null ? await hashPassword(password) : null;
  const scope = { labId, accountId };
  return inLab(db, scope, async (trx) => {
    const invitation = await lockInvitation(trx, labId, invitationId);
    if (passwordHash !== null) {
      await createAccountOnce(trx, {
        id: accountId,
        email,
        name: acceptance.name ?? (name === "" ? (email.split("@")[0] ?? email) : name),
        passwordHash,
      });
    }
    await addMember(trx, { labId, accountId, roles: invitation.roles });
    await markUsed(trx, labId, invitationId);
    await recordEvent(trx, scope, {
      act: "member.joined",
      subjectType: "account",
      subjectId: accountId,
      details: { email, roles: invitation.roles },
    });
    return { email, lab: (await getLab(trx, labId)).name };
  });
}

async function createAccountOnce(
  trx: Trx,
  account: Parameters<typeof createAccount>[1],
): Promise<void> {
  try {
    await createAccount(trx, account);
  } catch (error) {
    if (!isUniqueViolation(error, "accounts_email_key")) throw error;
    throw new AppError(
      "conflict.exists",
      "This address has an account already. Open the link again and enter its password.",
      { cause: error },
    );
  }
}

async function getInvitationIds(
  db: Db,
  secret: string,
): Promise<{ labId: string; invitationId: string }> {
  const found = await findInvitation(db, digestSecret(secret));
  if (found === null) {
    throw new AppError(
      "invitation.invalid",
      "This invitation was used, was withdrawn or has expired. Ask the admin for a new one.",
    );
  }
  return found;
}
