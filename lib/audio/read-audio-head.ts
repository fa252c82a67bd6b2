/** What a whole file is, by its head held against its length: for the moment it has arrived. */
import type { ByteSource } from "./byte-source";
import { isFlac, readFlac } from "./read-flac";
import { requireChannels, requireLength } from "./read-wav";
import { parseWavHeader } from "./wav-header";

/**
 * A FLAC is decoded to its end, since its head alone cannot tell that something is missing.
 *
 * @param channel that will be read, from 1.
 * @returns its media type.
 * @throws FileError "audio.*" saying what is wrong and where.
 */
export async function readAudioHead(
  source: ByteSource,
  file: string,
  channel: number,
): Promise<"audio/wav" | "audio/flac"> {
  if (isFlac(source)) {
    await readFlac(source, file, [channel]);
    return "audio/flac";
  }
  const header = parseWavHeader(source, file);
  requireChannels(header.channels, [channel], file);
  requireLength(header.frames, file);
  return "audio/wav";
}
