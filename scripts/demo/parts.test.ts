/** The parts of the virtual loudspeaker against what is known of them in closed form. */
import { describe, expect, it } from "vitest";
import { toHeatLossDb } from "../../lib/analysis/voice-coil";
import { Coil } from "./coil";
import { Driver, Polynomial, type DriverSetting } from "./driver";
import { Chain, createCrossoverHalf, createPeak, Parallel, type Stage } from "./filters";
import { Limiter, toGainDb, type LimiterSetting } from "./limiter";
import { createRandom } from "./random";
import { record, upsample } from "./resample";
import { composeNoise } from "./room-noise";

const RATE_HZ = 192_000;
const UNIT = 20e-6 ** 2;
const PEAK = Math.SQRT2 * 20e-6;

/** Amplitudes of a tone's orders after a stage has settled; the window holds whole periods. */
function toAmplitudes(
  stage: Stage,
  frequencyHz: number,
  peak: number,
  orders: number,
  settleS = 0.6,
): number[] {
  const settle = Math.round(settleS * RATE_HZ);
  const window = Math.round((Math.ceil(frequencyHz / 20) * RATE_HZ) / frequencyHz);
  const omega = (2 * Math.PI * Math.ceil(frequencyHz / 20)) / window;
  const signal = Float64Array.from(
    { length: settle + window },
    (_, n) => peak * Math.cos(omega * n),
  );
  stage.process(signal);
  return Array.from({ length: orders }, (_, i) => {
    let [re, im] = [0, 0];
    for (let n = settle; n < signal.length; n += 1) {
      re += (signal[n] ?? 0) * Math.cos(omega * (i + 1) * n);
      im += (signal[n] ?? 0) * Math.sin(omega * (i + 1) * n);
    }
    return (2 * Math.hypot(re, im)) / window;
  });
}

const toGain = (stage: Stage, frequencyHz: number, peak = 1): number =>
  20 * Math.log10((toAmplitudes(stage, frequencyHz, peak, 1)[0] ?? NaN) / peak);

describe("filters", () => {
  it("cross over at -6 dB and fall 24 dB an octave", () => {
    expect(toGain(createCrossoverHalf("low-pass", 1000, RATE_HZ), 1000)).toBeCloseTo(-6.0206, 3);
    // An octave away each Butterworth section has 1/sqrt(1 + 2^4), and there are two.
    expect(toGain(createCrossoverHalf("high-pass", 1000, RATE_HZ), 500)).toBeCloseTo(
      -20 * Math.log10(17),
      2,
    );
  });

  it("sum to an all-pass", () => {
    const both = (): Stage =>
      new Parallel([
        createCrossoverHalf("low-pass", 300, RATE_HZ),
        createCrossoverHalf("high-pass", 300, RATE_HZ),
      ]);
    for (const frequencyHz of [50, 200, 300, 450, 3000])
      expect(toGain(both(), frequencyHz)).toBeCloseTo(0, 4);
  });

  it("lift a peak by its gain", () => {
    expect(toGain(createPeak({ frequencyHz: 900, q: 2, gainDb: 3.5 }, RATE_HZ), 900)).toBeCloseTo(
      3.5,
      3,
    );
  });
});

describe("Limiter", () => {
  const setting: LimiterSetting = {
    thresholdDb: 90,
    slope: 0.25,
    kneeDb: 6,
    detectorS: 0.02,
    attackS: 0.004,
    releaseS: 0.03,
  };

  /** Worked check 39 of docs/check-values.md: T -10, ratio 4, knee 6. */
  it.each([
    [-13, -13],
    [-10, -10.5625],
    [-7, -9.25],
    [0, -7.5],
  ])("static curve at %d dB is %d dB", (input, output) => {
    expect(input + toGainDb(input, { ...setting, thresholdDb: -10 })).toBeCloseTo(output, 9);
  });

  it.each([80, 88, 92, 96, 102])("holds steady tones of %d dB on its static curve", (levelDb) => {
    for (const frequencyHz of [63, 1000, 8000]) {
      const limiter = new Limiter(setting, UNIT, RATE_HZ);
      const gain = toGain(limiter, frequencyHz, PEAK * 10 ** (levelDb / 20));
      // What is left is the ripple of the detector at twice the frequency: 0.1 dB at 63 Hz.
      expect(Math.abs(gain - toGainDb(levelDb, setting))).toBeLessThan((0.12 * 63) / frequencyHz);
    }
  });
});

