/** What lies in storage for a lab, by digest. */
import { sql, type Selectable } from "kysely";
import type { Db, Trx } from "../client";
import type { RecordingsTable } from "../schema/recordings";

export type RecordingRow = Selectable<RecordingsTable>;

/** The same bytes twice are one recording; bytes that come again after their removal are there again. */
export async function keepRecording(
  trx: Trx,
  labId: string,
  recording: { digest: string; bytes: number; media: string },
): Promise<void> {
  await trx
    .insertInto("recordings")
    .values({
      lab_id: labId,
      digest: recording.digest,
      bytes: recording.bytes,
      media: recording.media,
    })
    .onConflict((conflict) =>
      conflict.columns(["lab_id", "digest"]).doUpdateSet({ removed_at: null }),
    )
    .execute();
}

export async function findRecording(
  trx: Trx,
  labId: string,
  digest: string,
): Promise<RecordingRow | null> {
  const row = await trx
    .selectFrom("recordings")
    .selectAll()
    .where("lab_id", "=", labId)
    .where("digest", "=", digest)
    .executeTakeFirst();
  return row ?? null;
}

/** Those of the digests that the lab knows, removed ones too. */
export async function listRecordings(
  trx: Trx,
  labId: string,
  digests: readonly string[],
): Promise<RecordingRow[]> {
  if (digests.length === 0) return [];
  return trx
    .selectFrom("recordings")
    .selectAll()
    .where("lab_id", "=", labId)
    .where("digest", "in", digests)
    .execute();
}

/** Fails by its foreign keys where a run or a photo still shows it. */
export async function dropRecording(trx: Trx, labId: string, digest: string): Promise<void> {
  await trx
    .deleteFrom("recordings")
    .where("lab_id", "=", labId)
    .where("digest", "=", digest)
    .execute();
}

/** Those of the digests that no lab holds, for the sweep of orphaned files. */
export async function findUnheldDigests(db: Db, digests: readonly string[]): Promise<string[]> {
  const { rows } = await sql<{
    digest: string;
  }>`select digest from find_unheld_digests(${digests}::text[])`.execute(db);
  return rows.map((row) => row.digest);
}

/** Takes the row of bytes that no run, photo or plan of the lab names any more; the sweep takes the bytes. */
export async function forgetRecording(trx: Trx, labId: string, digest: string): Promise<void> {
  await sql`delete from recordings f where f.lab_id = ${labId} and f.digest = ${digest}
    and not exists (select from runs r where r.lab_id = f.lab_id and r.digest = f.digest)
    and not exists (select from loudspeakers l where l.lab_id = f.lab_id and l.photo_digest = f.digest)
    and not exists (select from series s where s.lab_id = f.lab_id
                     and s.plan -> 'microphone' ->> 'digest' = f.digest)`.execute(trx);
}
