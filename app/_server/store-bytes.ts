import { createHash, randomBytes } from "node:crypto";
import { mkdir, rm, writeFile } from "node:fs/promises";
import { toStorageError } from "../../lib/storage/file-system-error";
import { getStagingFolder, getStore, stagedPath } from "./storage";

/**
 * Stores a small file: first the bytes, then `commit` with the row that names their digest. Bytes
 * without a row, where the commit fails, go with the next sweep.
 */
export async function storeBytes<T>(
  bytes: Uint8Array,
  commit: (digest: string) => Promise<T>,
): Promise<T> {
  const digest = createHash("sha256").update(bytes).digest("hex");
  const path = stagedPath(`small-${randomBytes(12).toString("hex")}`);
  try {
    await mkdir(getStagingFolder(), { recursive: true });
    await writeFile(path, bytes);
    await getStore().put(path, digest);
    return await commit(digest);
  } catch (error) {
    throw toStorageError(error);
  } finally {
    await rm(path, { force: true });
  }
}
