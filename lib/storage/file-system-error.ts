/** What the file system says when it refuses. */
import { AppError } from "../errors/app-error";

export function isFileSystemError(error: unknown, code: string): boolean {
  return error instanceof Error && "code" in error && error.code === code;
}

/** No room on the file system, or none left of one's quota. */
export function isFullDisk(error: unknown): boolean {
  return isFileSystemError(error, "ENOSPC") || isFileSystemError(error, "EDQUOT");
}

/** A full disk becomes "storage.full"; anything else stays what it is. */
export function toStorageError(error: unknown): unknown {
  if (!isFullDisk(error)) return error;
  return new AppError(
    "storage.full",
    "The disk of the server is full: the file could not be stored. Ask the admin of your lab to make room, then send it again.",
    { cause: error },
  );
}
