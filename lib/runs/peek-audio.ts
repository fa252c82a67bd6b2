/** A look at the first bytes of an upload, so that a film or a text is refused at once. */
import { toByteSource } from "../audio/byte-source";
import { isFlac } from "../audio/read-flac";
import { parseWavHeader } from "../audio/wav-header";
import { FileError } from "../errors/app-error";
import { isTableName } from "../series/table-columns";

/** As many bytes tell one kind of file from another. */
export const PEEK_BYTES = 12;

/**
 * @param head the first bytes, PEEK_BYTES or the whole file where it is shorter.
 * @throws FileError "audio.not-audio", "audio.format-unsupported": the kind alone; whether the file
 *   is whole is seen when it is.
 */
export function peekAudio(head: Uint8Array, fileName: string): void {
  // Any text may be a table: it is read as soon as it is whole.
  if (isTableName(fileName)) return;
  if (isFlac(toByteSource(head))) return;
  try {
    parseWavHeader(toByteSource(head), fileName);
  } catch (error) {
    const strange = ["audio.not-audio", "audio.format-unsupported"];
    if (error instanceof FileError && strange.includes(error.code)) throw error;
    if (!(error instanceof FileError)) throw error;
  }
}
