/** What each invented loudspeaker is there to show, measured with steady tones. */
import { describe, expect, it } from "vitest";
import { LOUDSPEAKERS } from "./loudspeakers";
import { findStaticOnsetDb, measureStaticLossDb, measureSteadyTone } from "./steady-tone";
import { createLoudspeaker, playThrough } from "./virtual-loudspeaker";

const { osier8a, brackenMini, harbourTwo, samphire3, fennel5, loom6, ketch12 } = LOUDSPEAKERS;

describe("invented loudspeakers", () => {
  it("Osier 8A: a limiter holds the bass at a ceiling, the rest is free", () => {
    // Threshold 93.5 dB behind a crossover that takes 1.6 dB off at 50 Hz.
    expect(findStaticOnsetDb(osier8a, 50, 1 / 3, [84, 104])).toBeCloseTo(95.3, 1);
    const rise =
      measureSteadyTone(osier8a, 40, 108).levelDb - measureSteadyTone(osier8a, 40, 102).levelDb;
    expect(rise / 6).toBeLessThan(0.3);
    for (const hz of [160, 1000, 8000])
      expect(measureStaticLossDb(osier8a, hz, 102)).toBeLessThan(0.05);
  });

  it("Bracken Mini: the bass runs out of excursion, distortion growing faster than the output", () => {
    expect(measureStaticLossDb(brackenMini, 63, 102)).toBeGreaterThan(0.6);
    const [low, high] = [86, 102].map((db) => measureSteadyTone(brackenMini, 63, db));
    const thirdGrewDb = 20 * Math.log10((high?.harmonics[1] ?? 0) / (low?.harmonics[1] ?? 1));
    const outputGrewDb = (high?.levelDb ?? 0) - (low?.levelDb ?? 0);
    expect(thirdGrewDb).toBeGreaterThan(1.5 * outputGrewDb);
    expect(measureStaticLossDb(brackenMini, 500, 102)).toBeLessThan(0.05);
  });

  it("Harbour Two: nothing gives out up to 102 dB", () => {
    for (const hz of [40, 63, 125, 315, 1000, 2500, 10_000]) {
      expect(Math.abs(measureStaticLossDb(harbourTwo, hz, 102))).toBeLessThan(0.05);
      const [second = 1, third = 1] = measureSteadyTone(harbourTwo, hz, 102).harmonics;
      expect(Math.hypot(second, third)).toBeLessThan(0.03);
    }
  });

  it("Samphire 3: its bass is withdrawn from the quietest run on, by the same share of every step", () => {
    const losses = [68, 74, 80].map((db) => measureStaticLossDb(samphire3, 80, db));
    const [a = NaN, b = NaN, c = NaN] = losses;
    expect(a).toBeGreaterThan(2);
    expect(b - a).toBeCloseTo(6 * 0.38, 1);
    expect(c - b).toBeCloseTo(6 * 0.38, 1);
  });

  it("Fennel 5: the port gives out around its tuning, gradually", () => {
    const [at96 = NaN, at102 = NaN] = [96, 102].map((db) => measureStaticLossDb(fennel5, 50, db));
    expect(at102).toBeGreaterThan(1);
    const slope = 1 - (at102 - at96) / 6;
    expect(slope).toBeGreaterThan(0.4);
    expect(slope).toBeLessThan(0.9);
    expect(measureStaticLossDb(fennel5, 160, 102)).toBeLessThan(0.1);
  });

  it("Loom 6: ten minutes at 102 dB cost what the heat of its coils says", () => {
    const rateHz = 192_000;
    const tone = () =>
      Float64Array.from(
        { length: rateHz / 10 },
        (_, n) => Math.sin((2 * Math.PI * 1000 * n) / rateHz) * 1e-4,
      );
    const level = (conditioned: Parameters<typeof createLoudspeaker>[2]) => {
      const signal = tone();
      playThrough(createLoudspeaker(loom6, rateHz, conditioned), signal);
      return 20 * Math.log10(Math.hypot(...signal.subarray(rateHz / 20)));
    };
    const lossDb = level(null) - level({ levelDb: 93, minutes: 10, gapS: 0.5 });
    // 93 dB, of which the woofer has 6.78 of ten octaves: power 0.0857 of 102 dB; of the coil's 4 K
    // 0.959 after 0.5 s, of the magnet's 600 K 0.297: 15.6 K.
    // It cools on while the tone plays.
    expect(Math.abs(lossDb - 20 * Math.log10(1 + 0.00393 * 15.6))).toBeLessThan(0.01);
  });

  it("Ketch 12: one limiter over everything from 105 dB", () => {
    for (const hz of [80, 400, 2000, 8000]) {
      expect(Math.abs(measureStaticLossDb(ketch12, hz, 104))).toBeLessThan(0.1);
      expect(measureStaticLossDb(ketch12, hz, 112)).toBeCloseTo(6 * 0.92, 0);
    }
  });
});
