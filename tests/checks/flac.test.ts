/** FLAC by other programs is read to its last bit; cut and damaged files are refused by name. */
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { toByteSource } from "../../lib/audio/byte-source";
import { readRecording } from "../../lib/audio/read-recording";
import { writeWav } from "../../lib/audio/write-wav";
import { AppError } from "../../lib/errors/app-error";
import { runFfmpeg, runSox } from "../support/programs";
import { simulateNoise } from "../support/simulated-sweep";

const RATE_HZ = 48_000;
const folder = mkdtempSync(join(tmpdir(), "flac-"));
const at = (name: string): string => join(folder, name);

beforeAll(async () => {
  // Two channels that differ, with the ends of the range among them.
  const channels = [11, 12].map((seed) =>
    simulateNoise("n", RATE_HZ, 0.2, 1, seed).samples.map((x) => Math.max(-1, Math.min(1, x))),
  );
  channels[0]?.set([1, -1, 0], 0);
  writeFileSync(at("16.wav"), writeWav(channels, RATE_HZ, "pcm16"));
  writeFileSync(at("24.wav"), writeWav(channels, RATE_HZ, "pcm24"));
  await runSox(["-D", at("16.wav"), at("16.flac")]);
  await runFfmpeg(["-i", at("24.wav"), "-sample_fmt", "s32", at("24.flac")]);
});
afterAll(() => rmSync(folder, { recursive: true }));

const read = (name: string, channel: number) =>
  readRecording(toByteSource(readFileSync(at(name))), { file: name, channel });

async function codeOf(bytes: Uint8Array): Promise<string> {
  try {
    await readRecording(toByteSource(bytes), { file: "take.flac" });
    return "read";
  } catch (error) {
    return error instanceof AppError ? error.code : `crash: ${String(error)}`;
  }
}

describe("FLAC", () => {
  it.each([
    [16, 1],
    [16, 2],
    [24, 1],
    [24, 2],
  ])("%i bits, channel %i: the same samples as the WAV it came from", async (bits, channel) => {
    const wav = await read(`${bits}.wav`, channel);
    const flac = await read(`${bits}.flac`, channel);
    expect(flac.audio).toEqual(wav.audio);
    expect(flac.recording.samples.length).toBe(RATE_HZ);
    const differing = flac.recording.samples.findIndex((x, n) => x !== wav.recording.samples[n]);
    expect(differing).toBe(-1);
  });

  it.each([
    ["cut in the middle", (b: Uint8Array) => b.subarray(0, b.length / 2), "audio.truncated"],
    ["cut in its header", (b: Uint8Array) => b.subarray(0, 30), "audio.truncated"],
    [
      "without its length",
      (b: Uint8Array) =>
        Uint8Array.from(b, (x, i) => (i === 21 ? x & 0xf0 : i >= 22 && i < 26 ? 0 : x)),
      "audio.length-lies",
    ],
    [
      "overwritten in the middle",
      (b: Uint8Array) => Uint8Array.from(b, (x, i) => (Math.abs(i - b.length / 2) < 40 ? 0x55 : x)),
      "audio.truncated",
    ],
  ])("is refused %s", async (_, damage, code) => {
    expect(await codeOf(damage(readFileSync(at("16.flac"))))).toBe(code);
  });

  it("is refused without a channel that was asked for", async () => {
    await expect(read("16.flac", 3)).rejects.toMatchObject({ code: "audio.channel-missing" });
  });
});
