import { AppError } from "../../lib/errors/app-error";

/**
 * A body that is a file, held in memory: only for small ones.
 *
 * @throws AppError "upload.too-large" as soon as it passes the limit
 */
export async function readBody(request: Request, limitBytes: number): Promise<Uint8Array> {
  const tooLarge = (): AppError =>
    new AppError(
      "upload.too-large",
      `The file is larger than ${limitBytes / 1_000_000} MB. Make it smaller and send it again.`,
      { details: { limit_bytes: limitBytes } },
    );
  if (Number(request.headers.get("content-length") ?? 0) > limitBytes) throw tooLarge();
  const pieces: Uint8Array[] = [];
  let size = 0;
  for await (const piece of request.body ?? []) {
    size += piece.length;
    if (size > limitBytes) throw tooLarge();
    pieces.push(piece);
  }
  return Buffer.concat(pieces);
}
