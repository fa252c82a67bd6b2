/**
 * From the last byte to a run. The order keeps row and bytes together whatever happens in between:
 *
 * 1. the staged file is held against what it claims to be, and its digest taken from the disk;
 * 2. the store takes the bytes by a link, on the disk for good; the staged name stays;
 * 3. one transaction writes recording, run, trail and the end of the upload;
 * 4. the staged name goes, and the workers are woken.
 *
 * A crash before 3 leaves an upload that is complete but not finished: the next request for it
 * finishes it. A crash after 3 leaves a run and a staged name that goes with its day.
 */
import { rm, stat } from "node:fs/promises";
import type { Db } from "../../../db/client";
import { inLab } from "../../../db/in-lab";
import { acceptRun } from "../../../db/acts/accept-run";
import { deleteUpload, finishUpload as endUpload, lockUpload } from "../../../db/queries/uploads";
import type { UploadRow } from "../../../db/queries/uploads";
import { readFileHead } from "../../../lib/audio/read-file-head";
import { withFileSource } from "../../../lib/audio/byte-source";
import { AppError, FileError } from "../../../lib/errors/app-error";
import type { FollowUp } from "../../../lib/jobs/follow-up";
import { digestFile } from "../../../lib/storage/digest-file";
import { isFileSystemError } from "../../../lib/storage/file-system-error";
import type { RecordingStore } from "../../../lib/storage/recording-store";
import { type LabCaller, toScope } from "../caller";

export interface FinishTools {
  db: Db;
  store: RecordingStore;
  stagedPath: (uploadId: string) => string;
  follow: (followUp: FollowUp) => Promise<void>;
}

/**
 * @returns the run it became, also where somebody else finished it just now.
 * @throws FileError "audio.*", "table.*": then nothing of the file stays; AppError "upload.offset",
 *   "upload.not-found", "storage.full"
 */
export async function finishUpload(
  { db, store, stagedPath, follow }: FinishTools,
  caller: LabCaller,
  upload: UploadRow,
): Promise<string> {
  if (upload.run_id !== null) return upload.run_id;
  const path = stagedPath(upload.id);
  await requireWhole(path, upload);
  try {
    const media = await withFileSource(path, (source) =>
      readFileHead(source, upload.file_name, upload.channel, upload.columns ?? undefined),
    );
    const digest = await digestFile(path);
    await store.put(path, digest);
    const scope = toScope(caller);
    const outcome = await inLab(db, scope, async (trx) => {
      const row = await lockUpload(trx, caller.labId, upload.id);
      if (row === null) throw noSuchUpload();
      if (row.run_id !== null) return { runId: row.run_id, followUp: null };
      const by = { ...scope, accountId: caller.accountId };
      const accepted = await acceptRun(trx, by, {
        seriesId: row.series_id,
        slot: row.slot,
        channel: row.channel,
        columns: row.columns,
        fileName: row.file_name,
        digest,
        bytes: row.bytes,
        media,
      });
      await endUpload(trx, caller.labId, upload.id, accepted.runId);
      return accepted;
    });
    await removeStaged(path);
    if (outcome.followUp !== null) await follow(outcome.followUp);
    return outcome.runId;
  } catch (error) {
    if (error instanceof FileError) {
      await discardUpload({ db, stagedPath }, caller, upload.id);
    }
    throw error;
  }
}

/** Nothing of a refused or stopped upload stays: neither bytes nor row. */
export async function discardUpload(
  { db, stagedPath }: Pick<FinishTools, "db" | "stagedPath">,
  caller: LabCaller,
  uploadId: string,
): Promise<void> {
  await removeStaged(stagedPath(uploadId));
  await inLab(db, toScope(caller), (trx) => deleteUpload(trx, caller.labId, uploadId));
}

export const noSuchUpload = (): AppError =>
  new AppError(
    "upload.not-found",
    "There is no such upload: it was finished long ago, stopped or refused. Send the file again.",
  );

/** Bytes and the small file beside them that tus keeps. */
async function removeStaged(path: string): Promise<void> {
  await rm(path, { force: true });
  await rm(`${path}.json`, { force: true });
}

async function requireWhole(path: string, upload: UploadRow): Promise<void> {
  const size = await stat(path).then(
    (found) => found.size,
    (error: unknown) => {
      if (isFileSystemError(error, "ENOENT")) throw noSuchUpload();
      throw error;
    },
  );
  if (size !== upload.bytes) {
    throw new AppError(
      "upload.offset",
      `${size} of ${upload.bytes} bytes are here; send the rest first.`,
      { details: { received: size, bytes: upload.bytes } },
    );
  }
}
