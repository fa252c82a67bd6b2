/** Series of a lab: one at a time. The list is in series-list.ts. */
import { sql, type Selectable } from "kysely";
import type { Failure } from "../../lib/api/series";
import { AppError } from "../../lib/errors/app-error";
import type { Plan } from "../../lib/series/plan-schema";
import type { SeriesState } from "../../lib/series/vocabulary";
import type { Trx } from "../client";
import type { ListSummary, SeriesTable } from "../schema/series";

export type SeriesRow = Selectable<SeriesTable>;
export type SeriesWithNames = SeriesRow & { createdByName: string | null };

/** S-0231 from 231. */
export function toSeriesNumber(number: number): string {
  return `S-${String(number).padStart(4, "0")}`;
}

/** @throws AppError "not-found" */
export async function getSeries(
  trx: Trx,
  labId: string,
  seriesId: string,
): Promise<SeriesWithNames> {
  const row = await trx
    .selectFrom("series as s")
    .leftJoin("accounts as a", "a.id", "s.created_by")
    .selectAll("s")
    .select("a.name as createdByName")
    .where("s.lab_id", "=", labId)
    .where("s.id", "=", seriesId)
    .executeTakeFirst();
  if (row === undefined) throw noSuchSeries();
  return row;
}

export async function findSeries(
  trx: Trx,
  labId: string,
  seriesId: string,
): Promise<SeriesRow | null> {
  const row = await trx
    .selectFrom("series")
    .selectAll()
    .where("lab_id", "=", labId)
    .where("id", "=", seriesId)
    .executeTakeFirst();
  return row ?? null;
}

/** Ids, oldest first; archived ones too. */
export async function listSeriesOfLoudspeaker(
  trx: Trx,
  labId: string,
  loudspeakerId: string,
): Promise<string[]> {
  const rows = await trx
    .selectFrom("series")
    .select("id")
    .where("lab_id", "=", labId)
    .where("loudspeaker_id", "=", loudspeakerId)
    .orderBy("number")
    .execute();
  return rows.map((row) => row.id);
}

/**
 * Holds the series until the transaction ends: whoever derives its state from its runs does so one
 * after the other.
 *
 * @throws AppError "not-found"
 */
export async function lockSeries(trx: Trx, labId: string, seriesId: string): Promise<SeriesRow> {
  const row = await trx
    .selectFrom("series")
    .selectAll()
    .where("lab_id", "=", labId)
    .where("id", "=", seriesId)
    .forUpdate()
    .executeTakeFirst();
  if (row === undefined) throw noSuchSeries();
  return row;
}

/** Gives the series the next number of its lab. */
export async function createSeries(
  trx: Trx,
  labId: string,
  accountId: string,
  series: { loudspeakerId: string; plan: Plan },
): Promise<{ id: string; number: number }> {
  const counter = await trx
    .insertInto("series_counters")
    .values({ lab_id: labId, last_number: 1 })
    .onConflict((conflict) =>
      conflict
        .column("lab_id")
        .doUpdateSet({ last_number: sql<number>`series_counters.last_number + 1` }),
    )
    .returning("last_number")
    .executeTakeFirstOrThrow();
  const row = await trx
    .insertInto("series")
    .values({
      lab_id: labId,
      number: counter.last_number,
      loudspeaker_id: series.loudspeakerId,
      plan: JSON.stringify(series.plan),
      created_by: accountId,
      changed_by: accountId,
    })
    .returning("id")
    .executeTakeFirstOrThrow();
  return { id: row.id, number: counter.last_number };
}

/**
 * @param change.planVersion the one that the writer read.
 * @throws AppError "conflict.changed" where somebody else was quicker; "not-found"
 */
export async function updatePlan(
  trx: Trx,
  labId: string,
  accountId: string,
  change: { seriesId: string; plan: Plan; planVersion: number },
): Promise<void> {
  const row = await trx
    .updateTable("series")
    .set({
      plan: JSON.stringify(change.plan),
      plan_version: change.planVersion + 1,
      changed_at: new Date(),
      changed_by: accountId,
    })
    .where("lab_id", "=", labId)
    .where("id", "=", change.seriesId)
    .where("plan_version", "=", change.planVersion)
    .returning("id")
    .executeTakeFirst();
  if (row !== undefined) return;
  const now = await getSeries(trx, labId, change.seriesId);
  throw new AppError(
    "conflict.changed",
    "Somebody else changed the plan meanwhile. Load it again and repeat your change.",
    { details: { plan_version: now.plan_version } },
  );
}

/** Anything left out stays as it is. A worker has no account and leaves `changed_by`. */
export async function updateSeries(
  trx: Trx,
  labId: string,
  seriesId: string,
  change: {
    state?: SeriesState;
    failure?: Failure | null;
    listSummary?: ListSummary | null;
    reachedDb?: number | null;
    changedBy?: string;
    archivedAt?: Date | null;
  },
): Promise<void> {
  await trx
    .updateTable("series")
    .set({
      changed_at: new Date(),
      ...(change.state === undefined ? {} : { state: change.state }),
      ...(change.failure === undefined ? {} : { failure: toJson(change.failure) }),
      ...(change.listSummary === undefined ? {} : { list_summary: toJson(change.listSummary) }),
      ...(change.reachedDb === undefined ? {} : { reached_db: change.reachedDb }),
      ...(change.changedBy === undefined ? {} : { changed_by: change.changedBy }),
      ...(change.archivedAt === undefined ? {} : { archived_at: change.archivedAt }),
    })
    .where("lab_id", "=", labId)
    .where("id", "=", seriesId)
    .execute();
}

/** Only for a series without runs and uploads: their foreign keys refuse otherwise. */
export async function deleteSeries(trx: Trx, labId: string, seriesId: string): Promise<void> {
  await trx.deleteFrom("series").where("lab_id", "=", labId).where("id", "=", seriesId).execute();
}

const toJson = (value: unknown): string | null => (value === null ? null : JSON.stringify(value));

const noSuchSeries = (): AppError => new AppError("not-found", "There is no such series.");
