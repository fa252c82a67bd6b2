/** The file driver of RecordingStore: <folder>/ab/cdef… beside each other, one file per digest. */
import { createReadStream } from "node:fs";
import { link, mkdir, open, readdir, rm, stat, statfs, utimes } from "node:fs/promises";
import { join } from "node:path";
import { Readable } from "node:stream";
import { AppError } from "../errors/app-error";
import { isFileSystemError, toStorageError } from "./file-system-error";
import type { ByteRange, OpenRecording, RecordingStore } from "./recording-store";

const DIGEST = /^[0-9a-f]{64}$/;

/** @param folder made where missing; must lie on the same file system as the staging folder. */
export function createFileStore(folder: string): RecordingStore {
  return {
    put: (stagedPath, digest) => putFile(folder, stagedPath, digest),
    open: (digest) => openFile(toPath(folder, digest), digest),
    stream: (digest, range) => streamFile(toPath(folder, digest), digest, range),
    localPath: async (digest) => {
      const path = toPath(folder, digest);
      if ((await sizeOf(path)) === null) throw missing(digest);
      return path;
    },
    has: async (digest) => (await sizeOf(toPath(folder, digest))) !== null,
    remove: (digest) => rm(toPath(folder, digest), { force: true }),
    freeBytes: () => freeBytesAt(folder),
    listOlderThan: (before) => listOlderThan(folder, before),
  };
}

/** Bytes that an ordinary process can still write on the file system of `folder`. */
export async function freeBytesAt(folder: string): Promise<number> {
  await mkdir(folder, { recursive: true });
  const { bavail, bsize } = await statfs(folder);
  return bavail * bsize;
}

function toPath(folder: string, digest: string): string {
  if (!DIGEST.test(digest)) throw new AppError("storage.missing", "That is no digest.");
  return join(folder, digest.slice(0, 2), digest.slice(2));
}

/**
 * A hard link is the first half of a move: the bytes have both names until the caller removes the
 * staged one. The link is made only after the bytes are on the disk, so a name in the store always
 * stands for whole contents.
 */
async function putFile(folder: string, stagedPath: string, digest: string): Promise<void> {
  const path = toPath(folder, digest);
  const parent = join(folder, digest.slice(0, 2));
  try {
    await mkdir(parent, { recursive: true });
    await syncPath(stagedPath);
    try {
      await link(stagedPath, path);
    } catch (error) {
      if (!isFileSystemError(error, "EEXIST")) throw error;
      // Young again, so that a sweep under way leaves it to the row that is about to name it.
      await utimes(path, new Date(), new Date());
    }
    await syncPath(parent);
  } catch (error) {
    throw toStorageError(error);
  }
}

async function syncPath(path: string): Promise<void> {
  const handle = await open(path, "r");
  try {
    await handle.sync();
  } finally {
    await handle.close();
  }
}

async function openFile(path: string, digest: string): Promise<OpenRecording> {
  const handle = await open(path, "r").catch((error: unknown) => {
    throw isFileSystemError(error, "ENOENT") ? missing(digest, error) : error;
  });
  const { size } = await handle.stat();
  return {
    size,
    read: async (offset, length) => {
      const wanted = Math.max(0, Math.min(length, size - offset));
      const bytes = new Uint8Array(wanted);
      let filled = 0;
      while (filled < wanted) {
        const { bytesRead } = await handle.read(bytes, filled, wanted - filled, offset + filled);
        if (bytesRead === 0) break;
        filled += bytesRead;
      }
      return bytes.subarray(0, filled);
    },
    close: () => handle.close(),
  };
}

async function streamFile(
  path: string,
  digest: string,
  range?: ByteRange,
): Promise<ReadableStream<Uint8Array>> {
  if ((await sizeOf(path)) === null) throw missing(digest);
  const file = createReadStream(path, range && { start: range.from, end: range.to });
  // The types of node:stream/web and of the browser's ReadableStream differ in name only.
  const iterator: AsyncIterator<Buffer> = Readable.prototype[Symbol.asyncIterator].call(file);
  return new ReadableStream<Uint8Array>({
    async pull(controller) {
      const piece: IteratorResult<Buffer, unknown> = await iterator.next();
      if (piece.done === true) controller.close();
      else controller.enqueue(new Uint8Array(piece.value));
    },
    cancel() {
      file.destroy();
    },
  });
}

async function sizeOf(path: string): Promise<number | null> {
  try {
    return (await stat(path)).size;
  } catch (error) {
    if (isFileSystemError(error, "ENOENT")) return null;
    throw error;
  }
}

async function* listOlderThan(folder: string, before: Date): AsyncGenerator<string> {
  await mkdir(folder, { recursive: true });
  for (const head of await readdir(folder)) {
    if (!/^[0-9a-f]{2}$/.test(head)) continue;
    for (const tail of await readdir(join(folder, head))) {
      if (!DIGEST.test(head + tail)) continue;
      const { mtime, ctime } = await stat(join(folder, head, tail));
      // A link changes ctime, a touch both: whichever is later is when it was last put.
      if (mtime < before && ctime < before) yield head + tail;
    }
  }
}

const missing = (digest: string, cause?: unknown): AppError =>
  new AppError(
    "storage.missing",
    `The bytes of recording ${digest.slice(0, 12)}… are not in the storage folder. Restore them from a backup, or record the run again.`,
    { details: { digest }, cause },
  );
