/** Recordings of every shape that a bench brings give the level that is in them. */
import { describe, expect, it } from "vitest";
import { analyseSeries } from "../../lib/analysis/analyse-series";
import { measureSeries } from "../../lib/analysis/measure-series";
import { synthesiseStimulus, toStimulusLayout, toSweepTiming } from "../../lib/analysis/sweep";
import type { MeasuredRun, MeasuredSeries, Recording } from "../../lib/analysis/types";
import type { Warning } from "../../lib/result/result-schema";
import { seriesSchema } from "../../lib/series/series-schema";
import { createNormal, simulateNoise, toMemorySource } from "../support/simulated-sweep";

const RATE_HZ = 48_000;
const SHAPE = {
  startHz: 20,
  stopHz: 20_000,
  lengthS: 2.5,
  rateHz: RATE_HZ,
  leadInS: 0.3,
  leadOutS: 0.3,
};
const STIMULUS = synthesiseStimulus(SHAPE);
const LAYOUT = toStimulusLayout(SHAPE);
const AMPLITUDE = 0.1;
/** full_scale_dB of 100 dB: a sine of 0.1 reads 80 dB. */
const LEVEL_DB = 80;

/** Places copies of the stimulus in noise. */
function place(
  file: string,
  length: number,
  starts: { at: number; amplitude?: number }[],
  noiseRms = 1e-5,
): Recording {
  const normal = createNormal(length);
  const samples = Float64Array.from({ length }, () => noiseRms * normal());
  for (const { at, amplitude = AMPLITUDE } of starts) {
    for (let n = Math.max(0, -at); n < STIMULUS.length && n + at < length; n += 1)
      samples[n + at]! += amplitude * STIMULUS[n]!;
  }
  return { file, rateHz: RATE_HZ, samples, fullScale: 1 };
}

async function measure(
  recordings: Recording[],
  keys: Record<string, unknown> = {},
  runKeys: Record<string, unknown> = {},
): Promise<{ measured: MeasuredSeries; warnings: Warning[] }> {
  const series = seriesSchema.parse({
    loudspeaker: "Simulated",
    environment: "anechoic",
    distance_m: 1,
    stimulus: {
      start_Hz: 20,
      stop_Hz: 20_000,
      length_s: 2.5,
      rate_Hz: RATE_HZ,
      lead_in_s: 0.3,
      lead_out_s: 0.3,
    },
    calibration: { full_scale_dB: 100 },
    runs: recordings.map(({ file }, i) => ({ file, level_dB: 80 + i, ...runKeys })),
    ...keys,
  });
  return measureSeries(series, toMemorySource([...recordings, ...EXTRA]));
}

const EXTRA: Recording[] = [];

function expectLevel(
  series: MeasuredSeries,
  run: MeasuredRun,
  levelDb = LEVEL_DB,
  toleranceDb = 0.05,
): void {
  series.bands.forEach((band, i) => {
    expect(Math.abs(run.bands[i]!.levelDb - levelDb), `${band.nominalHz} Hz`).toBeLessThan(
      band.nominalHz < 80 ? 4 * toleranceDb : toleranceDb,
    );
  });
}

describe("latency of any length", () => {
  const after = 30_000;
  it.each([0, 1, 4_801, 200_000, 1_500_000])("%d samples late", async (at) => {
    const { measured } = await measure([place("a.wav", at + STIMULUS.length + after, [{ at }])]);
    expect(Math.abs(measured.runs[0]!.latencyS * RATE_HZ - at)).toBeLessThan(0.1);
    expectLevel(measured, measured.runs[0]!);
  });

  it("a recorder that started within the lead-in", async () => {
    const { measured, warnings } = await measure([
      place("a.wav", STIMULUS.length, [{ at: -9_000 }]),
    ]);
    expect(Math.abs(measured.runs[0]!.latencyS * RATE_HZ + 9_000)).toBeLessThan(0.1);
    expect(warnings).toEqual([]);
    expectLevel(measured, measured.runs[0]!);
  });

  it("says so where the end of the sweep is missing", async () => {
    const { warnings } = await measure([
      place("a.wav", LAYOUT.leadIn + LAYOUT.sweep - 4_800, [{ at: 0 }]),
    ]);
    expect(warnings.map((w) => w.code)).toContain("run.sweep-cut");
    expect(warnings.find((w) => w.code === "run.sweep-cut")?.message).toContain(
      "0.100 s of the sweep at its end",
    );
  });
});

