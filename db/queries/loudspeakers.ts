/** Loudspeakers of a lab. */
import { sql, type Selectable } from "kysely";
import { AppError } from "../../lib/errors/app-error";
import type { Trx } from "../client";
import type { LoudspeakersTable } from "../schema/loudspeakers";

export type LoudspeakerRow = Selectable<LoudspeakersTable> & {
  seriesCount: number;
  createdByName: string | null;
};

export interface LoudspeakerFields {
  maker: string;
  model: string;
  serial: string;
  kind: string;
  largest_dimension_m: number | null;
  tuning_hz: number | null;
}

/** By name. @param search words that all occur in maker, model, serial or kind. */
export async function listLoudspeakers(
  trx: Trx,
  labId: string,
  search = "",
): Promise<LoudspeakerRow[]> {
  let query = loudspeakersOf(trx, labId).where("l.archived_at", "is", null);
  for (const word of toWords(search)) {
    query = query.where(
      sql<boolean>`position(${word} in lower(concat_ws(' ', l.maker, l.model, l.serial, l.kind))) > 0`,
    );
  }
  return query
    .orderBy(sql`lower(l.maker || ' ' || l.model)`)
    .orderBy("l.id")
    .execute();
}

/** @throws AppError "not-found" */
export async function getLoudspeaker(
  trx: Trx,
  labId: string,
  loudspeakerId: string,
): Promise<LoudspeakerRow> {
  const row = await loudspeakersOf(trx, labId).where("l.id", "=", loudspeakerId).executeTakeFirst();
  if (row === undefined) throw new AppError("not-found", "There is no such loudspeaker.");
  return row;
}

export async function createLoudspeaker(
  trx: Trx,
  labId: string,
  accountId: string,
  fields: LoudspeakerFields,
): Promise<string> {
  const row = await trx
    .insertInto("loudspeakers")
    .values({ ...fields, lab_id: labId, created_by: accountId })
    .returning("id")
    .executeTakeFirstOrThrow();
  return row.id;
}

/** @throws AppError "not-found" */
export async function updateLoudspeaker(
  trx: Trx,
  labId: string,
  loudspeakerId: string,
  change: Partial<LoudspeakerFields> & { photo_digest?: string | null },
): Promise<void> {
  const row = await trx
    .updateTable("loudspeakers")
    .set({ ...change, changed_at: new Date() })
    .where("lab_id", "=", labId)
    .where("id", "=", loudspeakerId)
    .returning("id")
    .executeTakeFirst();
  if (row === undefined) throw new AppError("not-found", "There is no such loudspeaker.");
}

/** Words of a search, lower case, eight at most. */
export function toWords(search: string): string[] {
  return search
    .toLowerCase()
    .split(/\s+/)
    .filter((word) => word !== "")
    .slice(0, 8);
}

function loudspeakersOf(trx: Trx, labId: string) {
  return trx
    .selectFrom("loudspeakers as l")
    .leftJoin("accounts as a", "a.id", "l.created_by")
    .selectAll("l")
    .select("a.name as createdByName")
    .select((eb) =>
      eb
        .selectFrom("series as s")
        .select((count) => count.fn.countAll<number>().as("n"))
        .whereRef("s.loudspeaker_id", "=", "l.id")
        .where("s.lab_id", "=", labId)
        .where("s.archived_at", "is", null)
        .$asScalar()
        .$notNull()
        .as("seriesCount"),
    )
    .where("l.lab_id", "=", labId);
}
