/** What a WAV file says of itself, held against the file. */
import { FileError } from "../errors/app-error";
import type { ErrorCode } from "../errors/error-table";
import type { ByteSource } from "./byte-source";

export interface WavHeader {
  encoding: "pcm" | "float";
  rateHz: number;
  channels: number;
  /** Bits that carry signal. */
  bits: number;
  /** Bytes of one sample of one channel. */
  width: number;
  frames: number;
  /** Where the first sample lies. */
  dataOffset: number;
}

const TAG_PCM = 1;
const TAG_FLOAT = 3;
const TAG_EXTENSIBLE = 0xfffe;
const SIZE_IN_DS64 = 0xffffffff;
/** Last 14 bytes of the sub-format GUIDs xxxx0000-0000-0010-8000-00AA00389B71. */
const GUID_TAIL = [0, 0, 0, 0, 0x10, 0, 0x80, 0, 0, 0xaa, 0, 0x38, 0x9b, 0x71];
const MAX_CHUNKS = 10_000;
const MAX_RATE_HZ = 10_000_000;

interface Chunk {
  id: string;
  /** Where its content starts. */
  at: number;
  size: number;
}

interface Format {
  encoding: "pcm" | "float";
  rateHz: number;
  channels: number;
  bits: number;
  width: number;
}

/**
 * Walks the chunks of a RIFF, RF64 or BW64 file up to its samples.
 *
 * @param file name for messages.
 * @throws FileError "audio.not-audio", "audio.empty", "audio.truncated", "audio.length-lies", "audio.format-unsupported"
 * @see EBU Tech 3306 and ITU-R BS.2088 for ds64; chunks are padded to even length.
 */
export function parseWavHeader(source: ByteSource, file: string): WavHeader {
  const fail = failer(file);
  const start = copy(source.read(0, 12));
  const kind = start.length < 12 ? "" : toText(start, 0);
  if (source.size === 0) throw fail("audio.empty", "is empty: it holds no bytes. Export it again.");
  if (!["RIFF", "RF64", "BW64"].includes(kind) || toText(start, 8) !== "WAVE")
    throw fail(...toStranger(start));
  let format: Format | undefined;
  let longData: number | undefined;
  let at = 12;
  for (let count = 0; at + 8 <= source.size && count < MAX_CHUNKS; count += 1) {
    const chunk = readChunk(source, at);
    if (chunk.id === "data") {
      if (format === undefined)
        throw fail(
          "audio.length-lies",
          `puts its samples (byte ${at}) before the description of their format.`,
        );
      const size = toDataSize(chunk, kind, longData, format.width * format.channels, source, fail);
      return toHeader(format, chunk.at, size, source, fail);
    }
    if (chunk.at + chunk.size > source.size) {
      throw fail(
        "audio.truncated",
        `ends at byte ${source.size}, inside its chunk "${chunk.id}" of ${chunk.size} bytes at byte ${at}. Copy or export it again.`,
      );
    }
    const content = copy(source.read(chunk.at, Math.min(chunk.size, 64)));
    if (chunk.id === "fmt ") format = parseFormat(content, fail);
    if (chunk.id === "ds64" && content.length >= 16) {
      longData = Number(new DataView(content.buffer).getBigUint64(8, true));
    }
    at = chunk.at + chunk.size + (chunk.size % 2);
  }
  throw source.size < 44
    ? fail("audio.truncated", `ends at byte ${source.size}, before its samples.`)
    : fail("audio.empty", "has no data chunk: it holds no samples. Export it again.");
}

type Fail = ReturnType<typeof failer>;
const failer =
  (file: string) =>
  (code: ErrorCode, what: string): FileError =>
    new FileError(code, `${file} ${what}`, { file });

const copy = (bytes: Uint8Array): Uint8Array<ArrayBuffer> => Uint8Array.from(bytes);
const toText = (bytes: Uint8Array, at: number): string =>
  String.fromCharCode(...bytes.subarray(at, at + 4));

function readChunk(source: ByteSource, at: number): Chunk {
  const head = copy(source.read(at, 8));
  return { id: toText(head, 0), at: at + 8, size: new DataView(head.buffer).getUint32(4, true) };
}

/** Names the strangers that people upload in place of WAV. */
function toStranger(start: Uint8Array): [ErrorCode, string] {
  const text = String.fromCharCode(...start);
  const unsupported = (name: string): [ErrorCode, string] => [
    "audio.format-unsupported",
    `is ${name}. Export it as WAV (16, 24 or 32-bit PCM, 32 or 64-bit float) or FLAC.`,
  ];
  if (text.startsWith("RIFX")) return unsupported("a big-endian WAV (RIFX)");
  if (text.startsWith("FORM")) return unsupported("an AIFF file");
  if (text.startsWith("OggS")) return unsupported("an Ogg file");
  if (text.startsWith("caff")) return unsupported("a CAF file");
  if (text.startsWith("ID3") || (start[0] === 0xff && ((start[1] ?? 0) & 0xe0) === 0xe0))
    return unsupported("an MPEG audio file");
  if (text.slice(4, 8) === "ftyp") return unsupported("an MP4 file");
  return ["audio.not-audio", `is not a WAV or FLAC file: it begins with ${describeStart(start)}.`];
}