describe("Coil", () => {
  /** docs/check-values.md section 11, voltage drive, and worked check 42. */
  it.each([
    [10, 0.33],
    [50, 1.558],
    [100, 2.879],
    [200, 5.038],
  ])("%d K cost %d dB", (riseK, lossDb) => {
    expect(toHeatLossDb(riseK)).toBeCloseTo(lossDb, 2);
  });

  /** Worked check 43: 10 W into 5.9 K/W, 21.24 s and 4.1 K/W, 1115.2 s. */
  it.each([
    [1, 2.75],
    [60, 57.65],
    [3600, 98.38],
  ])("after %d s of steady power is %d K hotter", (seconds, riseK) => {
    const coil = new Coil(
      { levelDb: 90, coilK: 59, magnetK: 41, coilS: 21.24, magnetS: 1115.2 },
      UNIT,
      RATE_HZ,
    );
    coil.heat({ levelDb: 90, minutes: seconds / 60, gapS: 0 });
    expect(coil.riseK).toBeCloseTo(riseK, 2);
  });

  it("heats while it plays as it does in closed form", () => {
    const setting = { levelDb: 90, coilK: 40, magnetK: 0, coilS: 0.84, magnetS: 390 };
    const coil = new Coil(setting, UNIT, RATE_HZ);
    // A tone of 90 dB for 0.84 s: 1 - 1/e of the way.
    const tone = Float64Array.from(
      { length: 0.84 * RATE_HZ },
      (_, n) => PEAK * 10 ** 4.5 * Math.sin((2 * Math.PI * 1000 * n) / RATE_HZ),
    );
    coil.process(tone);
    expect(coil.riseK).toBeCloseTo(40 * (1 - Math.exp(-1)), 1);
  });
});

describe("Driver", () => {
  const sealed: DriverSetting = {
    resonanceHz: 50,
    q: Math.SQRT1_2,
    motor: { levelDb: 140, frequencyHz: 50, offset: 0 },
  };

  it.each([25, 50, 100, 1000])(
    "is a high-pass of second order when it moves little, at %d Hz",
    (frequencyHz) => {
      const ratio = frequencyHz / 50;
      const expected = 20 * Math.log10(ratio ** 2 / Math.hypot(1 - ratio ** 2, ratio * Math.SQRT2));
      // The model's own step of 1/192 kHz is good for 0.01 dB.
      const gain = toGain(new Driver(sealed, PEAK, RATE_HZ), frequencyHz, PEAK * 1e3);
      expect(Math.abs(gain - expected)).toBeLessThan(0.015);
    },
  );

  it("stands still at the tuning of its port, which then plays", () => {
    const port = { tuningHz: 40, compliance: 1, q: 1000, levelDb: 200, turbulentQ: 5 };
    const ported = new Driver({ ...sealed, port }, PEAK, RATE_HZ);
    // Lossless box at its tuning: output is compliance / (tuning ratio)^2 of the drive, cone blocked.
    const expected = 20 * Math.log10((40 / 50) ** 2);
    const gain =
      20 * Math.log10((toAmplitudes(ported, 40, PEAK * 1e3, 1, 3)[0] ?? NaN) / (PEAK * 1e3));
    expect(Math.abs(gain - expected)).toBeLessThan(0.1);
  });

  it("loses level with excursion, by a cubic to first order", () => {
    // Over resonance x = -v/(w^2 - w0^2), so b(x) v = v - e v^3/V^2 with e = (w^2/(w^2 - w0^2))^2 and
    // V the drive of half force: H1 loses 3/4 e (v/V)^2, H3 is 1/4 of it, passed on by the high-pass.
    const motor = { levelDb: 100, frequencyHz: 200, offset: 0 };
    const at = (levelDb: number) =>
      toAmplitudes(
        new Driver({ ...sealed, resonanceHz: 40, q: 5, motor }, PEAK, RATE_HZ),
        200,
        PEAK * 10 ** (levelDb / 20),
        3,
      );
    const [low = NaN] = at(40);
    const [h1 = NaN, , h3 = NaN] = at(80);
    const e = (1 / (1 - 0.04)) ** 2;
    expect(1 - h1 / low / 100).toBeCloseTo(0.75 * e * 0.01, 3);
    const highPass = (ratio: number) => ratio ** 2 / Math.hypot(1 - ratio ** 2, ratio / 5);
    expect(h3 / h1).toBeCloseTo((0.25 * e * 0.01 * highPass(15)) / highPass(5), 3.5);
  });
});

