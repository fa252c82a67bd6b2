/** Uploads under way. */
import { sql, type Selectable } from "kysely";
import type { ColumnChoice } from "../../lib/series/table-columns";
import type { Db, Trx } from "../client";
import type { UploadsTable } from "../schema/uploads";

export type UploadRow = Selectable<UploadsTable>;

export async function createUpload(
  trx: Trx,
  labId: string,
  upload: {
    id: string;
    seriesId: string;
    slot: string | null;
    channel: number;
    columns?: ColumnChoice | null;
    fileName: string;
    bytes: number;
    accountId: string;
    tokenId: string | null;
    expiresAt: Date;
  },
): Promise<void> {
  await trx
    .insertInto("uploads")
    .values({
      id: upload.id,
      lab_id: labId,
      series_id: upload.seriesId,
      slot: upload.slot,
      channel: upload.channel,
      columns: upload.columns == null ? null : JSON.stringify(upload.columns),
      file_name: upload.fileName,
      bytes: upload.bytes,
      account_id: upload.accountId,
      token_id: upload.tokenId,
      expires_at: upload.expiresAt,
    })
    .execute();
}

export async function findUpload(trx: Trx, labId: string, id: string): Promise<UploadRow | null> {
  const row = await trx
    .selectFrom("uploads")
    .selectAll()
    .where("lab_id", "=", labId)
    .where("id", "=", id)
    .executeTakeFirst();
  return row ?? null;
}

/** As findUpload; whoever else wants to finish it waits for the end of the transaction. */
export async function lockUpload(trx: Trx, labId: string, id: string): Promise<UploadRow | null> {
  const row = await trx
    .selectFrom("uploads")
    .selectAll()
    .where("lab_id", "=", labId)
    .where("id", "=", id)
    .forUpdate()
    .executeTakeFirst();
  return row ?? null;
}

/** Unfinished and unexpired ones of a series, oldest first. */
export async function listUploads(trx: Trx, labId: string, seriesId: string): Promise<UploadRow[]> {
  return trx
    .selectFrom("uploads")
    .selectAll()
    .where("lab_id", "=", labId)
    .where("series_id", "=", seriesId)
    .where("finished_at", "is", null)
    .where("expires_at", ">", sql<Date>`now()`)
    .orderBy("created_at")
    .execute();
}

export async function setReceived(
  trx: Trx,
  labId: string,
  id: string,
  received: number,
): Promise<void> {
  await trx
    .updateTable("uploads")
    .set({ received })
    .where("lab_id", "=", labId)
    .where("id", "=", id)
    .execute();
}

/** It has become this run. */
export async function finishUpload(
  trx: Trx,
  labId: string,
  id: string,
  runId: string,
): Promise<void> {
  await trx
    .updateTable("uploads")
    .set({ finished_at: new Date(), run_id: runId, received: sql<number>`bytes` })
    .where("lab_id", "=", labId)
    .where("id", "=", id)
    .execute();
}

export async function deleteUpload(trx: Trx, labId: string, id: string): Promise<void> {
  await trx.deleteFrom("uploads").where("lab_id", "=", labId).where("id", "=", id).execute();
}

/** What is left of uploads to a series without recordings: ended, or past their day. */
export async function deleteUploadsOf(trx: Trx, labId: string, seriesId: string): Promise<void> {
  await trx
    .deleteFrom("uploads")
    .where("lab_id", "=", labId)
    .where("series_id", "=", seriesId)
    .execute();
}

/** Over all labs: for the sweep. */
export async function findExpiredUploads(db: Db): Promise<{ labId: string; uploadId: string }[]> {
  const { rows } = await sql<{
    lab_id: string;
    upload_id: string;
  }>`select lab_id, upload_id from find_expired_uploads()`.execute(db);
  return rows.map((row) => ({ labId: row.lab_id, uploadId: row.upload_id }));
}
