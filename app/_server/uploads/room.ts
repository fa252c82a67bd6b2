import { AppError } from "../../../lib/errors/app-error";

/** Left free for the database and everything else. */
export const RESERVE_BYTES = 200_000_000;

/** @throws AppError "storage.full" with the figures */
export function requireRoom(freeBytes: number, neededBytes: number): void {
  if (freeBytes - neededBytes < RESERVE_BYTES) throw toFullError(freeBytes, neededBytes);
}

export function toFullError(freeBytes: number, neededBytes: number): AppError {
  const toMb = (megabytes: number): string => `${Math.max(0, megabytes)} MB`;
  const room = toMb(Math.floor((freeBytes - RESERVE_BYTES) / 1_000_000));
  const need = toMb(Math.ceil(neededBytes / 1_000_000));
  return new AppError(
    "storage.full",
    `The disk of the server is nearly full: ${room} can still be taken, this needs ${need}. Ask the admin of your lab to make room, then send the file again.`,
    { details: { free_bytes: freeBytes, needed_bytes: neededBytes, reserve_bytes: RESERVE_BYTES } },
  );
}
