/** What a whole file is, by its head held against its length: quick, for the moment it has arrived. */
import type { ByteSource } from "./byte-source";
import { requireChannels, requireLength } from "./read-wav";
import { parseWavHeader } from "./wav-header";

/**
 * @param channel that will be read, from 1.
 * @returns its media type.
 * @throws FileError "audio.*" saying what is wrong and where.
 */
export function readAudioHead(source: ByteSource, file: string, channel: number): string {
  const header = parseWavHeader(source, file);
  requireChannels(header.channels, [channel], file);
  requireLength(header.frames, file);
  return "audio/wav";
}
