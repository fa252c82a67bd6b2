/** Recordings and tables byte by byte, docs/check-values.md section 13. */
import { toByteSource } from "../audio/byte-source";
import { readTable } from "../audio/read-table";
import { readWav } from "../audio/read-wav";
import { toChecks, type CheckRow } from "./check";

const ascii = (text: string): number[] => Array.from(text, (c) => c.charCodeAt(0));
const little = (value: number, bytes: number): number[] =>
  Array.from({ length: bytes }, (_, i) => Math.floor(value / 256 ** i) % 256);
const chunk = (id: string, content: number[], size = content.length): number[] => [
  ...ascii(id),
  ...little(size, 4),
  ...content,
  ...(content.length % 2 === 1 ? [0] : []),
];
const wave = (...chunks: number[][]): Uint8Array => {
  const body = chunks.flat();
  return Uint8Array.from([
    ...ascii("RIFF"),
    ...little(body.length + 4, 4),
    ...ascii("WAVE"),
    ...body,
  ]);
};
const format = (tag: number, bits: number, more: number[] = []): number[] =>
  chunk("fmt ", [
    ...little(tag, 2),
    ...little(1, 2),
    ...little(48_000, 4),
    ...little((48_000 * bits) / 8, 4),
    ...little(bits / 8, 2),
    ...little(bits, 2),
    ...more,
  ]);
/** cbSize 22, valid bits, speakers, sub-format GUID of PCM or float. */
const GUID_TAIL = [0, 0, 0, 0, 0x10, 0, 0x80, 0, 0, 0xaa, 0, 0x38, 0x9b, 0x71];
const extension = (validBits: number, tag: number): number[] => [
  ...little(22, 2),
  ...little(validBits, 2),
  ...little(0, 4),
  ...little(tag, 2),
  ...GUID_TAIL,
];
const float32 = (value: number): number[] => [...new Uint8Array(Float32Array.of(value).buffer)];
const float64 = (value: number): number[] => [...new Uint8Array(Float64Array.of(value).buffer)];

const EXTENSIBLE = 0xfffe;
const OPEN = 0xffffffff;
const read = (bytes: Uint8Array) => readWav(toByteSource(bytes), "check.wav");
const firstSample = (...chunks: number[][]): number =>
  read(wave(...chunks)).samples[0]?.[0] ?? Number.NaN;

/** RF64 or BW64: sizes in ds64, 28 bytes where its table is empty. */
const long = (id: string, frames: number): Uint8Array =>
  Uint8Array.from([
    ...ascii(id),
    ...little(OPEN, 4),
    ...ascii("WAVE"),
    ...chunk("ds64", [
      ...little(4 + 36 + 24 + 8 + 2 * frames, 8),
      ...little(2 * frames, 8),
      ...little(frames, 8),
      ...little(0, 4),
    ]),
    ...format(1, 16),
    ...chunk("data", little(0x4000, 2 * frames), OPEN),
  ]);

const EXACT = 1e-9;
const PCM = "RIFF/WAVE, tag 1: 8-bit unsigned, wider signed [M]";
const WAVE_EXTENSIBLE = "WAVEFORMATEXTENSIBLE: valid bits left-aligned [R25]";
const LONG = "ds64 of EBU Tech 3306, ITU-R BS.2088 [R26, C]";
const FRD = "FRD-style text, de facto [M, R24]";

const sample = (
  what: string,
  chunks: number[][],
  expected: number,
  source: string,
  worked: number[] = [],
): CheckRow => ({
  what,
  compute: () => firstSample(...chunks),
  expected,
  tolerance: EXACT,
  unit: "",
  source,
  worked,
});

const data = (...bytes: number[]): number[] => chunk("data", bytes);
const half16 = data(...little(0x4000, 2));

const level = (what: string, lines: string[], frequencyHz: number, levelDb: number): CheckRow => ({
  what,
  compute: () => {
    const table = readTable(Uint8Array.from(Buffer.from(lines.join("\r\n"), "utf8")), "check.frd");
    return table.levelDb[table.frequencyHz.indexOf(frequencyHz)] ?? Number.NaN;
  },
  expected: levelDb,
  tolerance: EXACT,
  unit: "dB",
  source: FRD,
});

export const FILE_LAYOUT_CHECKS = toChecks("file-layouts", {
  "pcm-8": sample("8-bit, byte 0xC0", [format(1, 8), data(0xc0)], 0.5, PCM),
  "pcm-16": sample("16-bit, 0x4000", [format(1, 16), half16], 0.5, PCM),
  "pcm-24": sample("24-bit, 0xC00000", [format(1, 24), data(0, 0, 0xc0)], -0.5, PCM),
  "pcm-32": sample("32-bit, 0x40000000", [format(1, 32), data(0, 0, 0, 0x40)], 0.5, PCM),
  "float-32": sample(
    "32-bit float",
    [format(3, 32), data(...float32(-0.25))],
    -0.25,
    "RIFF/WAVE, tag 3 [M]",
  ),
  "float-64": sample(
    "64-bit float",
    [format(3, 64), data(...float64(0.375))],
    0.375,
    "RIFF/WAVE, tag 3 [M]",
  ),
  "fmt-18": sample(
    "format chunk of 18 bytes",
    [format(1, 16, little(0, 2)), half16],
    0.5,
    "fmt of 16, 18 or 40 bytes [M]",
  ),
  "extensible-24-in-32": sample(
    "extensible, 24 valid bits in 32: 0x40000000",
    [format(EXTENSIBLE, 32, extension(24, 1)), data(0, 0, 0, 0x40)],
    0.5,
    WAVE_EXTENSIBLE,
    [50],
  ),
  "extensible-float": sample(
    "extensible float",
    [format(EXTENSIBLE, 32, extension(32, 3)), data(...float32(0.5))],
    0.5,
    "sub-format 00000003-0000-0010-8000-00AA00389B71 [M]",
  ),
  "odd-chunk": sample(
    "odd chunk before the samples: its pad byte is skipped",
    [format(1, 16), chunk("LIST", [1, 2, 3]), half16],
    0.5,
    "chunks are padded to even length [M]",
    [50],
  ),
  rf64: {
    what: "RF64 with a ds64 of 28 bytes: samples",
    compute: () => read(long("RF64", 5)).frames,
    expected: 5,
    tolerance: EXACT,
    unit: "",
    source: LONG,
    worked: [50],
  },
  bw64: {
    what: "BW64 with a ds64 of 28 bytes: samples",
    compute: () => read(long("BW64", 7)).frames,
    expected: 7,
    tolerance: EXACT,
    unit: "",
    source: LONG,
    worked: [50],
  },
  "table-comments": level(
    "table under comments, with phase",
    ["* made by hand", "; and #", "100 81.5 -170", "200 82.25 170"],
    200,
    82.25,
  ),
  "table-commas": level(
    "table with decimal commas",
    ["Hz;dB", "100,5;81,25", "200;82,5"],
    100.5,
    81.25,
  ),
  "table-tabs": level(
    "table between tabs, head in another order",
    ["SPL [dB]\tFrequency [Hz]", "81.5\t100", "82.5\t200"],
    100,
    81.5,
  ),
});
