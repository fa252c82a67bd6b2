/** Private links for the maker, what the maker says through them, and the lab's answers. */
import { createSecret, digestSecret } from "../../lib/account/secrets";
import { AppError } from "../../lib/errors/app-error";
import { toSnapshotText } from "../../lib/publication/canonical";
import type { PublicationWords } from "../../lib/publication/to-snapshot";
import type { Trx } from "../client";
import type { LabScope } from "../in-lab";
import { recordEvent } from "../queries/audit";
import { notifyChange } from "../queries/changes";
import {
  addMakerComment,
  answerMakerComment as answerRow,
  createPreview as createRow,
  getMakerComment,
  getPreview,
  revokePreview as revokeRow,
} from "../queries/previews";
import { lockSeries } from "../queries/series";
import { noticeMakerComment } from "./notices";
import { draftSnapshot } from "./publish";

const DAY_MS = 86_400_000;

/** @returns id and the link's secret, which is nowhere else. @throws AppError as draftSnapshot */
export async function createPreview(
  trx: Trx,
  by: LabScope & { accountId: string },
  seriesId: string,
  preview: { words: PublicationWords; forWhom: string; days: number },
): Promise<{ id: string; secret: string }> {
  await lockSeries(trx, by.labId, seriesId);
  const now = new Date();
  const { snapshot, signOffId } = await draftSnapshot(trx, by, seriesId, {
    words: preview.words,
    slug: null,
    changeNote: null,
    at: now,
  });
  const secret = createSecret();
  const expiresAt = new Date(now.getTime() + preview.days * DAY_MS);
  const id = await createRow(trx, by.labId, {
    seriesId,
    signOffId,
    tokenHash: digestSecret(secret),
    forWhom: preview.forWhom,
    snapshot: toSnapshotText(snapshot),
    createdBy: by.accountId,
    expiresAt,
  });
  await recordEvent(trx, by, {
    act: "preview.created",
    subjectType: "preview",
    subjectId: id,
    seriesId,
    details: { for_whom: preview.forWhom, expires_at: expiresAt.toISOString() },
  });
  await notifyChange(trx, { labId: by.labId, seriesId });
  return { id, secret };
}

/** @throws AppError "not-found"; "conflict.state" where it was revoked before */
export async function revokePreview(trx: Trx, by: LabScope, previewId: string): Promise<void> {
  const row = await getPreview(trx, by.labId, previewId);
  if (!(await revokeRow(trx, by.labId, previewId))) {
    throw new AppError("conflict.state", "This link is revoked already.");
  }
  await recordEvent(trx, by, {
    act: "preview.revoked",
    subjectType: "preview",
    subjectId: previewId,
    seriesId: row.series_id,
    details: { for_whom: row.for_whom },
  });
  await notifyChange(trx, { labId: by.labId, seriesId: row.series_id });
}

/** What somebody without an account says through a link. */
export async function commentAsMaker(
  trx: Trx,
  labId: string,
  previewId: string,
  comment: { name: string; email: string; words: string },
): Promise<void> {
  const { series_id: seriesId } = await getPreview(trx, labId, previewId);
  const id = await addMakerComment(trx, labId, { seriesId, previewId, ...comment });
  const by = { labId, accountId: null };
  await recordEvent(trx, by, {
    act: "maker.commented",
    subjectType: "maker-comment",
    subjectId: id,
    seriesId,
    details: { name: comment.name },
  });
  await noticeMakerComment(trx, by, seriesId, { from: comment.name, words: comment.words });
  await notifyChange(trx, { labId, seriesId });
}

/** @throws AppError "not-found" */
export async function answerMakerComment(
  trx: Trx,
  by: LabScope & { accountId: string },
  commentId: string,
  words: string,
): Promise<void> {
  const row = await getMakerComment(trx, by.labId, commentId);
  await answerRow(trx, by.labId, commentId, { words, accountId: by.accountId });
  await recordEvent(trx, by, {
    act: "maker.answered",
    subjectType: "maker-comment",
    subjectId: commentId,
    seriesId: row.series_id,
    details: { name: row.name },
  });
  await notifyChange(trx, { labId: by.labId, seriesId: row.series_id });
}
