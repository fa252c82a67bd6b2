/** Labs: the tenants. */
import type { Selectable } from "kysely";
import { isUniqueViolation } from "../database-error";
import { AppError } from "../../lib/errors/app-error";
import type { LabSettings } from "../../lib/labs/settings-schema";
import type { Role } from "../../lib/roles/roles";
import type { Db, Trx } from "../client";
import type { LabsTable } from "../schema/labs";

export type LabRow = Selectable<LabsTable>;

/** @throws AppError "not-found" */
export async function getLab(trx: Trx, labId: string): Promise<LabRow> {
  const row = await trx.selectFrom("labs").selectAll().where("id", "=", labId).executeTakeFirst();
  if (row === undefined) throw new AppError("not-found", "There is no such lab.");
  return row;
}

/** The same, held against other changes until the transaction ends. @throws AppError "not-found" */
export async function lockLab(trx: Trx, labId: string): Promise<LabRow> {
  await trx.selectFrom("labs").select("id").where("id", "=", labId).forUpdate().execute();
  return getLab(trx, labId);
}

/** Labs of the account that the transaction carries, by name. */
export async function listLabsOfAccount(
  trx: Trx,
  accountId: string,
): Promise<{ id: string; slug: string; name: string; roles: Role[] }[]> {
  return trx
    .selectFrom("memberships as m")
    .innerJoin("labs as l", "l.id", "m.lab_id")
    .select(["l.id", "l.slug", "l.name", "m.roles"])
    .where("m.account_id", "=", accountId)
    .where("m.removed_at", "is", null)
    .orderBy("l.name")
    .execute();
}

export async function updateLab(
  trx: Trx,
  labId: string,
  change: { name?: string; timeZone?: string; settings?: LabSettings },
): Promise<void> {
  const set = {
    ...(change.name === undefined ? {} : { name: change.name }),
    ...(change.timeZone === undefined ? {} : { time_zone: change.timeZone }),
    ...(change.settings === undefined ? {} : { settings: JSON.stringify(change.settings) }),
  };
  if (Object.keys(set).length === 0) return;
  await trx.updateTable("labs").set(set).where("id", "=", labId).execute();
}

/**
 * @param owner database in the role of the owner: the web cannot found a lab.
 * @throws AppError "conflict.exists"
 */
export async function foundLab(
  owner: Db,
  lab: { id: string; slug: string; name: string; timeZone?: string },
): Promise<void> {
  try {
    await owner
      .insertInto("labs")
      .values({
        id: lab.id,
        slug: lab.slug,
        name: lab.name,
        ...(lab.timeZone === undefined ? {} : { time_zone: lab.timeZone }),
      })
      .execute();
  } catch (error) {
    if (!isUniqueViolation(error, "labs_slug_key")) throw error;
    throw new AppError("conflict.exists", `There is a lab "${lab.slug}" already.`, {
      cause: error,
    });
  }
}

/** @param owner database in the role of the owner. By slug. */
export async function listAllLabs(
  owner: Db,
): Promise<{ id: string; slug: string; name: string }[]> {
  return owner.selectFrom("labs").select(["id", "slug", "name"]).orderBy("slug").execute();
}
