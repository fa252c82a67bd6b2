/**
 * Where recordings lie: by the SHA-256 of their bytes, written once, never changed. The file driver
 * stands beside this; another driver keeps the same promises.
 */

/** Random access to stored bytes; also what the readers of lib/audio take. */
export interface OpenRecording {
  /** Bytes in all. */
  readonly size: number;
  /** Up to `length` bytes from `offset`; shorter only at the end of the file. */
  read(offset: number, length: number): Promise<Uint8Array>;
  close(): Promise<void>;
}

export interface ByteRange {
  /** First byte, from 0. */
  from: number;
  /** Last byte, included. */
  to: number;
}

export interface RecordingStore {
  /**
   * Takes a finished file from the staging folder. The bytes are on the disk for good when this
   * returns; the staged file stays until the caller has committed the row that names the digest
   * and removes it, so that a crash in between loses nothing. Bytes that are there already are
   * kept as they are.
   *
   * @param digest SHA-256 of the file, lower-case hex; the caller has computed it from the bytes.
   * @throws AppError "storage.full"
   */
  put(stagedPath: string, digest: string): Promise<void>;
  /** @throws AppError "storage.missing" */
  open(digest: string): Promise<OpenRecording>;
  /** @throws AppError "storage.missing" */
  stream(digest: string, range?: ByteRange): Promise<ReadableStream<Uint8Array>>;
  /**
   * A path under which a computing process of this machine reads the bytes.
   *
   * @throws AppError "storage.missing"
   */
  localPath(digest: string): Promise<string>;
  has(digest: string): Promise<boolean>;
  /** No error where nothing is there. */
  remove(digest: string): Promise<void>;
  /** Bytes that can still be written. */
  freeBytes(): Promise<number>;
  /** Digests whose bytes were put before `before`, in no order: for the sweep of orphans. */
  listOlderThan(before: Date): AsyncIterable<string>;
}
