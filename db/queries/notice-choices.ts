/** Which notices a member wants by mail. Where nothing was chosen, it comes. */
import type { NoticeKind } from "../../lib/mail/notices";
import type { Role } from "../../lib/roles/roles";
import type { Trx } from "../client";

/** Kinds that the member does not want. */
export async function listUnwanted(
  trx: Trx,
  labId: string,
  accountId: string,
): Promise<ReadonlySet<string>> {
  const rows = await trx
    .selectFrom("notice_choices")
    .select("kind")
    .where("lab_id", "=", labId)
    .where("account_id", "=", accountId)
    .where("wanted", "=", false)
    .execute();
  return new Set(rows.map((row) => row.kind));
}

export async function chooseNotice(
  trx: Trx,
  choice: { labId: string; accountId: string; kind: NoticeKind; wanted: boolean },
): Promise<void> {
  await trx
    .insertInto("notice_choices")
    .values({
      lab_id: choice.labId,
      account_id: choice.accountId,
      kind: choice.kind,
      wanted: choice.wanted,
    })
    .onConflict((conflict) =>
      conflict.columns(["lab_id", "account_id", "kind"]).doUpdateSet({ wanted: choice.wanted }),
    )
    .execute();
}

/** Members with one of the roles who want the notice. @param except who did it knows of it */
export async function listRecipients(
  trx: Trx,
  labId: string,
  notice: { kind: NoticeKind; roles: readonly Role[]; except: string | null },
): Promise<{ accountId: string; email: string }[]> {
  const members = await trx
    .selectFrom("memberships as m")
    .innerJoin("accounts as a", "a.id", "m.account_id")
    .leftJoin("notice_choices as c", (join) =>
      join
        .onRef("c.lab_id", "=", "m.lab_id")
        .onRef("c.account_id", "=", "m.account_id")
        .on("c.kind", "=", notice.kind),
    )
    .select(["a.id as accountId", "a.email", "m.roles", "c.wanted"])
    .where("m.lab_id", "=", labId)
    .where("m.removed_at", "is", null)
    .where("a.disabled_at", "is", null)
    .orderBy("a.email")
    .execute();
  return members
    .filter(
      ({ accountId, roles, wanted }) =>
        accountId !== notice.except &&
        wanted !== false &&
        roles.some((role) => notice.roles.includes(role)),
    )
    .map(({ accountId, email }) => ({ accountId, email }));
}