describe("trains of sweeps", () => {
  const periodS = (STIMULUS.length + 12_000) / RATE_HZ;
  const starts = (amplitudes: number[]) =>
    amplitudes.map((amplitude, i) => ({
      at: 10_000 + Math.round(i * periodS * RATE_HZ),
      amplitude,
    }));
  const length = Math.round(10_000 + 4 * periodS * RATE_HZ);
  const train = { sweeps: 4, period_s: periodS };

  it("a short-term train is the mean of its sweeps", async () => {
    const { measured } = await measure(
      [place("a.wav", length, starts([0.1, 0.1, 0.1, 0.1]))],
      {},
      train,
    );
    expectLevel(measured, measured.runs[0]!);
    expect(Math.abs(measured.runs[0]!.latencyS * RATE_HZ - 10_000)).toBeLessThan(0.1);
  });

  it("a long-term train is read from its first sweep, before anything cools", async () => {
    const recordings = [
      place("cold.wav", STIMULUS.length + 30_000, [{ at: 0 }]),
      place("hot.wav", length, starts([0.09, 0.095, 0.1, 0.1])),
    ];
    const runs = [
      { file: "cold.wav", level_dB: 80 },
      {
        file: "hot.wav",
        level_dB: 80,
        kind: "long-term",
        ...train,
        conditioning: { minutes: 10, crest_dB: 12, rms_re_sweep_dB: -3, gap_s: 0.5 },
      },
    ];
    const { measured } = await measure(recordings, { runs });
    expect(measured.runs[1]!.kind).toBe("long-term");
    expectLevel(measured, measured.runs[1]!, LEVEL_DB + 20 * Math.log10(0.9));
  });
});

describe("a long-term run", () => {
  it("is found behind its conditioning noise", async () => {
    const recording = place("hot.wav", 30 * RATE_HZ, [{ at: 20 * RATE_HZ }]);
    const normal = createNormal(5);
    for (let n = 0; n < 20 * RATE_HZ; n += 1) recording.samples[n]! += 0.05 * normal();
    const cold = place("cold.wav", STIMULUS.length + 30_000, [{ at: 0 }]);
    const runs = [
      { file: "cold.wav", level_dB: 80 },
      {
        file: "hot.wav",
        level_dB: 80,
        kind: "long-term",
        conditioning: { minutes: 10, crest_dB: 12, rms_re_sweep_dB: -3, gap_s: 0.3 },
      },
    ];
    const { measured } = await measure([cold, recording], { runs });
    expect(Math.abs(measured.runs[1]!.latencyS - 20)).toBeLessThan(1e-4);
    expectLevel(measured, measured.runs[1]!);
  });
});

describe("a loopback channel", () => {
  it("gives drive and latency as they really were", async () => {
    const withLoopback = (file: string, drive: number): Recording => {
      const microphone = place(file, STIMULUS.length + 40_000, [
        { at: 3_000, amplitude: drive * AMPLITUDE },
      ]);
      return {
        ...microphone,
        loopback: place(file, STIMULUS.length + 40_000, [{ at: 2_857, amplitude: drive }], 1e-6)
          .samples,
      };
    };
    const step = 10 ** (9.9 / 20);
    const { measured } = await measure(
      [withLoopback("a.wav", 0.25), withLoopback("b.wav", 0.25 * step)],
      {
        runs: [
          { file: "a.wav", level_dB: 80, loopback_channel: 2 },
          { file: "b.wav", level_dB: 90, loopback_channel: 2 },
        ],
      },
    );
    expect(measured.runs.map((r) => r.driveDb)).toEqual([80, expect.closeTo(89.9, 3)]);
    expect(Math.abs(measured.runs[0]!.latencyS * RATE_HZ - 2_857)).toBeLessThan(0.1);
  });
});

