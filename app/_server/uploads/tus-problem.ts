/** What the tus server refuses, in the words of our problem documents. */
import { AppError } from "../../../lib/errors/app-error";
import type { ErrorCode } from "../../../lib/errors/error-table";
import { toStorageError } from "../../../lib/storage/file-system-error";

const BY_STATUS: Readonly<Record<number, { code: ErrorCode; message: string }>> = {
  403: { code: "request.invalid", message: "The request lacks Upload-Offset or Content-Type." },
  404: { code: "upload.not-found", message: "There is no such upload. Send the file again." },
  409: {
    code: "upload.offset",
    message: "The upload stands at another offset. Ask for it (HEAD) and go on from there.",
  },
  410: { code: "upload.expired", message: "The upload expired. Send the file again." },
  412: { code: "request.invalid", message: "The header Tus-Resumable: 1.0.0 is needed." },
  413: { code: "upload.too-large", message: "More bytes came than were announced." },
  415: {
    code: "request.media-type",
    message: "The bytes come as application/offset+octet-stream.",
  },
  501: {
    code: "request.invalid",
    message: "Uploads in parts joined later, or of unknown length, are not taken.",
  },
};

/** @param thrown by the tus server or one of our hooks; undefined where it only answered. */
export function toUploadError(thrown: unknown, status: number, body: string): unknown {
  const known = toStorageError(thrown);
  if (known instanceof AppError) return known;
  const row = BY_STATUS[status];
  if (row !== undefined) return new AppError(row.code, row.message, { details: { said: body } });
  // The connection was cut or another request took over: what came is kept.
  if (status === 400) {
    return new AppError("request.invalid", `The upload request cannot be used: ${body.trim()}`);
  }
  return thrown instanceof Error ? thrown : new Error(`upload answered ${status}: ${body}`);
}
