/** A recording of any kind that is read, as the engine takes it. */
import type { Recording } from "../analysis/types";
import type { ByteSource } from "./byte-source";
import { isFlac, readFlac } from "./read-flac";
import { readWav, type DecodedAudio } from "./read-wav";

export interface ReadRecordingOptions {
  /** Name for messages and for the result. */
  file: string;
  /** Channel of the microphone, from 1. */
  channel?: number;
  /** Channel that recorded the electrical signal, from 1. */
  loopbackChannel?: number | undefined;
}

/**
 * Channels are chosen, never mixed.
 * @returns the recording, and what the file says of itself.
 * @throws FileError "audio.*" saying what is wrong and where.
 */
export async function readRecording(
  source: ByteSource,
  { file, channel = 1, loopbackChannel }: ReadRecordingOptions,
): Promise<{ recording: Recording; audio: Omit<DecodedAudio, "samples"> }> {
  const wanted = loopbackChannel === undefined ? [channel] : [channel, loopbackChannel];
  const { samples, ...audio } = await decode(source, file, wanted);
  const [microphone = new Float32Array(0), loopback] = samples;
  const recording: Recording = {
    file,
    rateHz: audio.rateHz,
    samples: microphone,
    fullScale: audio.fullScale,
  };
  if (loopback !== undefined) recording.loopback = loopback;
  return { recording, audio };
}

async function decode(
  source: ByteSource,
  file: string,
  wanted: readonly number[],
): Promise<DecodedAudio> {
  return isFlac(source) ? readFlac(source, file, wanted) : readWav(source, file, wanted);
}