describe("a sweep by file", () => {
  it.each([0.5, 1])("of peak %d has its own exact length, without whole cycles", async (peak) => {
    const lengthS = 2.345678;
    const rateConstantS = lengthS / Math.log(1000);
    const wave = Float64Array.from({ length: Math.ceil(lengthS * RATE_HZ) }, (_, n) => {
      const t = n / RATE_HZ;
      const fade = Math.min(1, t / 0.03, (lengthS - t) / 0.005);
      return fade * Math.sin(2 * Math.PI * 20 * rateConstantS * (Math.exp(t / rateConstantS) - 1));
    });
    const samples = new Float64Array(wave.length + 60_000);
    wave.forEach((x, n) => {
      // A second harmonic of its own would need the phase; the square of the sweep brings 2nd order and DC.
      samples[n + 12_345] = 0.1 * x + 0.002 * (2 * x * x - 1);
    });
    const stimulus: Recording = {
      file: "stimulus.wav",
      rateHz: RATE_HZ,
      samples: wave.map((x) => peak * x),
      fullScale: 1,
    };
    const series = seriesSchema.parse({
      loudspeaker: "Simulated",
      environment: "anechoic",
      distance_m: 1,
      stimulus: {
        file: "stimulus.wav",
        start_Hz: 20,
        stop_Hz: 20_000,
        length_s: lengthS,
        rate_Hz: RATE_HZ,
      },
      calibration: { full_scale_dB: 100 },
      runs: [{ file: "a.wav", level_dB: 80 }],
    });
    const { measured } = await measureSeries(
      series,
      toMemorySource([stimulus, { file: "a.wav", rateHz: RATE_HZ, samples, fullScale: 1 }]),
    );
    expectLevel(measured, measured.runs[0]!);
    const band = measured.bands.findIndex((b) => b.nominalHz === 1000);
    expect(
      Math.abs(
        20 * Math.log10(Math.sqrt(measured.runs[0]!.bands[band]!.harmonics[0]!.ratio) / 0.02),
      ),
    ).toBeLessThan(0.1);
  });

  it.each([
    ["holds something else", simulateNoise("stimulus.wav", RATE_HZ, 0, 3), "stimulus.invalid"],
    [
      "is shorter than it is said to be",
      simulateNoise("stimulus.wav", RATE_HZ, 0.1, 1),
      "stimulus.invalid",
    ],
    ["runs at another rate", simulateNoise("stimulus.wav", 44_100, 0.1, 3), "stimulus.rate"],
  ])("is refused where it %s", async (_, stimulus, code) => {
    const series = seriesSchema.parse({
      loudspeaker: "Simulated",
      environment: "anechoic",
      distance_m: 1,
      stimulus: {
        file: "stimulus.wav",
        start_Hz: 20,
        stop_Hz: 20_000,
        length_s: 2.5,
        rate_Hz: RATE_HZ,
      },
      calibration: { full_scale_dB: 100 },
      runs: [{ file: "a.wav", level_dB: 80 }],
    });
    const source = toMemorySource([stimulus, place("a.wav", STIMULUS.length, [{ at: 0 }])]);
    await expect(measureSeries(series, source)).rejects.toMatchObject({ code });
  });
});

