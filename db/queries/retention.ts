/** Recordings of archived series: which may be removed, and what holds the others. */
import { sql, type RawBuilder } from "kysely";
import type { Db, Trx } from "../client";

export interface ArchivedSeries {
  seriesId: string;
  number: number;
  loudspeaker: string;
  archivedAt: Date;
  /** Recordings that nothing holds, and their bytes. */
  removable: number;
  removableBytes: number;
  /** Recordings that a publication cites: never removed. */
  cited: number;
  /** Recordings that another series or a loudspeaker shows, too. */
  shared: number;
}

/**
 * Recordings of archived series whose bytes are there, one row per series and digest.
 *
 * @param dueBefore a series archived before it gives its hold up; null: every other series holds.
 */
const archivedRecordings = (labId: string, dueBefore: Date | null): RawBuilder<unknown> => sql`
  with cited as (
    select distinct f.value ->> 'digest' as digest
    from publications p
    join sign_offs o on o.lab_id = p.lab_id and o.id = p.sign_off_id
    join analyses n on n.lab_id = o.lab_id and n.id = o.analysis_id
    cross join lateral json_array_elements(n.inputs -> 'files') f
    where p.lab_id = ${labId}
  ), held as (
    select r.series_id, r.digest from runs r where r.lab_id = ${labId}
    union
    select s.id, s.plan -> 'microphone' ->> 'digest' from series s
    where s.lab_id = ${labId} and s.plan -> 'microphone' ->> 'digest' is not null
  )
  select s.id as series_id, s.number, s.loudspeaker_name, s.archived_at, f.digest, f.bytes,
    exists (select from cited c where c.digest = f.digest) as cited,
    exists (select from loudspeakers l where l.lab_id = s.lab_id and l.photo_digest = f.digest)
      or exists (select from held h join series o on o.lab_id = s.lab_id and o.id = h.series_id
        where h.digest = f.digest and o.id <> s.id
          and (o.archived_at is null or ${dueBefore}::timestamptz is null
               or o.archived_at > ${dueBefore}::timestamptz)) as shared
  from series s
  join held h on h.series_id = s.id
  join recordings f on f.lab_id = s.lab_id and f.digest = h.digest and f.removed_at is null
  where s.lab_id = ${labId} and s.archived_at is not null`;

/** Longest in the archive first; those without recordings are left out. */
export async function listArchivedSeries(
  trx: Trx,
  labId: string,
  { dueBefore, limit }: { dueBefore: Date | null; limit: number },
): Promise<ArchivedSeries[]> {
  const { rows } = await sql<{
    series_id: string;
    number: number;
    loudspeaker_name: string;
    archived_at: Date;
    removable: number;
    removable_bytes: number;
    cited: number;
    shared: number;
  }>`select series_id, number, loudspeaker_name, archived_at,
      count(*) filter (where not cited and not shared)::int as removable,
      coalesce(sum(bytes) filter (where not cited and not shared), 0)::float8 as removable_bytes,
      count(*) filter (where cited)::int as cited,
      count(*) filter (where shared and not cited)::int as shared
    from (${archivedRecordings(labId, dueBefore)}) a
    group by series_id, number, loudspeaker_name, archived_at
    order by archived_at, number limit ${limit}`.execute(trx);
  return rows.map((row) => ({
    seriesId: row.series_id,
    number: row.number,
    loudspeaker: row.loudspeaker_name,
    archivedAt: row.archived_at,
    removable: row.removable,
    removableBytes: row.removable_bytes,
    cited: row.cited,
    shared: row.shared,
  }));
}

/** Of one archived series: what may go, and how many a publication or another series holds. */
export async function findRemovable(
  trx: Trx,
  labId: string,
  seriesId: string,
  dueBefore: Date | null,
): Promise<{ removable: { digest: string; bytes: number }[]; kept: number }> {
  const { rows } = await sql<{ digest: string; bytes: number; free: boolean }>`
    select digest, bytes::float8 as bytes, not cited and not shared as free
    from (${archivedRecordings(labId, dueBefore)}) a
    where series_id = ${seriesId} order by digest`.execute(trx);
  const removable = rows.filter((row) => row.free).map(({ digest, bytes }) => ({ digest, bytes }));
  return { removable, kept: rows.length - removable.length };
}

/** Holds the rows of what the series shows until the transaction ends. */
export async function lockRecordingsOf(trx: Trx, labId: string, seriesId: string): Promise<void> {
  await sql`select f.digest from recordings f
    where f.lab_id = ${labId} and f.digest in (
      select r.digest from runs r where r.lab_id = ${labId} and r.series_id = ${seriesId}
      union select s.plan -> 'microphone' ->> 'digest' from series s
        where s.lab_id = ${labId} and s.id = ${seriesId})
    order by f.digest for update of f`.execute(trx);
}

/** The rows stay; a sweep takes the bytes that no lab holds any more. */
export async function markRemoved(
  trx: Trx,
  labId: string,
  digests: readonly string[],
  at: Date,
): Promise<void> {
  if (digests.length === 0) return;
  await trx
    .updateTable("recordings")
    .set({ removed_at: at })
    .where("lab_id", "=", labId)
    .where("digest", "in", digests)
    .where("removed_at", "is", null)
    .execute();
}

/** Whether bytes of a recording of the series were removed. */
export async function hasRemovedRecordings(
  trx: Trx,
  labId: string,
  seriesId: string,
): Promise<boolean> {
  const row = await trx
    .selectFrom("runs as r")
    .innerJoin("recordings as f", (join) =>
      join.onRef("f.lab_id", "=", "r.lab_id").onRef("f.digest", "=", "r.digest"),
    )
    .select("r.id")
    .where("r.lab_id", "=", labId)
    .where("r.series_id", "=", seriesId)
    .where("f.removed_at", "is not", null)
    .limit(1)
    .executeTakeFirst();
  return row !== undefined;
}

/** Labs that set a retention: for the worker. */
export async function findLabsWithRetention(db: Db): Promise<string[]> {
  const { rows } = await sql<{ lab_id: string }>`
    select lab_id from find_labs_with_retention()`.execute(db);
  return rows.map((row) => row.lab_id);
}
