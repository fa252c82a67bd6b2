/** Pictures by their first bytes, whatever they are called. */
import { AppError } from "../errors/app-error";

export const MAX_PHOTO_BYTES = 8_000_000;

/** @throws AppError "photo.not-image" */
export function toPictureType(bytes: Uint8Array): "image/jpeg" | "image/png" | "image/webp" {
  const text = String.fromCharCode(...bytes.subarray(0, 12));
  if (text.startsWith("\xFF\xD8\xFF")) return "image/jpeg";
  if (text.startsWith("\x89PNG\r\n\x1A\n")) return "image/png";
  if (text.startsWith("RIFF") && text.slice(8) === "WEBP") return "image/webp";
  throw new AppError(
    "photo.not-image",
    "This is no JPEG, PNG or WebP picture. Export the photo in one of these and send it again.",
  );
}
