/** The staging folder of unfinished uploads: the tus file store, careful about kind and room. */
import { createWriteStream } from "node:fs";
import { join } from "node:path";
import { Transform, type Readable, type TransformCallback } from "node:stream";
import { pipeline } from "node:stream/promises";
import { FileStore } from "@tus/file-store";
import { AppError } from "../../../lib/errors/app-error";
import { PEEK_BYTES, peekAudio } from "../../../lib/runs/peek-audio";
import { UPLOAD_LIFETIME_MS } from "../../../lib/api/uploads";
import { freeBytesAt } from "../../../lib/storage/file-store";
import { isFullDisk } from "../../../lib/storage/file-system-error";
import { RESERVE_BYTES, toFullError } from "./room";

/** How often the free room is looked at while bytes come in. */
const LOOK_EVERY_BYTES = 32 * 1024 * 1024;

/** What a refused request may still send before it is cut off. */
const SWALLOW_BYTES = 64 * 1024 * 1024;

export class StagingStore extends FileStore {
  private readonly freeBytes: FreeBytes;

  constructor(directory: string, freeBytes: FreeBytes = freeBytesAt) {
    super({ directory, expirationPeriodInMilliseconds: UPLOAD_LIFETIME_MS });
    this.freeBytes = freeBytes;
    // A length that is not known beforehand could not be held against limit and room.
    this.extensions = this.extensions.filter((name) => name !== "creation-defer-length");
  }

  override async write(readable: Readable, id: string, offset: number): Promise<number> {
    const { metadata, size } = await this.getUpload(id);
    const neededBytes = Math.max(0, (size ?? 0) - offset);
    const guard = new ArrivalGuard({
      freeBytes: () => this.freeBytes(this.directory),
      neededBytes,
      fileName: metadata?.["fileName"] ?? "The file",
      fromStart: offset === 0,
    });
    // A cut connection must reach the file as an end, so that what came stays.
    readable.on("error", () => guard.end());
    // Not the write of the store behind, which hides why it failed.
    const file = createWriteStream(join(this.directory, id), { flags: "r+", start: offset });
    try {
      await pipeline(readable.pipe(guard), file);
    } catch (error) {
      if (guard.errored instanceof AppError) throw guard.errored;
      if (!isFullDisk(error)) throw error;
      throw toFullError(await this.freeBytes(this.directory), neededBytes);
    }
    return offset + file.bytesWritten;
  }
}

type FreeBytes = (directory: string) => Promise<number>;

interface Watch {
  freeBytes: () => Promise<number>;
  /** What this request has still to bring. */
  neededBytes: number;
  fileName: string;
  /** Whether the first bytes of the file come first. */
  fromStart: boolean;
}

/** Refuses by the first bytes, and when the disk runs full under way. */
class ArrivalGuard extends Transform {
  private readonly watch: Watch;
  private head: Buffer | null;
  private unwatchedBytes = 0;
  private seenBytes = 0;
  private swallowedBytes = 0;
  private refusal: Error | null = null;

  constructor(watch: Watch) {
    super();
    this.watch = watch;
    this.head = watch.fromStart ? Buffer.alloc(0) : null;
  }

  override _transform(piece: Buffer, _encoding: BufferEncoding, done: TransformCallback): void {
    void this.pass(piece, done);
  }

  override _flush(done: TransformCallback): void {
    // Cut within the first bytes: what came is kept, the kind is seen with the rest.
    if (this.refusal === null) done(null, this.head ?? undefined);
    else done(this.refusal);
  }

  private async pass(piece: Buffer, done: TransformCallback): Promise<void> {
    let passed: Buffer = EMPTY;
    try {
      passed = await this.look(piece);
    } catch (error) {
      this.refusal = error instanceof Error ? error : new Error(String(error));
    }
    // A client that is still sending would miss an answer given now: let it finish, within reason.
    if (this.refusal !== null) this.swallowedBytes += piece.length;
    if (this.refusal !== null && this.swallowedBytes > SWALLOW_BYTES) done(this.refusal);
    else done(null, passed);
  }

  private async look(piece: Buffer): Promise<Buffer> {
    if (this.refusal !== null) return EMPTY;
    this.unwatchedBytes += piece.length;
    this.seenBytes += piece.length;
    if (this.unwatchedBytes >= LOOK_EVERY_BYTES) {
      this.unwatchedBytes = 0;
      const free = await this.watch.freeBytes();
      const needed = this.watch.neededBytes - this.seenBytes + piece.length;
      if (free < RESERVE_BYTES) throw toFullError(free, needed);
    }
    if (this.head === null) return piece;
    const head = Buffer.concat([this.head, piece]);
    this.head = head.length < PEEK_BYTES ? head : null;
    if (this.head !== null) return EMPTY;
    peekAudio(head, this.watch.fileName);
    return head;
  }
}

const EMPTY = Buffer.alloc(0);
