/** What the file system says when it refuses. */
import { AppError } from "../errors/app-error";

export function isFileSystemError(error: unknown, code: string): boolean {
  return error instanceof Error && "code" in error && error.code === code;
}

/** A full disk becomes "storage.full"; anything else stays what it is. */
export function toStorageError(error: unknown): unknown {
  const full = isFileSystemError(error, "ENOSPC") || isFileSystemError(error, "EDQUOT");
  if (!full) return error;
  return new AppError(
    "storage.full",
    "The disk of the server is full. Nothing of this file was kept; ask the admin of your lab to make room, then send it again.",
    { cause: error },
  );
}