describe("what is no recording of the sweep", () => {
  const { rateConstantS } = toSweepTiming(SHAPE);
  const other = Float64Array.from(
    { length: 200_000 },
    (_, n) =>
      0.1 *
      Math.sin(2 * Math.PI * 20 * 2 * rateConstantS * Math.exp(n / RATE_HZ / (2 * rateConstantS))),
  );
  it.each([
    ["silence", place("a.wav", 200_000, [], 0), "run.silent"],
    ["noise", place("a.wav", 200_000, [], 0.1), "run.no-sweep"],
    [
      "a sweep of another rate of change",
      { ...place("a.wav", 1, []), samples: other },
      "run.no-sweep",
    ],
    [
      "another sample rate",
      { ...place("a.wav", 200_000, [{ at: 0 }]), rateHz: 44_100 },
      "stimulus.rate",
    ],
  ])("%s is refused", async (_, recording, code) => {
    await expect(measure([recording])).rejects.toMatchObject({ code, file: "a.wav" });
  });
});

describe("clipping", () => {
  it.each([
    ["three samples at full scale", [1, 1, 1], true],
    ["two", [1, 1, 0.2], false],
    ["a float beyond full scale", [1.2, 0, 0], true],
  ])("%s", async (_, samples, clipped) => {
    const recording = place("a.wav", STIMULUS.length + 20_000, [{ at: 0 }]);
    recording.samples.set(samples, 60_000);
    const { measured, warnings } = await measure([recording]);
    expect(measured.runs[0]!.clipped).toBe(clipped);
    expect(warnings.some((w) => w.code === "run.clipped")).toBe(clipped);
  });
});

describe("what is wrong with a file beside its sweep", () => {
  it("is said: a shift by DC", async () => {
    const shifted = place("a.wav", STIMULUS.length + 20_000, [{ at: 0 }]);
    shifted.samples.forEach((x, n) => (shifted.samples[n] = x + 0.02));
    const { warnings } = await measure([shifted]);
    expect(warnings.find((w) => w.code === "run.dc-offset")?.message).toContain(
      "shifted by \u221234 dBFS of DC; up to \u221240 dBFS",
    );
    const fine = await measure([place("a.wav", STIMULUS.length + 20_000, [{ at: 0 }])]);
    expect(fine.warnings.map((w) => w.code)).not.toContain("run.dc-offset");
  });

  it("is said: the same recording twice", async () => {
    const take = (file: string, at: number) => place(file, STIMULUS.length + 20_000, [{ at }]);
    const files = (names: string[]) => names.map((file, i) => ({ file, level_dB: 70 + 10 * i }));
    const { warnings } = await measure([take("a.wav", 0), take("b.wav", 0)], {
      runs: files(["a.wav", "b.wav"]),
    });
    expect(warnings.filter((w) => w.code === "run.duplicate").map((w) => w.file)).toEqual([
      "b.wav",
    ]);
    const apart = await measure([take("a.wav", 0), take("b.wav", 7)], {
      runs: files(["a.wav", "b.wav"]),
    });
    expect(apart.warnings.map((w) => w.code)).not.toContain("run.duplicate");
  });
});

describe("levels held against the plan", () => {
  const at = (file: string, levelDb: number, measuredDb: number) => ({
    recording: place(file, STIMULUS.length + 20_000, [
      { at: 0, amplitude: 10 ** ((measuredDb - 100) / 20) },
    ]),
    run: { file, level_dB: levelDb },
  });

  it.each([
    ["as planned", [at("a.wav", 70, 70), at("b.wav", 80, 80)], []],
    ["the lowest too quiet", [at("a.wav", 70, 66), at("b.wav", 80, 80)], ["a.wav"]],
    ["the lowest too loud", [at("a.wav", 70, 74), at("b.wav", 80, 80)], ["a.wav"]],
    [
      "a higher one quieter: what we are here to find",
      [at("a.wav", 70, 70), at("b.wav", 80, 75)],
      [],
    ],
    ["a higher one louder", [at("a.wav", 70, 70), at("b.wav", 80, 84)], ["b.wav"]],
  ])("%s", async (_, runs, files) => {
    const { warnings } = await measure(
      runs.map((r) => r.recording),
      { runs: runs.map((r) => r.run) },
    );
    expect(warnings.filter((w) => w.code === "run.level-plan").map((w) => w.file)).toEqual(files);
  });
});

