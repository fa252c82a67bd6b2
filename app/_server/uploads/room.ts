import { AppError } from "../../../lib/errors/app-error";

/** Left free for the database and everything else. */
export const RESERVE_BYTES = 200_000_000;

/** @throws AppError "storage.full" with the figures */
export function requireRoom(freeBytes: number, neededBytes: number): void {
  if (freeBytes - neededBytes < RESERVE_BYTES) throw toFullError(freeBytes, neededBytes);
}

export function toFullError(freeBytes: number, neededBytes: number): AppError {
  const toMb = (bytes: number): string => `${Math.max(0, Math.floor(bytes / 1_000_000))} MB`;
  return new AppError(
    "storage.full",
    `The disk of the server is nearly full: ${toMb(freeBytes - RESERVE_BYTES)} can still be taken, this needs ${toMb(neededBytes)}. Ask the admin of your lab to make room, then send the file again.`,
    { details: { free_bytes: freeBytes, needed_bytes: neededBytes, reserve_bytes: RESERVE_BYTES } },
  );
}