describe("Polynomial", () => {
  it("makes the harmonics of worked check 28: x + .02 x^2 + .04 x^3", () => {
    const stage = new Polynomial({ levelDb: 100, second: 0.02, third: 0.04 }, PEAK);
    const peak = PEAK * 1e5;
    const [h1 = NaN, h2 = NaN, h3 = NaN] = toAmplitudes(stage, 1000, peak, 3, 0);
    expect(h1 / peak).toBeCloseTo(1.03, 9);
    expect(h2 / peak).toBeCloseTo(0.01, 9);
    expect(h3 / peak).toBeCloseTo(0.01, 9);
  });
});

describe("resampling", () => {
  const tone = (frequencyHz: number, rateHz: number, length: number, from = 0): Float64Array =>
    Float64Array.from({ length }, (_, n) =>
      Math.sin((2 * Math.PI * frequencyHz * (n - from)) / rateHz),
    );
  const worst = (a: Float64Array, b: Float64Array, from: number, to: number): number => {
    let most = 0;
    for (let n = from; n < to; n += 1) most = Math.max(most, Math.abs((a[n] ?? 0) - (b[n] ?? 0)));
    return most;
  };

  it.each([40, 1000, 12_500, 19_500])(
    "goes up and down again at %d Hz with a delay of any length",
    (frequencyHz) => {
      const delay = 113.37;
      const fast = upsample(tone(frequencyHz, 48_000, 8000), 4);
      const heard = record(fast, 4, { length: 8000, delay, driftPpm: 0 });
      // 1e-4: -80 dB at the very edge of the pass band; 0.0009 dB.
      expect(worst(heard, tone(frequencyHz, 48_000, 8000, delay), 400, 7600)).toBeLessThan(1e-4);
    },
  );

  it("runs by another clock", () => {
    const fast = upsample(tone(1000, 48_000, 48_000), 4);
    const heard = record(fast, 4, { length: 47_000, delay: 0, driftPpm: 50 });
    expect(worst(heard, tone(1000 / (1 + 50e-6), 48_000, 47_000), 400, 46_000)).toBeLessThan(2e-4);
  });
});

describe("composeNoise", () => {
  it("has the level asked for and falls with frequency", () => {
    const length = 48_000 * 8;
    const noise = composeNoise(
      { roomDb: 40, microphoneDb: 0 },
      length,
      48_000,
      createRandom("room"),
    );
    const level = 10 * Math.log10(noise.reduce((sum, x) => sum + x * x, 0) / length / UNIT);
    // Half of the power lies under 40 Hz: few independent values, hence 0.5 dB.
    expect(Math.abs(level - 40)).toBeLessThan(0.5);
    const high = noise.slice();
    new Chain([createCrossoverHalf("high-pass", 1000, 48_000)]).process(high);
    const highLevel = 10 * Math.log10(high.reduce((sum, x) => sum + x * x, 0) / length / UNIT);
    expect(highLevel).toBeLessThan(level - 10);
  });

  it("is the same for the same seed and another for another", () => {
    const make = (seed: string) =>
      composeNoise({ roomDb: 40, microphoneDb: 20 }, 100, 48_000, createRandom(seed));
    expect(make("a")).toEqual(make("a"));
    expect(make("a")).not.toEqual(make("b"));
  });
});
