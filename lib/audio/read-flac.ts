/** Samples of a FLAC file, one channel or two, decoded piece by piece. */
import { FileError } from "../errors/app-error";
import type { ByteSource } from "./byte-source";
import { requireChannels, requireLength, toFullScale, type DecodedAudio } from "./read-wav";

const STREAMINFO_BYTES = 42;
const PIECE_BYTES = 1 << 20;

interface StreamInfo {
  rateHz: number;
  channels: number;
  bits: number;
  frames: number;
}

/** Whether the bytes begin as a FLAC file. */
export function isFlac(source: ByteSource): boolean {
  return String.fromCharCode(...source.read(0, 4)) === "fLaC";
}

/**
 * @param wanted channels from 1, in the order in which they are returned.
 * @throws FileError "audio.truncated" where it ends early or is damaged, "audio.length-lies" where its length
 *   is left open, "audio.empty", "audio.channel-missing", "audio.too-large"
 * @see RFC 9639, STREAMINFO
 */
export async function readFlac(
  source: ByteSource,
  file: string,
  wanted: readonly number[] = [1],
): Promise<DecodedAudio> {
  const info = parseStreamInfo(source, file);
  requireChannels(info.channels, wanted, file);
  requireLength(info.frames, file);
  const samples = wanted.map(() => new Float32Array(info.frames));
  const decoded = await decodeInto(source, file, wanted, samples, info.bits);
  if (decoded !== info.frames) {
    throw new FileError(
      "audio.truncated",
      `${file} ends early or is damaged: its header promises ${info.frames} samples, ${decoded} can be decoded. Copy or export it again.`,
      { file },
    );
  }
  return { ...info, encoding: "pcm", fullScale: toFullScale("pcm", info.bits), samples };
}

function parseStreamInfo(source: ByteSource, file: string): StreamInfo {
  const head = Uint8Array.from(source.read(0, STREAMINFO_BYTES));
  if (head.length < STREAMINFO_BYTES || ((head[4] ?? 0) & 0x7f) !== 0) {
    throw new FileError("audio.truncated", `${file} ends or breaks off in its FLAC header.`, {
      file,
    });
  }
  const view = new DataView(head.buffer);
  // 20 bits rate, 3 bits channels - 1, 5 bits width - 1, 36 bits of samples, from byte 18 on.
  const packed = view.getUint32(18);
  const info = {
    rateHz: packed >>> 12,
    channels: ((packed >>> 9) & 7) + 1,
    bits: ((packed >>> 4) & 31) + 1,
    frames: (packed & 15) * 2 ** 32 + view.getUint32(22),
  };
  if (info.rateHz === 0) {
    throw new FileError(
      "audio.length-lies",
      `${file} claims a sample rate of 0 Hz, which cannot be.`,
      { file },
    );
  }
  if (info.frames === 0) {
    throw new FileError(
      "audio.length-lies",
      `${file} leaves its length open or is empty: a pipe never finished the header. Save it once more as a file.`,
      { file },
    );
  }
  return info;
}

/** @returns samples per channel that were decoded; those beyond the promised length are counted, not kept. */
async function decodeInto(
  source: ByteSource,
  file: string,
  wanted: readonly number[],
  samples: readonly Float32Array[],
  bits: number,
): Promise<number> {
  const full = 2 ** (bits - 1);
  // Most recordings are WAV: the decoder starts with the first one that is not.
  const { FLACDecoder } = await import("@wasm-audio-decoders/flac");
  const decoder = new FLACDecoder();
  let done = 0;
  const keep = (channelData: readonly Float32Array[], count: number): void => {
    wanted.forEach((channel, i) => {
      const into = samples[i];
      const from = channelData[channel - 1];
      if (into !== undefined && from !== undefined && done < into.length) {
        copyCodes(from.subarray(0, Math.min(count, into.length - done)), into, done, full);
      }
    });
    done += count;
  };
  try {
    await decoder.ready;
    for (let offset = 0; offset < source.size; offset += PIECE_BYTES) {
      const { channelData, samplesDecoded, errors } = await decoder.decode(
        Uint8Array.from(source.read(offset, PIECE_BYTES)),
      );
      requireSound(errors, file);
      keep(channelData, samplesDecoded);
    }
    const { channelData, samplesDecoded, errors } = await decoder.flush();
    requireSound(errors, file);
    keep(channelData, samplesDecoded);
  } catch (error) {
    if (error instanceof FileError) throw error;
    throw new FileError(
      "audio.truncated",
      `${file} is damaged and cannot be decoded as FLAC. Copy or export it again.`,
      {
        file,
        cause: error,
      },
    );
  } finally {
    decoder.free();
  }
  return done;
}

/** The decoder takes the largest code for 1; we take the next one, as WAV does: back to codes and on. */
function copyCodes(from: Float32Array, into: Float32Array, at: number, full: number): void {
  for (let n = 0; n < from.length; n += 1) into[at + n] = Math.round(from[n]! * (full - 1)) / full;
}

function requireSound(
  errors: readonly { message: string; inputBytes: number }[],
  file: string,
): void {
  const [first] = errors;
  if (first === undefined) return;
  throw new FileError(
    "audio.truncated",
    `${file} is damaged at byte ${first.inputBytes}: ${first.message}. Copy or export it again.`,
    { file },
  );
}
