/** WAV out: the stimulus of a level, and the recordings of the demo lab and of tests. */
import { AppError } from "../errors/app-error";

export const WAV_FORMATS = ["pcm16", "pcm24", "pcm32", "float32", "float64"] as const;
export type WavFormat = (typeof WAV_FORMATS)[number];

const BYTES: Record<WavFormat, number> = { pcm16: 2, pcm24: 3, pcm32: 4, float32: 4, float64: 8 };
const HEADER_BYTES = 44;
const TAG_PCM = 1;
const TAG_FLOAT = 3;

/**
 * A RIFF/WAVE file in memory.
 *
 * @param channels one array of samples per channel, all of the same length; full scale is 1. Not modified.
 *   PCM is rounded to nearest and held at the ends of its range; floats go out as they are.
 * @returns the whole file.
 * @throws AppError "analysis.argument" where channels are missing, differ in length, or pass 4 GiB.
 */
export function writeWav(
  channels: readonly ArrayLike<number>[],
  rateHz: number,
  format: WavFormat = "pcm24",
): Uint8Array<ArrayBuffer> {
  const frames = channels[0]?.length ?? 0;
  const width = BYTES[format];
  const dataBytes = frames * channels.length * width;
  const padded = dataBytes + (dataBytes % 2);
  if (
    channels.length === 0 ||
    channels.some((c) => c.length !== frames) ||
    padded + HEADER_BYTES > 0xffffffff
  ) {
    throw new AppError(
      "analysis.argument",
      `A WAV file of ${channels.length} channels and ${dataBytes} bytes cannot be written.`,
    );
  }
  const bytes = new Uint8Array(HEADER_BYTES + padded);
  const view = new DataView(bytes.buffer);
  writeHeader(view, { channels: channels.length, rateHz, format, dataBytes, padded });
  const write = WRITERS[format];
  channels.forEach((samples, channel) => {
    const step = channels.length * width;
    let at = HEADER_BYTES + channel * width;
    for (let n = 0; n < frames; n += 1, at += step) write(view, at, samples[n] ?? 0);
  });
  return bytes;
}

function writeHeader(
  view: DataView,
  {
    channels,
    rateHz,
    format,
    dataBytes,
    padded,
  }: { channels: number; rateHz: number; format: WavFormat; dataBytes: number; padded: number },
): void {
  const width = BYTES[format];
  const text = (at: number, word: string): void => {
    for (let i = 0; i < 4; i += 1) view.setUint8(at + i, word.charCodeAt(i));
  };
  text(0, "RIFF");
  view.setUint32(4, HEADER_BYTES - 8 + padded, true);
  text(8, "WAVE");
  text(12, "fmt ");
  view.setUint32(16, 16, true);
  view.setUint16(20, format.startsWith("pcm") ? TAG_PCM : TAG_FLOAT, true);
  view.setUint16(22, channels, true);
  view.setUint32(24, rateHz, true);
  view.setUint32(28, rateHz * channels * width, true);
  view.setUint16(32, channels * width, true);
  view.setUint16(34, width * 8, true);
  text(36, "data");
  view.setUint32(40, dataBytes, true);
}

const toCode = (sample: number, full: number): number =>
  Math.max(-full, Math.min(full - 1, Math.round(sample * full)));

const WRITERS: Record<WavFormat, (view: DataView, at: number, sample: number) => void> = {
  pcm16: (view, at, sample) => view.setInt16(at, toCode(sample, 0x8000), true),
  pcm24: (view, at, sample) => {
    const code = toCode(sample, 0x800000);
    view.setInt16(at, code & 0xffff, true);
    view.setInt8(at + 2, code >> 16);
  },
  pcm32: (view, at, sample) => view.setInt32(at, toCode(sample, 0x80000000), true),
  float32: (view, at, sample) => view.setFloat32(at, sample, true),
  float64: (view, at, sample) => view.setFloat64(at, sample, true),
};