describe("tables in place of recordings", () => {
  const levels = (levelDb: number) => [20, 100, 1000, 20_000].map(() => levelDb);
  const table = (
    levelDb: number,
    harmonics: { order: number; unit: "percent"; values: number[] }[] = [],
  ) => ({ frequencyHz: [20, 100, 1000, 20_000], levelDb: levels(levelDb), harmonics });

  it("need no calibration and give their levels and harmonics", async () => {
    const series = seriesSchema.parse({
      loudspeaker: "Reduced",
      environment: "anechoic",
      distance_m: 1,
      stimulus: { start_Hz: 20, stop_Hz: 20_000, length_s: 2.5, rate_Hz: RATE_HZ },
      runs: [
        { file: "76.csv", level_dB: 76 },
        { file: "86.frd", level_dB: 86 },
      ],
    });
    const { measured, warnings } = await measureSeries(series, {
      readRecording: () => Promise.reject(new Error("no recording")),
      readTable: (file) =>
        Promise.resolve(
          file === "76.csv"
            ? table(76)
            : table(85, [{ order: 3, unit: "percent", values: [1, 1, 1, 1] }]),
        ),
    });
    const band = measured.bands.findIndex((b) => b.nominalHz === 1000);
    expect(measured.runs.map((r) => r.bands[band]!.levelDb)).toEqual([
      expect.closeTo(76, 6),
      expect.closeTo(85, 6),
    ]);
    expect(measured.runs[0]!.bands[band]!.harmonics.every((h) => h.quality === null)).toBe(true);
    expect(measured.runs[1]!.bands[band]).toMatchObject({
      thdOrders: "3",
      thdQuality: "measured",
      thdPercent: expect.closeTo(1, 4) as number,
    });
    expect(warnings.map((w) => [w.code, w.file])).toEqual([
      ["run.table", "76.csv"],
      ["run.table", "86.frd"],
    ]);
  });

  it("state THD without its orders: it decides its criterion, and no floor is claimed", async () => {
    const series = seriesSchema.parse({
      loudspeaker: "Reduced",
      environment: "anechoic",
      distance_m: 1,
      stimulus: { start_Hz: 20, stop_Hz: 20_000, length_s: 2.5, rate_Hz: RATE_HZ },
      runs: [76, 86, 96].map((level) => ({ file: `${level}.csv`, level_dB: level })),
    });
    const stated = (percent: number) => [20, 100, 1000, 20_000].map(() => percent);
    const thd: Record<string, number> = { "76.csv": 0.5, "86.csv": 1, "96.csv": 4 };
    const result = await analyseSeries(series, {
      readRecording: () => Promise.reject(new Error("no recording")),
      readTable: (file) =>
        Promise.resolve({
          ...table(file === "96.csv" ? 95.5 : Number(file.slice(0, 2))),
          thdPercent: stated(thd[file] ?? Number.NaN),
        }),
    });
    const band = result.bands.find((b) => b.nominal_Hz === 1000);
    expect(band?.levels.map((l) => [l.thd_percent, l.thd_quality, l.thd_orders])).toEqual([
      [0.5, "measured", ""],
      [1, "measured", ""],
      [4, "measured", ""],
    ]);
    expect(band?.levels.map((l) => [l.compression_dB, l.snr_dB])).toEqual([
      [0, null],
      [0, null],
      [0.5, null],
    ]);
    const limit = (percent: number) =>
      band?.limits.find((l) => l.criterion.thd_percent === percent);
    expect(limit(3)).toMatchObject({ status: "found", nominal_dB: 86, low_dB: 86, high_dB: 96 });
    expect(limit(10)).toMatchObject({ status: "not reached", nominal_dB: 96 });
    expect(band?.cause_reason).toContain("the table holds no third harmonic");
    expect(result.runs.every((r) => r.floor_dB.every((x) => x === null))).toBe(true);
    expect(result.warnings.find((w) => w.file === "76.csv")?.message).toContain(
      "Its THD is taken as measured; it holds no harmonics",
    );
  });
});
