/** Bytes by position, from memory or from a file, so that a reader never needs the whole file at once. */
import { closeSync, fstatSync, openSync, readSync } from "node:fs";

export interface ByteSource {
  /** Bytes in all. */
  readonly size: number;
  /** The bytes from offset on, at most length of them; fewer only at the end. Valid until the next call. */
  read(offset: number, length: number): Uint8Array;
}

export function toByteSource(bytes: Uint8Array): ByteSource {
  return { size: bytes.length, read: (offset, length) => bytes.subarray(offset, offset + length) };
}

/** Opens a file, hands it to work, and closes it whatever happens. */
export async function withFileSource<T>(
  path: string,
  work: (source: ByteSource) => T | Promise<T>,
): Promise<T> {
  const descriptor = openSync(path, "r");
  try {
    return await work(toFileSource(descriptor));
  } finally {
    closeSync(descriptor);
  }
}

/** Reads an open file. The caller keeps the descriptor and closes it. */
export function toFileSource(descriptor: number): ByteSource {
  let scratch = new Uint8Array(0);
  return {
    size: fstatSync(descriptor).size,
    read(offset, length) {
      if (scratch.length < length) scratch = new Uint8Array(length);
      let filled = 0;
      while (filled < length) {
        const got = readSync(descriptor, scratch, filled, length - filled, offset + filled);
        if (got === 0) break;
        filled += got;
      }
      return scratch.subarray(0, filled);
    },
  };
}
