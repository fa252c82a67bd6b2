import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { AppError } from "../errors/app-error";
import { toByteSource, withFileSource } from "./byte-source";
import { readWav } from "./read-wav";
import { WAV_FORMATS, writeWav } from "./write-wav";

const bytes = (...parts: (string | number[] | Uint8Array)[]): Uint8Array =>
  Uint8Array.from(
    parts.flatMap((p) => (typeof p === "string" ? Array.from(p, (c) => c.charCodeAt(0)) : [...p])),
  );
const u16 = (n: number): number[] => [n & 255, (n >> 8) & 255];
const u32 = (n: number): number[] => [...u16(n & 0xffff), ...u16(Math.floor(n / 65_536))];
const u64 = (n: number): number[] => [...u32(n), 0, 0, 0, 0];
const chunk = (id: string, content: Uint8Array | number[], size = content.length): Uint8Array =>
  bytes(id, u32(size), content, content.length % 2 ? [0] : []);
const riff = (...chunks: Uint8Array[]): Uint8Array => {
  const body = bytes("WAVE", ...chunks);
  return bytes("RIFF", u32(body.length), body);
};
const fmt = (
  tag: number,
  channels: number,
  bits: number,
  extra: number[] = [],
  block = (channels * bits) / 8,
): Uint8Array =>
  chunk("fmt ", [
    ...u16(tag),
    ...u16(channels),
    ...u32(48_000),
    ...u32(48_000 * block),
    ...u16(block),
    ...u16(bits),
    ...extra,
  ]);
const GUID_TAIL = [0, 0, 0, 0, 0x10, 0, 0x80, 0, 0, 0xaa, 0, 0x38, 0x9b, 0x71];
const extension = (valid: number, tag: number): number[] => [
  ...u16(22),
  ...u16(valid),
  ...u32(0),
  ...u16(tag),
  ...GUID_TAIL,
];
const read = (file: Uint8Array, wanted?: number[]): number[][] =>
  readWav(toByteSource(file), "take.wav", wanted).samples.map((s) => [...s]);

describe("readWav reads", () => {
  it.each([
    ["8-bit unsigned", riff(fmt(1, 1, 8), chunk("data", [0, 128, 192])), [-1, 0, 0.5]],
    ["16-bit", riff(fmt(1, 1, 16), chunk("data", [0, 0x40, 0, 0x80])), [0.5, -1]],
    ["24-bit", riff(fmt(1, 1, 24), chunk("data", [0, 0, 0xc0, 0, 0, 0x20])), [-0.5, 0.25]],
    [
      "extensible, 24 valid bits in 32 (worked check 50)",
      riff(fmt(0xfffe, 1, 32, extension(24, 1)), chunk("data", u32(0x40000000))),
      [0.5],
    ],
    [
      "extensible float",
      riff(fmt(0xfffe, 1, 32, extension(32, 3)), chunk("data", [0, 0, 0, 0x3f])),
      [0.5],
    ],
    [
      "odd chunks with their pad byte (worked check 50)",
      riff(chunk("LIST", [1, 2, 3]), fmt(1, 1, 16), chunk("junk", [9]), chunk("data", [0, 0x40])),
      [0.5],
    ],
    [
      "chunks after the samples",
      riff(fmt(1, 1, 16), chunk("data", [0, 0x40]), chunk("LIST", [1, 2, 3, 4])),
      [0.5],
    ],
    [
      "zero padding after the samples",
      bytes(riff(fmt(1, 1, 16), chunk("data", [0, 0x40])), [0, 0, 0, 0, 0, 0]),
      [0.5],
    ],
    [
      "RF64 with sizes in ds64",
      bytes(
        "RF64",
        u32(0xffffffff),
        "WAVE",
        chunk("ds64", [...u64(80), ...u64(4), ...u64(2), ...u32(0)]),
        fmt(1, 1, 16),
        "data",
        u32(0xffffffff),
        [0, 0x40, 0, 0xc0],
      ),
      [0.5, -0.5],
    ],
    [
      "BW64 with sizes of its own",
      bytes(
        "BW64",
        u32(0xffffffff),
        "WAVE",
        chunk("ds64", [...u64(80), ...u64(2), ...u64(0), ...u32(0)]),
        fmt(1, 1, 16),
        chunk("data", [0, 0x40]),
      ),
      [0.5],
    ],
  ])("%s", (_, file, expected) => {
    expect(read(file)).toEqual([expected]);
  });

  it("the channel that is asked for, never a mix", () => {
    const stereo = writeWav(
      [
        [0.5, 0.25],
        [-0.5, -0.25],
      ],
      48_000,
      "pcm24",
    );
    expect(read(stereo)).toEqual([[0.5, 0.25]]);
    expect(read(stereo, [2, 1])).toEqual([
      [-0.5, -0.25],
      [0.5, 0.25],
    ]);
  });

  it("valid bits set the full scale", () => {
    const file = riff(fmt(0xfffe, 1, 32, extension(24, 1)), chunk("data", u32(0)));
    expect(readWav(toByteSource(file), "take.wav").fullScale).toBe(1 - 2 ** -23);
  });

  it("a file by its handle as it does memory, across read blocks", async () => {
    const folder = mkdtempSync(join(tmpdir(), "read-wav-"));
    const samples = Float64Array.from({ length: 800_001 }, (_, n) => Math.sin(n) / 2);
    writeFileSync(join(folder, "long.wav"), writeWav([samples], 96_000, "pcm24"));
    const decoded = await withFileSource(join(folder, "long.wav"), (source) =>
      readWav(source, "long.wav"),
    );
    rmSync(folder, { recursive: true });
    expect(decoded.frames).toBe(800_001);
    const worst = samples.reduce(
      (w, x, n) => Math.max(w, Math.abs(x - decoded.samples[0]![n]!)),
      0,
    );
    expect(worst).toBeLessThanOrEqual(2 ** -24 + 1e-9); // half a step of 24 bits
  });

  it("back what was written, in every format (property)", () => {
    const step = {
      pcm16: 2 ** -16,
      pcm24: 2 ** -24,
      pcm32: 2 ** -25,
      float32: 2 ** -25,
      float64: 2 ** -25,
    };
    fc.assert(
      fc.property(
        fc.constantFrom(...WAV_FORMATS),
        fc.array(fc.double({ min: -1, max: 0.999, noNaN: true }), { minLength: 1, maxLength: 40 }),
        fc.integer({ min: 1, max: 3 }),
        (format, samples, channels) => {
          const back = read(
            writeWav(
              Array.from({ length: channels }, () => samples),
              44_100,
              format,
            ),
            [channels],
          )[0]!;
          expect(back).toHaveLength(samples.length);
          samples.forEach((x, n) =>
            expect(Math.abs(x - back[n]!)).toBeLessThanOrEqual(step[format] * 1.001),
          );
        },
      ),
    );
  });
});

