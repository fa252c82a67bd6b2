import { describe, expect, it } from "vitest";
import { simulateNoise, simulateTone } from "../../tests/support/simulated-sweep";
import { measureTone, toFullScaleDb } from "./calibration";
import { Plans } from "./cell-power";

describe("measureTone", () => {
  it.each([
    ["clean", {}, 1000, 48_000],
    ["hum as strong as the tone", { humAmplitude: 0.05 }, 1000, 48_000],
    ["noise 30 dB under it", { noiseRms: 0.0011 }, 1000, 44_100],
    ["a calibrator 0.7 % off its frequency", {}, 1007, 96_000],
    ["short", { seconds: 0.5 }, 1000, 48_000],
  ])("finds the level within 0.02 dB: %s", (_, options, frequencyHz, rateHz) => {
    const tone = measureTone(
      simulateTone("cal.wav", rateHz, 0.05, frequencyHz, options),
      1000,
      new Plans(),
    );
    expect(Math.abs(20 * Math.log10(tone.amplitude / 0.05))).toBeLessThan(0.02);
    expect(Math.abs(tone.frequencyHz - frequencyHz)).toBeLessThan(0.5);
  });

  it("reads the steady part where the calibrator was put on late and taken off early", () => {
    const tone = simulateTone("cal.wav", 48_000, 0.05);
    tone.samples.fill(0, 0, 60_000);
    tone.samples.fill(0, 200_000);
    expect(
      Math.abs(20 * Math.log10(measureTone(tone, 1000, new Plans()).amplitude / 0.05)),
    ).toBeLessThan(0.02);
  });

  it.each([
    ["noise", simulateNoise("cal.wav", 48_000, 0.05, 5), "calibration.not-a-tone"],
    ["silence", simulateNoise("cal.wav", 48_000, 0, 5), "calibration.not-a-tone"],
    [
      "a tone elsewhere",
      simulateTone("cal.wav", 48_000, 0.05, 250, { noiseRms: 1e-4 }),
      "calibration.not-a-tone",
    ],
    [
      "a tenth of a second",
      simulateTone("cal.wav", 48_000, 0.05, 1000, { seconds: 0.1 }),
      "run.too-short",
    ],
  ])("refuses %s", (_, recording, code) => {
    expect(() => measureTone(recording, 1000, new Plans())).toThrow(
      expect.objectContaining({ code, file: "cal.wav" }),
    );
  });

  it("94 dB recorded at -30 dBFS puts a signal of -12.5 dBFS at 111.5 dB (worked check 44)", () => {
    const amplitude = 10 ** (-30 / 20);
    const fullScaleDb = toFullScaleDb(
      { amplitude, frequencyHz: 1000, purityDb: 80, spreadDb: 0 },
      94,
    );
    expect(fullScaleDb + -12.5).toBeCloseTo(111.5, 9);
  });
});
