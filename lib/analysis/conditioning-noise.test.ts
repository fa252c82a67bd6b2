import { describe, expect, it } from "vitest";
import { planRealFft } from "./fft/real-fft";
import { synthesiseConditioning, type ConditioningShape } from "./conditioning-noise";

const shape: ConditioningShape = {
  rateHz: 48_000,
  lengthS: 20,
  crestDb: 12,
  peakDbfs: -3,
  seed: 1,
};
function collect(over: Partial<ConditioningShape> = {}): Float64Array {
  const pieces = [...synthesiseConditioning({ ...shape, ...over })];
  const all = new Float64Array(pieces.reduce((sum, piece) => sum + piece.length, 0));
  let at = 0;
  for (const piece of pieces) {
    all.set(piece, at);
    at += piece.length;
  }
  return all;
}
const rmsDb = (x: Float64Array) =>
  10 * Math.log10(x.reduce((sum, value) => sum + value * value, 0) / x.length);
const peakDb = (x: Float64Array) =>
  20 * Math.log10(x.reduce((most, value) => Math.max(most, Math.abs(value)), 0));

describe("conditioning noise", () => {
  const noise = collect();

  it("lasts to the sample and is the same each time", () => {
    expect(noise).toHaveLength(20 * 48_000);
    const same = (x: Float64Array) => Buffer.from(x.buffer).equals(Buffer.from(noise.buffer));
    expect(same(collect())).toBe(true);
    expect(same(collect({ seed: 2 }))).toBe(false);
  });

  it.each([6, 9, 12])("peaks at -3 dBFS with a crest of %d dB", (crestDb) => {
    const x = collect({ crestDb });
    expect(peakDb(x)).toBeCloseTo(-3, 6);
    // 20 s of pink noise: its lowest octaves leave some tenths of a dB to chance.
    expect(Math.abs(peakDb(x) - rmsDb(x) - crestDb)).toBeLessThan(0.3);
  });

  it("falls by 3 dB per octave", () => {
    // Mean power density over third octaves, from transforms of 2^14 samples without a window.
    const fft = planRealFft(1 << 14);
    const density = new Float64Array(fft.size / 2 + 1);
    for (let at = 0; at + fft.size <= noise.length; at += fft.size) {
      fft.data.set(noise.subarray(at, at + fft.size));
      fft.power().forEach((power, bin) => (density[bin] = (density[bin] ?? 0) + power));
    }
    const levelDb = (hz: number): number => {
      const bin = (f: number) => Math.round((f * fft.size) / 48_000);
      const band = density.subarray(bin(hz * 2 ** (-1 / 6)), bin(hz * 2 ** (1 / 6)));
      return 10 * Math.log10(band.reduce((sum, power) => sum + power, 0) / band.length);
    };
    // 58 transforms of 14 bins and more leave some 0.15 dB to chance; the filter is within 0.5 dB.
    for (const hz of [125, 250, 500, 1000, 2000, 4000, 8000]) {
      expect(Math.abs(levelDb(hz) - levelDb(2 * hz) - 3.01)).toBeLessThan(0.7);
    }
  });

  it.each([{ crestDb: 2 }, { peakDbfs: 1 }, { lengthS: 0 }])("refuses %o", (over) => {
    expect(() => collect(over)).toThrow(
      expect.objectContaining({ code: "stimulus.invalid" }) as Error,
    );
  });
});
