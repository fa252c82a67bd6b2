import { mkdirSync, writeFileSync } from "node:fs";
import { dirname, join } from "node:path";
import { inflateRawSync } from "node:zlib";

/** Entries of a ZIP without encryption, by its central directory. */
export function unzip(archive: Buffer): Map<string, Buffer> {
  const entries = new Map<string, Buffer>();
  const end = archive.lastIndexOf(Buffer.from("PK\x05\x06", "latin1"));
  let at = archive.readUInt32LE(end + 16);
  for (let left = archive.readUInt16LE(end + 10); left > 0; left -= 1) {
    const method = archive.readUInt16LE(at + 10);
    const size = archive.readUInt32LE(at + 20);
    const nameLength = archive.readUInt16LE(at + 28);
    const local = archive.readUInt32LE(at + 42);
    const name = archive.toString("utf8", at + 46, at + 46 + nameLength);
    const start = local + 30 + archive.readUInt16LE(local + 26) + archive.readUInt16LE(local + 28);
    const content = archive.subarray(start, start + size);
    entries.set(name, method === 0 ? content : inflateRawSync(content));
    at += 46 + nameLength + archive.readUInt16LE(at + 30) + archive.readUInt16LE(at + 32);
  }
  return entries;
}

/** Writes the entries below `folder`. */
export function unzipTo(archive: Buffer, folder: string): void {
  for (const [name, content] of unzip(archive)) {
    mkdirSync(dirname(join(folder, name)), { recursive: true });
    writeFileSync(join(folder, name), content);
  }
}
