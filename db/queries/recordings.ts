/** What lies in storage for a lab, by digest. */
import { sql, type Selectable } from "kysely";
import type { Db, Trx } from "../client";
import type { RecordingsTable } from "../schema/recordings";

export type RecordingRow = Selectable<RecordingsTable>;

/** The same bytes twice are one recording. */
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
    .onConflict((conflict) => conflict.columns(["lab_id", "digest"]).doNothing())
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
