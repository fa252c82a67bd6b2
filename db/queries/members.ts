/** Who belongs to a lab, with which roles. */
import { AppError } from "../../lib/errors/app-error";
import type { Role } from "../../lib/roles/roles";
import type { Trx } from "../client";

export interface MemberRow {
  accountId: string;
  name: string;
  email: string;
  roles: Role[];
  createdAt: Date;
}

/** Roles that the account holds in the lab now; empty where it is no member (any more). */
export async function findRoles(trx: Trx, labId: string, accountId: string): Promise<Role[]> {
  const row = await trx
    .selectFrom("memberships")
    .select("roles")
    .where("lab_id", "=", labId)
    .where("account_id", "=", accountId)
    .where("removed_at", "is", null)
    .executeTakeFirst();
  return row?.roles ?? [];
}

export async function listMembers(trx: Trx, labId: string): Promise<MemberRow[]> {
  return membersOf(trx, labId).orderBy("a.name").orderBy("a.id").execute();
}

/** @throws AppError "not-found" */
export async function getMember(trx: Trx, labId: string, accountId: string): Promise<MemberRow> {
  const row = await membersOf(trx, labId).where("a.id", "=", accountId).executeTakeFirst();
  if (row === undefined) throw new AppError("not-found", "There is no such member of this lab.");
  return row;
}

export async function findMemberByEmail(
  trx: Trx,
  labId: string,
  email: string,
): Promise<MemberRow | null> {
  const row = await membersOf(trx, labId)
    .where("a.email", "=", email.toLowerCase())
    .executeTakeFirst();
  return row ?? null;
}

/** Makes the account a member, or one again. */
export async function addMember(
  trx: Trx,
  member: { labId: string; accountId: string; roles: Role[] },
): Promise<void> {
  await trx
    .insertInto("memberships")
    .values({ lab_id: member.labId, account_id: member.accountId, roles: member.roles })
    .onConflict((conflict) =>
      conflict
        .columns(["lab_id", "account_id"])
        .doUpdateSet({ roles: member.roles, removed_at: null }),
    )
    .execute();
}

/** The database refuses at commit where the last admin would be lost. */
export async function setRoles(
  trx: Trx,
  labId: string,
  accountId: string,
  roles: Role[],
): Promise<void> {
  await trx
    .updateTable("memberships")
    .set({ roles })
    .where("lab_id", "=", labId)
    .where("account_id", "=", accountId)
    .where("removed_at", "is", null)
    .execute();
}

/** The row stays, so that the trail goes on naming the person. */
export async function removeMember(trx: Trx, labId: string, accountId: string): Promise<void> {
  await trx
    .updateTable("memberships")
    .set({ removed_at: new Date() })
    .where("lab_id", "=", labId)
    .where("account_id", "=", accountId)
    .where("removed_at", "is", null)
    .execute();
}

/** Names by account id, former members too. */
export async function listNames(
  trx: Trx,
  accountIds: readonly (string | null)[],
): Promise<Map<string, string>> {
  const wanted = [...new Set(accountIds.filter((id) => id !== null))];
  if (wanted.length === 0) return new Map();
  const rows = await trx
    .selectFrom("accounts")
    .select(["id", "name"])
    .where("id", "in", wanted)
    .execute();
  return new Map(rows.map((row) => [row.id, row.name]));
}

function membersOf(trx: Trx, labId: string) {
  return trx
    .selectFrom("memberships as m")
    .innerJoin("accounts as a", "a.id", "m.account_id")
    .select(["a.id as accountId", "a.name", "a.email", "m.roles", "m.created_at as createdAt"])
    .where("m.lab_id", "=", labId)
    .where("m.removed_at", "is", null);
}
