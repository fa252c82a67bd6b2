/** A folder as a ZIP that is made while it is sent. */
import { makeZip } from "client-zip";
import { AppError } from "../../lib/errors/app-error";
import type { PackFile } from "../../lib/evidence/pack-file";
import { toDisposition } from "../../lib/http/disposition";
import { getStore } from "./storage";

interface ZippedFolder {
  /** Name of the folder, and of the file. */
  name: string;
  files: readonly PackFile[];
  /** Date of every file: the same folder is the same bytes. */
  at: Date;
}

/** @throws AppError "storage.missing" before the first byte where a recording is not there */
export async function answerZip(
  folder: ZippedFolder,
  headers: Record<string, string> = {},
): Promise<Response> {
  for (const file of folder.files) {
    if ("digest" in file && !(await getStore().has(file.digest))) {
      throw new AppError(
        "storage.missing",
        `The bytes of ${file.name} are not in the storage folder. Restore them from a backup.`,
        { file: file.name },
      );
    }
  }
  const encoder = new TextEncoder();
  const entries = folder.files.map((file) => ({
    name: `${folder.name}/${file.name}`,
    lastModified: folder.at,
    ...("text" in file
      ? { text: encoder.encode(file.text), size: encoder.encode(file.text).length }
      : { digest: file.digest, size: file.bytes }),
  }));
  return new Response(makeZip(open(entries)), {
    headers: {
      "content-type": "application/zip",
      "cache-control": "private, no-store, no-transform",
      "content-disposition": toDisposition(`${folder.name}.zip`),
      ...headers,
    },
  });
}

type Entry = { name: string; lastModified: Date; size: number } & (
  | { text: Uint8Array<ArrayBuffer> }
  | { digest: string }
);

/** Each recording is opened when its turn comes. */
async function* open(entries: readonly Entry[]) {
  for (const { name, lastModified, size, ...content } of entries) {
    const input = "text" in content ? content.text : await getStore().stream(content.digest);
    yield { name, lastModified, size, input };
  }
}
