import { describe, expect, it } from "vitest";
import {
  synthesiseStimulus,
  toHarmonicLeadS,
  toStimulusLayout,
  toSweepTimeS,
  toSweepTiming,
} from "./sweep";

const decades = { startHz: 20, stopHz: 20_000, lengthS: 10 };

describe("toSweepTiming", () => {
  it("makes f1 R whole and lasts as long as it says (check values, section 14, row 32)", () => {
    const { rateConstantS, lengthS } = toSweepTiming(decades);
    expect(20 * rateConstantS).toBe(29);
    expect(rateConstantS).toBe(1.45);
    expect(lengthS).toBeCloseTo(10.016245, 6);
  });

  it.each([
    [2, 1.00343],
    [3, 1.5904],
    [5, 2.3299],
  ])(
    "order %i precedes by its published lead for R = 1.447648 s (row 31, 1e-5 s)",
    (order, leadS) => {
      expect(Math.abs(toHarmonicLeadS(order, 1.447648) - leadS)).toBeLessThan(1e-5);
    },
  );

  it.each([
    { ...decades, startHz: 0 },
    { ...decades, stopHz: 20 },
    { ...decades, lengthS: 0.1 },
    { ...decades, lengthS: Number.NaN },
  ])("refuses $startHz to $stopHz Hz in $lengthS s", (shape) => {
    expect(() => toSweepTiming(shape)).toThrow(
      expect.objectContaining({ code: "stimulus.invalid" }),
    );
  });
});

describe("synthesiseStimulus", () => {
  const shape = {
    startHz: 100,
    stopHz: 8000,
    lengthS: 1,
    rateHz: 48_000,
    leadInS: 0.25,
    leadOutS: 0.125,
    gainDb: -6,
  };
  const samples = synthesiseStimulus(shape);
  const { leadIn, sweep, total } = toStimulusLayout(shape);
  const { rateConstantS } = toSweepTiming(shape);

  it("has its leads of silence and starts and ends on zero", () => {
    expect(leadIn).toBe(12_000);
    expect(total - leadIn - sweep).toBe(6000);
    expect(samples).toHaveLength(total);
    expect(samples.subarray(0, leadIn + 1).every((x) => x === 0)).toBe(true);
    expect(samples.subarray(leadIn + sweep).every((x) => x === 0)).toBe(true);
  });

  it("is the sine of the exponential phase between the fades, scaled by its gain", () => {
    for (const timeS of [0.06, 0.3, 0.9]) {
      const n = Math.round(timeS * 48_000);
      const exact =
        10 ** (-6 / 20) *
        Math.sin(2 * Math.PI * 100 * rateConstantS * Math.exp(n / 48_000 / rateConstantS));
      expect(samples[leadIn + n]).toBeCloseTo(exact, 9);
    }
  });

  it("passes a frequency when it says so", () => {
    const around = leadIn + Math.round(toSweepTimeS(1000, 100, rateConstantS) * 48_000);
    let crossings = 0;
    for (let n = around - 240; n < around + 240; n += 1)
      if (Math.sign(samples[n]!) !== Math.sign(samples[n + 1]!)) crossings += 1;
    expect(crossings).toBeGreaterThanOrEqual(19);
    expect(crossings).toBeLessThanOrEqual(21);
  });

  it("refuses a sweep beyond half the sample rate", () => {
    expect(() => synthesiseStimulus({ ...shape, stopHz: 30_000 })).toThrow(
      expect.objectContaining({ code: "stimulus.invalid" }),
    );
  });
});