const good = riff(fmt(1, 1, 16), chunk("data", [1, 2, 3, 4, 5, 6, 7, 8]));

describe("readWav refuses", () => {
  it.each([
    ["nothing", new Uint8Array(0), "audio.empty"],
    ["text", bytes("this is not a recording at all"), "audio.not-audio"],
    ["a picture", bytes([0x89], "PNG\r\n", [0x1a, 10, 0, 0, 0, 13]), "audio.not-audio"],
    ["MPEG audio", bytes("ID3", [4, 0, 0, 0, 0, 0, 0, 0, 0]), "audio.format-unsupported"],
    ["AIFF", bytes("FORM", u32(4), "AIFF"), "audio.format-unsupported"],
    ["big-endian WAV", bytes("RIFX", u32(4), "WAVE"), "audio.format-unsupported"],
    ["A-law", riff(fmt(6, 1, 8), chunk("data", [1])), "audio.format-unsupported"],
    ["a header alone", good.subarray(0, 12), "audio.truncated"],
    ["a file cut in its samples", good.subarray(0, good.length - 3), "audio.truncated"],
    [
      "a chunk that passes the end",
      riff(chunk("LIST", [1, 2], 5000), fmt(1, 1, 16)),
      "audio.truncated",
    ],
    ["no samples", riff(fmt(1, 1, 16), chunk("data", [])), "audio.empty"],
    ["no data chunk", riff(fmt(1, 1, 16), chunk("LIST", [1, 2, 3, 4])), "audio.empty"],
    [
      "a length of 0 with samples behind it",
      riff(fmt(1, 1, 16), chunk("data", [1, 2, 3, 4], 0)),
      "audio.length-lies",
    ],
    [
      "an open length",
      riff(fmt(1, 1, 16), chunk("data", [1, 2, 3, 4], 0xffffffff)),
      "audio.length-lies",
    ],
    [
      "a length of half a block",
      riff(fmt(1, 1, 16), chunk("data", [1, 2, 3, 4], 3)),
      "audio.length-lies",
    ],
    [
      "more samples than claimed",
      riff(fmt(1, 1, 16), chunk("data", [1, 2, 200, 4, 5, 6, 250, 8], 2)),
      "audio.length-lies",
    ],
    [
      "samples before their format",
      riff(chunk("data", [1, 2]), fmt(1, 1, 16)),
      "audio.length-lies",
    ],
    ["no channels", riff(fmt(1, 0, 16, [], 2), chunk("data", [1, 2])), "audio.length-lies"],
    [
      "blocks that do not fit the bits",
      riff(fmt(1, 2, 16, [], 3), chunk("data", [1, 2, 3])),
      "audio.length-lies",
    ],
    [
      "RF64 without ds64",
      bytes("RF64", u32(0xffffffff), "WAVE", fmt(1, 1, 16), "data", u32(0xffffffff), [1, 2]),
      "audio.length-lies",
    ],
    [
      "samples that are no numbers",
      riff(fmt(3, 1, 32), chunk("data", [0, 0, 0xc0, 0x7f])),
      "audio.format-unsupported",
    ],
  ])("%s", (_, file, code) => {
    expect(() => read(file)).toThrow(expect.objectContaining({ code, file: "take.wav" }));
  });

  it("a channel that is not there, naming both numbers", () => {
    expect(() => read(good, [2])).toThrow("take.wav has one channel; channel 2 was asked for.");
  });

  it("anything else with a typed error, never a crash (fuzzed bytes and cuts)", () => {
    const outcome = (file: Uint8Array): unknown => {
      try {
        return readWav(toByteSource(file), "x.wav").frames;
      } catch (error) {
        return error instanceof AppError ? error.code : error;
      }
    };
    fc.assert(
      fc.property(
        fc.uint8Array({ maxLength: 60 }),
        fc.nat(good.length),
        fc.nat(255),
        (noise, at, byte) => {
          const touched = good.slice();
          touched[Math.min(at, good.length - 1)] = byte;
          for (const file of [
            noise,
            touched,
            bytes(good.subarray(0, at), noise),
            bytes("RIFF", u32(40), "WAVE", noise),
          ]) {
            expect(outcome(file)).toSatisfy((o) => typeof o === "number" || typeof o === "string");
          }
        },
      ),
      { numRuns: 500 },
    );
  });
});
