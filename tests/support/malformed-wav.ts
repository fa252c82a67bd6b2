/**
 * Files that are no recording, or lie about themselves, each with the code that must answer it.
 * For readers and for uploads.
 */
import type { ErrorCode } from "../../lib/errors/error-table";
import { writeWav } from "../../lib/audio/write-wav";

export interface MalformedFile {
  name: string;
  bytes: Uint8Array<ArrayBuffer>;
  code: ErrorCode;
}

const ascii = (text: string): number[] => Array.from(text, (c) => c.charCodeAt(0));
const u16 = (value: number): number[] => [value & 255, (value >>> 8) & 255];
const u32 = (value: number): number[] => [...u16(value), ...u16(value >>> 16)];
const chunk = (id: string, content: number[], size = content.length): number[] => [
  ...ascii(id),
  ...u32(size),
  ...content,
  ...(content.length % 2 === 1 ? [0] : []),
];
const riff = (...chunks: number[][]): number[] => {
  const body = chunks.flat();
  return [...ascii("RIFF"), ...u32(body.length + 4), ...ascii("WAVE"), ...body];
};

interface Format {
  tag: number;
  channels: number;
  rateHz: number;
  bits: number;
  block: number;
}
const format = (change: Partial<Format> = {}): number[] => {
  const f = { tag: 1, channels: 1, rateHz: 48_000, bits: 16, block: 2, ...change };
  return chunk("fmt ", [
    ...u16(f.tag),
    ...u16(f.channels),
    ...u32(f.rateHz),
    ...u32(f.rateHz * f.block),
    ...u16(f.block),
    ...u16(f.bits),
  ]);
};

/** [n] bytes that repeat only after 2^32, the same each time; even values, so that no chunk name appears. */
function noise(length: number): number[] {
  let state = 0x12345678;
  return Array.from({ length }, () => {
    state = (Math.imul(state, 1_664_525) + 1_013_904_223) | 0;
    return (state >>> 24) | 0x80;
  });
}

const SAMPLES = noise(4000);
const data = (size = SAMPLES.length): number[] => chunk("data", SAMPLES, size);

const PNG = [
  137,
  80,
  78,
  71,
  13,
  10,
  26,
  10,
  0,
  0,
  0,
  13,
  ...ascii("IHDR"),
  ...u32(0),
  ...noise(300),
];

/** A whole 24-bit recording of half a second, to be cut and bent. */
function toTone(): Uint8Array<ArrayBuffer> {
  const tone = Float64Array.from(
    { length: 24_000 },
    (_, n) => 0.5 * Math.sin((2 * Math.PI * 997 * n) / 48_000),
  );
  return writeWav([tone], 48_000, "pcm24");
}

