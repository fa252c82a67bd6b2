/** Private links for the maker, and the comments left through them. */
import { sql, type Selectable } from "kysely";
import { AppError } from "../../lib/errors/app-error";
import type { Db, Trx } from "../client";
import type { MakerCommentsTable, PreviewsTable } from "../schema/publications";

export type PreviewRow = Omit<Selectable<PreviewsTable>, "snapshot" | "token_hash"> & {
  createdByName: string | null;
};
export type MakerCommentRow = Selectable<MakerCommentsTable> & { answeredByName: string | null };

export async function createPreview(
  trx: Trx,
  labId: string,
  preview: {
    seriesId: string;
    signOffId: string;
    tokenHash: string;
    forWhom: string;
    snapshot: string;
    createdBy: string;
    expiresAt: Date;
  },
): Promise<string> {
  const row = await trx
    .insertInto("previews")
    .values({
      lab_id: labId,
      series_id: preview.seriesId,
      sign_off_id: preview.signOffId,
      token_hash: preview.tokenHash,
      for_whom: preview.forWhom,
      snapshot: preview.snapshot,
      created_by: preview.createdBy,
      expires_at: preview.expiresAt,
    })
    .returning("id")
    .executeTakeFirstOrThrow();
  return row.id;
}

/** Newest first. */
export async function listPreviews(
  trx: Trx,
  labId: string,
  seriesId: string,
): Promise<PreviewRow[]> {
  return previewsOf(trx, labId)
    .where("p.series_id", "=", seriesId)
    .orderBy("p.created_at", "desc")
    .execute();
}

/** @throws AppError "not-found" */
export async function getPreview(trx: Trx, labId: string, previewId: string): Promise<PreviewRow> {
  const row = await previewsOf(trx, labId).where("p.id", "=", previewId).executeTakeFirst();
  if (row === undefined) throw new AppError("not-found", "There is no such link.");
  return row;
}

/** @throws AppError "not-found" */
export async function getPreviewSnapshot(
  trx: Trx,
  labId: string,
  previewId: string,
): Promise<string> {
  const row = await trx
    .selectFrom("previews")
    .select("snapshot")
    .where("lab_id", "=", labId)
    .where("id", "=", previewId)
    .executeTakeFirst();
  if (row === undefined) throw new AppError("not-found", "There is no such link.");
  return row.snapshot;
}

/** @returns false where it was revoked before. */
export async function revokePreview(trx: Trx, labId: string, previewId: string): Promise<boolean> {
  const row = await trx
    .updateTable("previews")
    .set({ revoked_at: new Date() })
    .where("lab_id", "=", labId)
    .where("id", "=", previewId)
    .where("revoked_at", "is", null)
    .returning("id")
    .executeTakeFirst();
  return row !== undefined;
}

/** Ids behind a link that is neither revoked nor expired. */
export async function findPreview(
  db: Db,
  tokenHash: string,
): Promise<{ labId: string; previewId: string } | null> {
  const { rows } = await sql<{ lab_id: string; preview_id: string }>`
    select lab_id, preview_id from find_preview(${tokenHash})`.execute(db);
  const row = rows[0];
  return row === undefined ? null : { labId: row.lab_id, previewId: row.preview_id };
}

export async function addMakerComment(
  trx: Trx,
  labId: string,
  comment: { seriesId: string; previewId: string; name: string; email: string; words: string },
): Promise<string> {
  const row = await trx
    .insertInto("maker_comments")
    .values({
      lab_id: labId,
      series_id: comment.seriesId,
      preview_id: comment.previewId,
      name: comment.name,
      email: comment.email,
      words: comment.words,
    })
    .returning("id")
    .executeTakeFirstOrThrow();
  return row.id;
}

/** Oldest first. @param previewId only those left through this link */
export async function listMakerComments(
  trx: Trx,
  labId: string,
  seriesId: string,
  previewId?: string,
): Promise<MakerCommentRow[]> {
  return commentsOf(trx, labId)
    .where("c.series_id", "=", seriesId)
    .$if(previewId !== undefined, (rows) => rows.where("c.preview_id", "=", previewId ?? ""))
    .orderBy("c.written_at")
    .orderBy("c.id")
    .execute();
}

/** @throws AppError "not-found" */
export async function getMakerComment(
  trx: Trx,
  labId: string,
  commentId: string,
): Promise<MakerCommentRow> {
  const row = await commentsOf(trx, labId).where("c.id", "=", commentId).executeTakeFirst();
  if (row === undefined) throw new AppError("not-found", "There is no such comment.");
  return row;
}

export async function answerMakerComment(
  trx: Trx,
  labId: string,
  commentId: string,
  answer: { words: string; accountId: string },
): Promise<void> {
  await trx
    .updateTable("maker_comments")
    .set({ answer: answer.words, answered_by: answer.accountId, answered_at: new Date() })
    .where("lab_id", "=", labId)
    .where("id", "=", commentId)
    .execute();
}

function previewsOf(trx: Trx, labId: string) {
  return trx
    .selectFrom("previews as p")
    .leftJoin("accounts as a", "a.id", "p.created_by")
    .select([
      "p.id",
      "p.lab_id",
      "p.series_id",
      "p.sign_off_id",
      "p.for_whom",
      "p.created_by",
      "p.created_at",
      "p.expires_at",
      "p.revoked_at",
      "a.name as createdByName",
    ])
    .where("p.lab_id", "=", labId);
}

function commentsOf(trx: Trx, labId: string) {
  return trx
    .selectFrom("maker_comments as c")
    .leftJoin("accounts as a", "a.id", "c.answered_by")
    .selectAll("c")
    .select("a.name as answeredByName")
    .where("c.lab_id", "=", labId);
}
