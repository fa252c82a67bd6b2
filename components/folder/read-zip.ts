/** The archive of a series: its entries are listed at once, and each is unpacked when it is asked for. */
import type { FileEntry } from "@zip.js/zip.js";
import { AppError } from "@/lib/errors/app-error";
import { toFolderNames } from "@/lib/series/folder-names";
import { missing, type SeriesFolder } from "./series-folder";

const MOST_ENTRIES = 2000;
/** As much as any installation takes of one recording. */
const MOST_BYTES = 4096e6;

/**
 * @throws AppError "request.invalid" for what is no archive, holds too much, or is locked;
 *   "series.file-missing", "series.file-name" for what it holds
 */
export async function readZip(archive: Blob): Promise<SeriesFolder> {
  const { BlobReader, ZipReader } = await import("@zip.js/zip.js");
  const reader = new ZipReader(new BlobReader(archive), { useWebWorkers: false });
  const entries = new Map<string, FileEntry>();
  const paths: string[] = [];
  try {
    for await (const entry of reader.getEntriesGenerator()) {
      if (entry.directory) continue;
      paths.push(entry.filename);
      entries.set(entry.filename, entry);
      if (paths.length > MOST_ENTRIES) throw refused(`holds more than ${MOST_ENTRIES} files`);
    }
  } catch (error) {
    throw error instanceof AppError ? error : refused("is not a whole ZIP archive", error);
  }
  const names = toFolderNames(paths);
  const found = [...names].flatMap(([name, path]) => {
    const entry = entries.get(path);
    return entry === undefined ? [] : [[name, entry] as const];
  });
  const byName = new Map(found);
  return {
    sizes: new Map(found.map(([name, entry]) => [name, entry.uncompressedSize])),
    open: async (name) => {
      const entry = byName.get(name);
      if (entry === undefined) throw missing(name);
      return unpack(name, entry);
    },
  };
}

/** Never more than the archive announced, and never more than a recording may have. */
async function unpack(name: string, entry: FileEntry): Promise<Blob> {
  if (entry.encrypted) throw refused(`locks ${name} with a password`);
  const limit = Math.min(entry.uncompressedSize, MOST_BYTES);
  if (entry.uncompressedSize > limit) throw refused(`holds ${name}, which is too large`);
  let bytes = 0;
  const counted = new TransformStream<Uint8Array, Uint8Array>({
    transform(piece, controller) {
      bytes += piece.length;
      if (bytes > limit) throw refused(`says ${limit} bytes of ${name}, and it is more`);
      controller.enqueue(piece);
    },
  });
  try {
    const [blob] = await Promise.all([
      new Response(counted.readable).blob(),
      entry.getData(counted.writable, {
        useWebWorkers: false,
        checkSignature: true,
        checkOverlappingEntry: true,
      }),
    ]);
    return blob;
  } catch (error) {
    throw error instanceof AppError ? error : refused(`holds ${name}, which is damaged`, error);
  }
}

const refused = (what: string, cause?: unknown): AppError =>
  new AppError(
    "request.invalid",
    `The archive ${what}. Pack the folder again, or drop it as it is.`,
    {
      cause,
    },
  );
