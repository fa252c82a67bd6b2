/** Samples of a WAV file, one channel or two, without holding the file in memory. */
import { FileError } from "../errors/app-error";
import type { ByteSource } from "./byte-source";
import { parseWavHeader, type WavHeader } from "./wav-header";

/** Longest channel that is read: 400 MB of samples in memory. */
export const MAX_FRAMES = 100_000_000;
const BLOCK_BYTES = 1 << 20;

export interface DecodedAudio {
  rateHz: number;
  /** Channels in the file. */
  channels: number;
  bits: number;
  encoding: "pcm" | "float";
  frames: number;
  /** Largest sample value that the file can hold: 1 for float, 1 - 2^(1-bits) for PCM. */
  fullScale: number;
  /** One array of [frames] per wanted channel, re full scale. */
  samples: Float32Array<ArrayBuffer>[];
}

/**
 * @param wanted channels from 1, in the order in which they are returned.
 * @throws FileError as parseWavHeader; "audio.channel-missing", "audio.too-large",
 *   "audio.format-unsupported" where a float sample is no number.
 */
export function readWav(
  source: ByteSource,
  file: string,
  wanted: readonly number[] = [1],
): DecodedAudio {
  const header = parseWavHeader(source, file);
  requireChannels(header.channels, wanted, file);
  requireLength(header.frames, file);
  const samples = wanted.map(() => new Float32Array(header.frames));
  const blockBytes = header.width * header.channels;
  const framesPerRead = Math.max(4, 4 * Math.floor(BLOCK_BYTES / blockBytes / 4));
  const decode = toDecoder(header);
  for (let done = 0; done < header.frames; done += framesPerRead) {
    const frames = Math.min(framesPerRead, header.frames - done);
    const bytes = source.read(header.dataOffset + done * blockBytes, frames * blockBytes);
    if (bytes.length < frames * blockBytes) {
      throw new FileError(
        "audio.truncated",
        `${file} could not be read to its end: ${bytes.length} of ${frames * blockBytes} bytes at sample ${done}.`,
        { file },
      );
    }
    wanted.forEach((channel, i) => {
      decode(
        bytes,
        (channel - 1) * header.width,
        blockBytes,
        (samples[i] as Float32Array).subarray(done, done + frames),
      );
    });
  }
  if (header.encoding === "float") samples.forEach((channel) => requireNumbers(channel, file));
  const { rateHz, channels, bits, encoding, frames } = header;
  return {
    rateHz,
    channels,
    bits,
    encoding,
    frames,
    fullScale: toFullScale(encoding, bits),
    samples,
  };
}

/** Largest sample value of a format, as a Float32Array holds it. */
export function toFullScale(encoding: "pcm" | "float", bits: number): number {
  return encoding === "float" ? 1 : Math.fround(1 - 2 ** (1 - bits));
}

/** @throws FileError "audio.channel-missing" */
export function requireChannels(present: number, wanted: readonly number[], file: string): void {
  for (const channel of wanted) {
    if (!Number.isInteger(channel) || channel < 1 || channel > present) {
      throw new FileError(
        "audio.channel-missing",
        `${file} has ${present === 1 ? "one channel" : `${present} channels`}; channel ${channel} was asked for.`,
        {
          file,
          details: { channels: present, channel },
        },
      );
    }
  }
}

/** @throws FileError "audio.too-large" */
export function requireLength(frames: number, file: string): void {
  if (frames > MAX_FRAMES) {
    throw new FileError(
      "audio.too-large",
      `${file} holds ${frames} samples per channel; up to ${MAX_FRAMES} are read. Cut it to the sweep.`,
      { file },
    );
  }
}

/** @throws FileError "audio.format-unsupported" at the first sample that is no number or beyond all sense. */
export function requireNumbers(samples: Float32Array, file: string): void {
  for (let n = 0; n < samples.length; n += 1) {
    if (!(Math.abs(samples[n] as number) < 1e9)) {
      throw new FileError(
        "audio.format-unsupported",
        `${file} holds a sample that is no usable number (sample ${n}). Export it again.`,
        { file },
      );
    }
  }
}

type Decode = (bytes: Uint8Array, at: number, step: number, into: Float32Array) => void;

function toDecoder({ encoding, width }: WavHeader): Decode {
  if (encoding === "float") return width === 4 ? decodeFloat32 : decodeFloat64;
  return [decodeUnsigned8, decodeInt16, decodeInt24, decodeInt32][width - 1] as Decode;
}

const decodeUnsigned8: Decode = (bytes, at, step, into) => {
  for (let n = 0, i = at; n < into.length; n += 1, i += step)
    into[n] = ((bytes[i] as number) - 128) / 128;
};

const decodeInt16: Decode = (bytes, at, step, into) => {
  for (let n = 0, i = at; n < into.length; n += 1, i += step) {
    into[n] = (((bytes[i] as number) << 16) | ((bytes[i + 1] as number) << 24)) * 2 ** -31;
  }
};

const decodeInt24: Decode = (bytes, at, step, into) => {
  // Mono: four samples lie in three words.
  const packed = step === 3 && (bytes.byteOffset + at) % 4 === 0;
  const whole = packed ? into.length - (into.length % 4) : 0;
  const words = new Int32Array(
    packed ? bytes.buffer : new ArrayBuffer(0),
    packed ? bytes.byteOffset + at : 0,
    (whole * 3) / 4,
  );
  for (let n = 0, i = 0; n < whole; n += 4, i += 3) {
    const a = words[i]!;
    const b = words[i + 1]!;
    const c = words[i + 2]!;
    into[n] = (a << 8) * 2 ** -31;
    into[n + 1] = (((a >>> 16) & 0xff00) | (b << 16)) * 2 ** -31;
    into[n + 2] = (((b >>> 8) & 0xffff00) | (c << 24)) * 2 ** -31;
    into[n + 3] = (c & ~0xff) * 2 ** -31;
  }
  for (let n = whole, i = at + whole * step; n < into.length; n += 1, i += step) {
    into[n] =
      (((bytes[i] as number) << 8) |
        ((bytes[i + 1] as number) << 16) |
        ((bytes[i + 2] as number) << 24)) *
      2 ** -31;
  }
};

const decodeInt32: Decode = (bytes, at, step, into) => {
  for (let n = 0, i = at; n < into.length; n += 1, i += step) {
    into[n] =
      ((bytes[i] as number) |
        ((bytes[i + 1] as number) << 8) |
        ((bytes[i + 2] as number) << 16) |
        ((bytes[i + 3] as number) << 24)) *
      2 ** -31;
  }
};

const toView = (bytes: Uint8Array): DataView =>
  new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);

const decodeFloat32: Decode = (bytes, at, step, into) => {
  const view = toView(bytes);
  for (let n = 0, i = at; n < into.length; n += 1, i += step) into[n] = view.getFloat32(i, true);
};

const decodeFloat64: Decode = (bytes, at, step, into) => {
  const view = toView(bytes);
  for (let n = 0, i = at; n < into.length; n += 1, i += step) into[n] = view.getFloat64(i, true);
};
