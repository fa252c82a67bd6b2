import { describe, expect, it } from "vitest";
import { toByteSource } from "../../audio/byte-source";
import { writeWav, type WavFormat } from "../../audio/write-wav";
import { labSettingsSchema } from "../../labs/settings-schema";
import { planSchema } from "../../series/plan-schema";
import { toPlannedRuns } from "../../series/planned-runs";
import { arrivalReportSchema, type CheckCode } from "../arrival-schema";
import type { ArrivalRequest, ArrivalSibling } from "./arrival-request";
import { checkArrival } from "./check-arrival";
import { toVerdict } from "./verdict";

const plan = planSchema.parse({});
const planned = toPlannedRuns(plan, "fennel5");
const place = (slot: string) => planned.find((run) => run.slot === slot) ?? null;

const tone = (amplitude: number, length = 48_000) =>
  Float64Array.from({ length }, (_, n) => amplitude * Math.sin((2 * Math.PI * 1000 * n) / 48_000));

const hiss = (rms: number, length = 48_000) => {
  let state = 7;
  return Float64Array.from({ length }, () => {
    state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0;
    return rms * Math.sqrt(12) * (state / 2 ** 32 - 0.5);
  });
};

function request(
  channels: Float64Array[],
  over: {
    slot?: string | null;
    channel?: number;
    rateHz?: number;
    format?: WavFormat;
    siblings?: ArrivalSibling[];
    bytes?: Uint8Array;
  } = {},
): ArrivalRequest {
  const bytes = over.bytes ?? writeWav(channels, over.rateHz ?? 48_000, over.format ?? "pcm24");
  return {
    run: {
      file: "76.wav",
      digest: "a".repeat(64),
      channel: over.channel ?? 1,
      place: over.slot === null ? null : place(over.slot ?? "calibrator-before"),
    },
    plan,
    limits: labSettingsSchema.parse({}).arrival,
    engineVersion: "1.0.0",
    siblings: over.siblings ?? [],
    open: () => toByteSource(bytes),
  };
}

const clipped = (samples: number) => {
  const signal = tone(0.5);
  signal.fill(1, 1000, 1000 + samples);
  return signal;
};
const sibling = (channel: number): ArrivalSibling => ({
  file: "take.wav",
  digest: "a".repeat(64),
  channel,
  place: place("short-86"),
  state: "passed",
  report: null,
});

describe("checkArrival", () => {
  it("gives the figures of the file", async () => {
    const report = await checkArrival(request([tone(0.5)]));
    expect(arrivalReportSchema.parse(report)).toEqual(report);
    expect(report).toMatchObject({
      format: "24-bit PCM",
      rate_Hz: 48_000,
      channels: 1,
      length_s: 1,
    });
    // A sine of amplitude 0.5: peak 20 lg 0.5, rms 3.01 dB under it.
    expect(report.peak_dBFS).toBeCloseTo(-6.02, 2);
    expect(report.rms_dBFS).toBeCloseTo(-9.03, 2);
    expect(report.envelope.low).toHaveLength(400);
    expect(Math.max(...report.envelope.high)).toBeCloseTo(0.5, 2);
    expect(toVerdict(report)).toBe("passed");
  });

  it.each<[string, ArrivalRequest, CheckCode, RegExp]>([
    ["another rate", request([tone(0.5)], { rateHz: 44_100 }), "rate", /44\.1 kHz.*48 kHz/],
    ["three flat samples", request([clipped(3)]), "clipping", /on 3 samples, between 0\.02/],
    [
      "16 bits that clipped, in a file of 24",
      request([clipped(3).map((x) => Math.min(x, 1 - 2 ** -15))]),
      "clipping",
      /on 3 samples/,
    ],
    [
      "a flat top in float",
      request([clipped(3)], { format: "float32" }),
      "clipping",
      /on 3 samples/,
    ],
    [
      "float beyond full scale",
      request([tone(1.2)], { format: "float32" }),
      "clipping",
      /clipped on/,
    ],
    ["DC", request([tone(0.5).map((x) => x + 0.05)]), "dc-offset", /−26\.0 dBFS of DC/],
    [
      "a silent channel",
      request([tone(0.5), tone(0)], { channel: 2 }),
      "silence",
      /Channel 2 is digital silence/,
    ],
    ["next to no sound", request([tone(1e-4)]), "silence", /peaks at −80\.0 dBFS/],
    [
      "digital silence for room noise",
      request([tone(0)], { slot: "ambient" }),
      "silence",
      /digital silence/,
    ],
    ["a channel that is not there", request([tone(0.5)], { channel: 3 }), "channel", /channel 3/],
    [
      "the bytes of a sibling",
      request([tone(0.5)], { siblings: [sibling(1)] }),
      "duplicate",
      /take\.wav \(86 dB short-term\)/,
    ],
    [
      "no audio",
      request([], { bytes: new TextEncoder().encode("hello") }),
      "readable",
      /not a WAV/,
    ],
  ])("fails %s, and says the remedy", async (_name, asked, code, finding) => {
    const report = await checkArrival(asked);
    const failed = report.checks.filter((check) => check.verdict === "fail");
    expect(failed.map((check) => check.code)).toEqual([code]);
    expect(failed[0]?.finding).toMatch(finding);
    expect(failed[0]?.remedy).not.toBe("");
    expect(toVerdict(report)).toBe("failed");
  });

  it.each<[string, ArrivalRequest]>([
    ["two samples at full scale", request([clipped(2)])],
    ["float peaks at full scale, not beyond", request([tone(1)], { format: "float32" })],
    ["quiet room noise", request([hiss(1e-4)], { slot: "ambient" })],
    ["a second channel by choice", request([tone(0), tone(0.5)], { channel: 2 })],
    ["another channel of the same file", request([tone(0.5)], { siblings: [sibling(2)] })],
    ["a file without a place", request([tone(0.5)], { slot: null })],
  ])("passes %s", async (_name, asked) => {
    expect(toVerdict(await checkArrival(asked))).toBe("passed");
  });

  it("says which channel it took", async () => {
    const report = await checkArrival(request([tone(0), tone(0.5)], { channel: 2 }));
    const check = report.checks.find((one) => one.code === "channel");
    expect(check?.finding).toBe("Channel 2 of 2 is used; the others are left out, never mixed in.");
  });
});