/** Every file of the corpus, made afresh. */
export function makeMalformedFiles(): MalformedFile[] {
  const tone = toTone();
  const file = (name: string, code: ErrorCode, bytes: ArrayLike<number>): MalformedFile => ({
    name,
    code,
    bytes: Uint8Array.from(bytes),
  });
  const withSize = (at: number, value: number): Uint8Array<ArrayBuffer> => {
    const bent = tone.slice();
    new DataView(bent.buffer).setUint32(at, value, true);
    return bent;
  };
  return [
    file("nothing at all", "audio.empty", []),
    file("one byte", "audio.not-audio", [82]),
    file("only RIFF", "audio.not-audio", ascii("RIFF")),
    file("text", "audio.not-audio", ascii("frequency;level\n20;76.1\n25;76.4\n")),
    file("JSON", "audio.not-audio", ascii('{"loudspeaker":"Osier 8A","runs":[]}')),
    file(
      "HTML of a sign-in page",
      "audio.not-audio",
      ascii("<!doctype html><title>Sign in</title>"),
    ),
    file("PNG", "audio.not-audio", PNG),
    file("PDF", "audio.not-audio", ascii("%PDF-1.7\n1 0 obj\n<<>>\nendobj\n")),
    file("ZIP", "audio.not-audio", [...ascii("PK"), 3, 4, ...noise(200)]),
    file("random bytes", "audio.not-audio", noise(5000)),
    file("zeros", "audio.not-audio", new Uint8Array(5000)),
    file("another RIFF: AVI", "audio.not-audio", [
      ...ascii("RIFF"),
      ...u32(4000),
      ...ascii("AVI "),
      ...SAMPLES,
    ]),
    file("big-endian RIFX", "audio.format-unsupported", [
      ...ascii("RIFX"),
      0,
      0,
      16,
      0,
      ...ascii("WAVE"),
      ...SAMPLES,
    ]),
    file("AIFF", "audio.format-unsupported", [
      ...ascii("FORM"),
      0,
      0,
      16,
      0,
      ...ascii("AIFF"),
      ...SAMPLES,
    ]),
    file("MP3 with tag", "audio.format-unsupported", [...ascii("ID3"), 4, 0, 0, ...noise(500)]),
    file("Ogg", "audio.format-unsupported", [...ascii("OggS"), 0, 2, ...noise(500)]),
    file("header only, no chunk", "audio.truncated", [
      ...ascii("RIFF"),
      ...u32(4),
      ...ascii("WAVE"),
    ]),
    file("cut inside the format", "audio.truncated", tone.subarray(0, 30)),
    file("cut before the samples", "audio.truncated", tone.subarray(0, 40)),
    file("cut after half of the samples", "audio.truncated", tone.subarray(0, 44 + 36_000)),
    file("cut by one byte", "audio.truncated", tone.subarray(0, tone.length - 1)),
    file("data chunk of no bytes", "audio.empty", riff(format(), chunk("data", []))),
    file("format but no data chunk", "audio.empty", riff(format(), chunk("LIST", noise(64)))),
    file("data before format", "audio.length-lies", riff(data(), format())),
    file("data without format", "audio.length-lies", riff(data())),
    file("claims 2 GiB", "audio.truncated", withSize(40, 0x8000_0000)),
    file("claims 4 GiB less one", "audio.length-lies", withSize(40, 0xffff_ffff)),
    file("claims 0 bytes and holds many", "audio.length-lies", withSize(40, 0)),
    file("claims fewer bytes than follow", "audio.length-lies", withSize(40, 3000)),
    file(
      "claims a split block",
      "audio.length-lies",
      riff(format({ bits: 24, block: 3 }), chunk("data", noise(4000))),
    ),
    file("format chunk of 4 GiB", "audio.truncated", withSize(16, 0xffff_fff0)),
    file("format chunk of 8 bytes", "audio.length-lies", riff(chunk("fmt ", noise(8)), data())),
    file("no channels", "audio.length-lies", riff(format({ channels: 0 }), data())),
    file("65 535 channels", "audio.length-lies", riff(format({ channels: 65_535 }), data())),
    file("a rate of 0 Hz", "audio.length-lies", riff(format({ rateHz: 0 }), data())),
    file("a rate of 4 GHz", "audio.length-lies", riff(format({ rateHz: 0xffff_ffff }), data())),
    file("blocks of no bytes", "audio.length-lies", riff(format({ block: 0 }), data())),
    file("16 bits in blocks of 7", "audio.length-lies", riff(format({ block: 7 }), data())),
    file("0 bits", "audio.length-lies", riff(format({ bits: 0 }), data())),
    file("40-bit PCM", "audio.format-unsupported", riff(format({ bits: 40, block: 5 }), data())),
    file("16-bit float", "audio.format-unsupported", riff(format({ tag: 3 }), data())),
    file("ADPCM", "audio.format-unsupported", riff(format({ tag: 2 }), data())),
    file("MPEG in WAV", "audio.format-unsupported", riff(format({ tag: 0x55 }), data())),
    file(
      "extensible without its extension",
      "audio.format-unsupported",
      riff(format({ tag: 0xfffe }), data()),
    ),
    file("RF64 without ds64", "audio.length-lies", [
      ...ascii("RF64"),
      ...u32(0xffff_ffff),
      ...ascii("WAVE"),
      ...format(),
      ...data(0xffff_ffff),
    ]),
    file("RF64 that claims 16 EiB", "audio.truncated", [
      ...ascii("RF64"),
      ...u32(0xffff_ffff),
      ...ascii("WAVE"),
      ...chunk("ds64", [...Array.from({ length: 24 }, () => 255), 0, 0, 0, 0]),
      ...format(),
      ...data(0xffff_ffff),
    ]),
    file(
      "float samples that are no numbers",
      "audio.format-unsupported",
      writeWav([[0.1, NaN, 0.2]], 48_000, "float32"),
    ),
    file(
      "float samples without end",
      "audio.format-unsupported",
      writeWav([[0.1, Infinity, 0.2]], 48_000, "float64"),
    ),
  ];
}
