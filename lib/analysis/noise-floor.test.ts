import { describe, expect, it } from "vitest";
import { simulateNoise } from "../../tests/support/simulated-sweep";
import { twentyFourthOctaves } from "./bands";
import { measureCellPower, Plans } from "./cell-power";
import { measureNoise, measureResponseNoise, toNoiseCells, toNoiseGain } from "./noise-floor";
import { toOrderWindows } from "./order-windows";
import { toPlayedStimulus } from "./stimulus-in-use";
import { SweepFinder } from "./sweep-in-recording";

const RATE_HZ = 48_000;
const { edgeHz } = twentyFourthOctaves(20, 20_000);
const mean = (cells: Float64Array, from: number, to: number): number =>
  cells.subarray(from, to).reduce((sum, x) => sum + x, 0) / (to - from);

describe("noise as the deconvolution sees it", () => {
  const plans = new Plans();
  const stimulus = {
    start_Hz: 20,
    stop_Hz: 20_000,
    length_s: 4,
    rate_Hz: RATE_HZ,
    lead_in_s: 0,
    lead_out_s: 0,
  };
  const played = toPlayedStimulus(stimulus, undefined);
  const noise = simulateNoise("n", RATE_HZ, 0.01, 12, 3);
  const deconvolver = new SweepFinder(played, plans).deconvolver(noise.samples.length);
  const { response } = deconvolver.deconvolve(noise.samples);
  const sources = {
    ambient: measureNoise(noise.samples, RATE_HZ, plans),
    silence: null,
    rounding: 0,
  };
  const windows = toOrderWindows(played.sweep.rateConstantS, RATE_HZ);

  it.each([1, 2, 3, 5, 9])(
    "order %i: the expected power is what deconvolved noise has (0.2 dB)",
    (order) => {
      const window = windows[order - 1]!;
      const expected = toNoiseCells(sources, edgeHz, order, RATE_HZ, plans);
      const gain = toNoiseGain(window.energyS, played.sweep.rateConstantS);
      // Forty stretches of lag, two octaves each: the mean scatters by under 0.1 dB.
      const [from, to] = [48, 96].map((x) => x + Math.round(24 * Math.log2(10 / order))) as [
        number,
        number,
      ];
      let sum = 0;
      for (let lag = 0; lag < 40; lag += 1) {
        sum +=
          mean(measureCellPower(response, lag * 12_000, window, edgeHz, RATE_HZ, plans), from, to) /
          40;
      }
      expect(Math.abs(10 * Math.log10(sum / (gain * mean(expected, from, to))))).toBeLessThan(0.2);
    },
  );

  it("is found in the response itself where nothing else tells (0.3 dB)", () => {
    const found = measureResponseNoise(response, 1000, played.sweep, plans);
    const cells = toNoiseCells({ ...sources, ambient: found }, edgeHz, 1, RATE_HZ, plans);
    const truth = toNoiseCells(sources, edgeHz, 1, RATE_HZ, plans);
    expect(Math.abs(10 * Math.log10(mean(cells, 40, 230) / mean(truth, 40, 230)))).toBeLessThan(
      0.3,
    );
  });

  it("white noise has the density of its variance", () => {
    const cells = toNoiseCells(sources, edgeHz, 1, RATE_HZ, plans);
    const density = mean(
      cells.map((x, c) => x / Math.sqrt(edgeHz[c]! * edgeHz[c + 1]!)),
      100,
      230,
    );
    expect(Math.abs(10 * Math.log10(density / (0.01 ** 2 / (RATE_HZ / 2))))).toBeLessThan(0.05);
  });

  it.each([
    ["6 dB more than the room", 0.02, 0.02, 0.4],
    ["6 dB less", 0.005, 0.005, 0.4],
    // Within 3 dB both are the same noise: 12 s at 0.01 and 2 s at 0.012.
    ["1.6 dB more", 0.012, Math.sqrt((12 * 0.01 ** 2 + 2 * 0.012 ** 2) / 14), 0.2],
  ])("the run's own silence counts where it is %s", (_, rms, expected, toleranceDb) => {
    const silence = measureNoise(simulateNoise("s", RATE_HZ, rms, 2, 9).samples, RATE_HZ, plans);
    const cells = toNoiseCells({ ...sources, silence }, edgeHz, 1, RATE_HZ, plans);
    const density = mean(
      cells.map((x, c) => x / Math.sqrt(edgeHz[c]! * edgeHz[c + 1]!)),
      100,
      230,
    );
    expect(Math.abs(10 * Math.log10((density * RATE_HZ) / 2 / expected ** 2))).toBeLessThan(
      toleranceDb,
    );
  });

  it("never falls under the rounding of the format", () => {
    const rounding = 2 ** -30 / 12;
    const cells = toNoiseCells(
      { ambient: null, silence: null, rounding },
      edgeHz,
      1,
      RATE_HZ,
      plans,
    );
    cells.forEach((x, c) =>
      expect((x * RATE_HZ) / 2 / Math.sqrt(edgeHz[c]! * edgeHz[c + 1]!)).toBeCloseTo(rounding, 15),
    );
  });

  it("is null where there is too little of it", () => {
    expect(measureNoise(new Float32Array(1000), RATE_HZ, plans)).toBeNull();
  });
});

describe("windows of orders", () => {
  it.each([0.2, 0.797, 1.6])(
    "never overlap and stand full at the arrival (R = %f s)",
    (rateConstantS) => {
      const windows = toOrderWindows(rateConstantS, RATE_HZ);
      windows.forEach(({ before, lead, weights }, i) => {
        expect(weights[before]).toBe(1);
        const next = windows[i - 1];
        if (next !== undefined)
          expect(-lead - before + weights.length).toBeLessThanOrEqual(-next.lead - next.before + 1);
      });
    },
  );
});