const describeStart = (start: Uint8Array): string =>
  start.length === 0
    ? "nothing"
    : `the bytes ${[...start.subarray(0, 8)].map((b) => b.toString(16).padStart(2, "0")).join(" ")}`;

function parseFormat(content: Uint8Array<ArrayBuffer>, fail: Fail): Format {
  if (content.length < 16)
    throw fail(
      "audio.length-lies",
      `describes its format in ${content.length} bytes; 16 are needed.`,
    );
  const view = new DataView(content.buffer);
  let tag = view.getUint16(0, true);
  const channels = view.getUint16(2, true);
  const rateHz = view.getUint32(4, true);
  const blockBytes = view.getUint16(12, true);
  let bits = view.getUint16(14, true);
  const containerBits = bits;
  if (tag === TAG_EXTENSIBLE) {
    if (content.length < 40 || !GUID_TAIL.every((byte, i) => content[26 + i] === byte)) {
      throw fail(
        "audio.format-unsupported",
        "is an extensible WAV of a kind that is not read; export it as plain PCM or float.",
      );
    }
    tag = view.getUint16(24, true);
    bits = view.getUint16(18, true) || bits;
  }
  if (channels === 0 || rateHz === 0 || rateHz > MAX_RATE_HZ) {
    throw fail(
      "audio.length-lies",
      `claims ${channels} channels at ${rateHz} Hz, which cannot be.`,
    );
  }
  if (tag !== TAG_PCM && tag !== TAG_FLOAT) {
    throw fail(
      "audio.format-unsupported",
      `holds compressed audio (WAV format ${tag}); export it as PCM or float.`,
    );
  }
  const encoding = tag === TAG_PCM ? "pcm" : "float";
  const width = blockBytes / channels;
  const widths = encoding === "pcm" ? [1, 2, 3, 4] : [4, 8];
  if (width !== Math.ceil(containerBits / 8) || bits > containerBits || bits < 1) {
    throw fail(
      "audio.length-lies",
      `contradicts itself: ${containerBits} bits (${bits} valid) in ${channels} channels do not make blocks of ${blockBytes} bytes.`,
    );
  }
  if (!widths.includes(width) || (encoding === "float" && bits !== width * 8)) {
    throw fail(
      "audio.format-unsupported",
      `holds ${bits}-bit ${encoding === "pcm" ? "PCM" : "float"} samples, which are not read.`,
    );
  }
  return { encoding, rateHz, channels, bits, width };
}

/** Bytes of samples; refuses a length that is left open, since nobody could tell a whole file from a cut one. */
function toDataSize(
  chunk: Chunk,
  kind: string,
  longData: number | undefined,
  blockBytes: number,
  source: ByteSource,
  fail: Fail,
): number {
  const present = source.size - chunk.at;
  if (kind !== "RIFF" && chunk.size === SIZE_IN_DS64) {
    if (longData === undefined)
      throw fail(
        "audio.length-lies",
        `is a ${kind} file without the ds64 chunk that holds its length.`,
      );
    // Some writers count the pad byte here.
    const countsPad = longData % 2 === 0 && longData % blockBytes === 1;
    return countsPad ? longData - 1 : longData;
  }
  const open = chunk.size === SIZE_IN_DS64 || (chunk.size === 0 && present > 1);
  if (open) {
    throw fail(
      "audio.length-lies",
      `leaves its length open (${chunk.size === 0 ? "0" : "4 294 967 295"} bytes claimed, ${present} present): the recorder or a pipe never finished the header. Save it once more as a file.`,
    );
  }
  return chunk.size;
}

function toHeader(
  format: Format,
  at: number,
  size: number,
  source: ByteSource,
  fail: Fail,
): WavHeader {
  const block = format.width * format.channels;
  const present = source.size - at;
  if (size === 0)
    throw fail("audio.empty", "holds no samples: its data chunk is empty. Record again.");
  if (size > present) {
    const seconds = (bytes: number): string => (bytes / block / format.rateHz).toFixed(2);
    throw fail(
      "audio.truncated",
      `ends early: its header promises ${size} bytes of samples (${seconds(size)} s), ${present} are there (${seconds(present)} s). Copy or export it again.`,
    );
  }
  if (size % block !== 0) {
    throw fail(
      "audio.length-lies",
      `claims ${size} bytes of samples, which is no whole number of ${block}-byte blocks.`,
    );
  }
  refuseMoreThanClaimed(at + size + (size % 2), source, size, fail);
  return { ...format, frames: size / block, dataOffset: at };
}

/** After the samples come chunks, zero padding or nothing; anything else is sound that the header hides. */
function refuseMoreThanClaimed(end: number, source: ByteSource, claimed: number, fail: Fail): void {
  const rest = source.size - end;
  if (rest <= 0) return;
  const head = copy(source.read(end, Math.min(rest, 4096)));
  const isChunk =
    head.length >= 4 && head.subarray(0, 4).every((byte) => byte >= 0x20 && byte < 0x7f);
  if (isChunk || head.every((byte) => byte === 0)) return;
  throw fail(
    "audio.length-lies",
    `holds more than its header says: ${claimed} bytes of samples claimed, ${rest} more bytes follow that are no chunk. Export it again.`,
  );
}
