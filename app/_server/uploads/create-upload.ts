/** The creation of an upload: metadata, series, size and room, before the first byte. */
import { requireOpen } from "../../../db/acts/act-on-run";
import { getLab } from "../../../db/queries/labs";
import { getSeries } from "../../../db/queries/series";
import { createUpload as insertUpload } from "../../../db/queries/uploads";
import type { Trx } from "../../../db/client";
import { UPLOAD_LIFETIME_MS } from "../../../lib/api/uploads";
import { uploadMetadataSchema, type UploadMetadata } from "../../../lib/api/runs";
import { LARGEST_TABLE_BYTES, toTooLarge } from "../../../lib/audio/table-rows";
import { AppError, FileError } from "../../../lib/errors/app-error";
import { toInputError } from "../../../lib/http/problem";
import { labSettingsSchema } from "../../../lib/labs/settings-schema";
import { isTableName } from "../../../lib/series/table-columns";
import type { LabCaller } from "../caller";

export interface CreationLimits {
  /** Of the installation. */
  maxUploadBytes: number;
  now: Date;
}

/** @throws AppError "request.invalid" field by field */
export function parseMetadata(metadata: Record<string, string | null> | undefined): UploadMetadata {
  try {
    return uploadMetadataSchema.parse(
      Object.fromEntries(
        Object.entries(metadata ?? {}).filter(([, value]) => value !== null && value !== ""),
      ),
    );
  } catch (error) {
    throw toInputError(error);
  }
}

/**
 * @throws AppError "not-found", "conflict.state", "upload.too-large"; FileError "audio.empty", "table.too-large"
 */
export async function createUpload(
  trx: Trx,
  caller: LabCaller,
  upload: { id: string; bytes: number; metadata: UploadMetadata },
  limits: CreationLimits,
): Promise<void> {
  const { metadata, bytes } = upload;
  const series = await getSeries(trx, caller.labId, metadata.seriesId);
  requireOpen({ series });
  if (bytes === 0) {
    throw new FileError("audio.empty", `${metadata.fileName} is empty: it holds no bytes.`, {
      file: metadata.fileName,
    });
  }
  if (isTableName(metadata.fileName) && bytes > LARGEST_TABLE_BYTES) {
    throw toTooLarge(bytes, metadata.fileName);
  }
  const lab = await getLab(trx, caller.labId);
  const own = labSettingsSchema.parse(lab.settings).max_upload_mb;
  const limit = Math.min(limits.maxUploadBytes, own === null ? Infinity : own * 1_000_000);
  if (bytes > limit) {
    const toMb = (size: number): string => `${(size / 1_000_000).toFixed(1)} MB`;
    throw new AppError(
      "upload.too-large",
      `${metadata.fileName} has ${toMb(bytes)}; up to ${toMb(limit)} are taken. Cut it to the sweep, or ask the admin of your lab to raise the limit.`,
      { file: metadata.fileName, details: { bytes, limit_bytes: limit } },
    );
  }
  await insertUpload(trx, caller.labId, {
    id: upload.id,
    seriesId: metadata.seriesId,
    slot: metadata.slot ?? null,
    channel: metadata.channel ?? 1,
    columns: metadata.columns ?? null,
    fileName: metadata.fileName,
    bytes,
    accountId: caller.accountId,
    tokenId: caller.tokenId,
    expiresAt: new Date(limits.now.getTime() + UPLOAD_LIFETIME_MS),
  });
}
