/** What a whole file is, by its head held against its length: for the moment it has arrived. */
import type { ByteSource } from "./byte-source";
import { isFlac, readFlac } from "./read-flac";
import { readWav, requireChannels, requireLength } from "./read-wav";
import { parseWavHeader } from "./wav-header";

/** Float samples up to here are looked at one by one; the arrival check reads longer files. */
const LOOK_AT_FRAMES = 30_000_000;

/**
 * A FLAC is decoded to its end, since its head alone cannot tell that something is missing; float
 * samples are looked at, since they may be no numbers.
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
  if (header.encoding === "float" && header.frames <= LOOK_AT_FRAMES) {
    readWav(source, file, [channel]);
  }
  return "audio/wav";
}
