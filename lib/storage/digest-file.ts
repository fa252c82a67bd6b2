import { createHash } from "node:crypto";
import { createReadStream } from "node:fs";

/** SHA-256 of a file as it stands on the disk, lower-case hex. Reads it piece by piece. */
export async function digestFile(path: string): Promise<string> {
  const hash = createHash("sha256");
  for await (const piece of createReadStream(path, { highWaterMark: 1 << 20 })) {
    if (piece instanceof Uint8Array) hash.update(piece);
  }
  return hash.digest("hex");
}
