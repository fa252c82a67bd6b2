/** What an arrived file is, recording or table, held against its name and length. */
import { FileError } from "../errors/app-error";
import { isTableName, type ColumnChoice } from "../series/table-columns";
import type { ByteSource } from "./byte-source";
import { readAudioHead } from "./read-audio-head";
import { readTable } from "./read-table";
import { LARGEST_TABLE_BYTES, toTooLarge } from "./table-rows";

/**
 * @param channel that will be read of a recording, from 1.
 * @param columns of a table, mapped by hand.
 * @returns its media type.
 * @throws FileError "audio.*", "table.*" saying what is wrong and where.
 */
export async function readFileHead(
  source: ByteSource,
  file: string,
  channel: number,
  columns?: ColumnChoice,
): Promise<"audio/wav" | "audio/flac" | "text/plain"> {
  if (!isTableName(file)) {
    if (columns === undefined) return readAudioHead(source, file, channel);
    throw new FileError("table.not-readable", `${file} is no table: columns are of tables only.`, {
      file,
    });
  }
  if (source.size > LARGEST_TABLE_BYTES) throw toTooLarge(source.size, file);
  readTable(source.read(0, source.size), file, columns);
  return "text/plain";
}
