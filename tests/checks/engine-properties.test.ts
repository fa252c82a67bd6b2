/** What must not change a result, does not: gain, delay, sample rate, order of runs, number of processes. */
import { mkdtempSync, readdirSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import fc from "fast-check";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { analyseSeries } from "../../lib/analysis/analyse-series";
import type { Recording } from "../../lib/analysis/types";
import type { Result } from "../../lib/result/result-schema";
import { toResultText } from "../../lib/result/result-text";
import { createFolderSource, readSeriesText } from "../../lib/series/folder-source";
import { parseSeries } from "../../lib/series/parse-series";
import { seriesSchema } from "../../lib/series/series-schema";
import { bundlePath, ensureBundle, listBundles } from "../../scripts/setup/bundles.mjs";
import { createComputingChild } from "../../workers/compute/computing-child";
import { writeSeriesFolder } from "../support/series-folder";
import { simulateNoise, simulateRecording, toMemorySource } from "../support/simulated-sweep";

const LEVELS_DB = [80, 92, 100];
const LENGTH_S = 2.5;
const NOISE_RMS = 2e-5;
/** A limiter from 94 dB and a third harmonic that follows the level. */
const device = (levelDb: number) => {
  const amplitude = 0.2 * 10 ** ((levelDb - 100 - 0.9 * Math.max(0, levelDb - 94)) / 20);
  return { amplitudes: () => [amplitude, 0, 0.02 * amplitude * (amplitude / 0.2) ** 2] };
};

interface Setting {
  rateHz?: number;
  gain?: number;
  delay?: number;
  order?: readonly number[];
}

function record({ rateHz = 48_000, delay = 3000 }: Setting): Recording[] {
  const stimulus = {
    startHz: 20,
    stopHz: 20_000,
    lengthS: LENGTH_S,
    rateHz,
    leadInS: 0.3,
    leadOutS: 0.3,
  };
  const shape = { stimulus, delay, after: rateHz / 2, noiseRms: NOISE_RMS };
  return [
    ...LEVELS_DB.map((levelDb) =>
      simulateRecording(`${levelDb}.wav`, { ...shape, device: device(levelDb), seed: levelDb }),
    ),
    simulateNoise("room.wav", rateHz, NOISE_RMS, 2),
  ];
}

async function analyse(recordings: readonly Recording[], setting: Setting = {}): Promise<Result> {
  const { rateHz = 48_000, gain = 1, order = LEVELS_DB.map((_, i) => i) } = setting;
  const series = seriesSchema.parse({
    loudspeaker: "Simulated",
    environment: "anechoic",
    distance_m: 1,
    stimulus: {
      start_Hz: 20,
      stop_Hz: 20_000,
      length_s: LENGTH_S,
      rate_Hz: rateHz,
      lead_in_s: 0.3,
      lead_out_s: 0.3,
    },
    // A louder recording of the same sound: full scale is at a lower level.
    calibration: { full_scale_dB: 114 - 20 * Math.log10(gain) },
    ambient: { file: "room.wav" },
    runs: order.map((i) => ({ file: `${LEVELS_DB[i]}.wav`, level_dB: LEVELS_DB[i] })),
  });
  const louder = recordings.map((r) => ({ ...r, samples: r.samples.map((x) => gain * x) }));
  return analyseSeries(series, toMemorySource(louder));
}

/** Every number of a result, by its place; gone is what belongs to the recorder alone. */
function toNumbers(result: Result): Map<string, number> {
  const numbers = new Map<string, number>();
  const walk = (value: unknown, path: string): void => {
    if (/latency|peak_dBFS|drift/.test(path)) return;
    if (typeof value === "number") numbers.set(path, value);
    else if (Array.isArray(value)) value.forEach((inner, i) => walk(inner, `${path}[${i}]`));
    else if (typeof value === "object" && value !== null)
      for (const [key, inner] of Object.entries(value)) walk(inner, `${path}.${key}`);
  };
  walk({ runs: result.runs, bands: result.bands, headline: result.headline }, "");
  return numbers;
}

/** Numbers that are apart; the places of all of them must be the same. */
function listApart(result: Result, base: Result, toleranceDb: number): [string, number][] {
  const [a, b] = [toNumbers(result), toNumbers(base)];
  expect([...a.keys()]).toEqual([...b.keys()]);
  return [...a].filter(
    ([path, x]) => !(Math.abs(x - (b.get(path) ?? NaN)) <= toleranceDb + 1e-3 * Math.abs(x)),
  );
}

describe("the engine", () => {
  let recordings: Recording[];
  let base: Result;
  beforeAll(async () => {
    recordings = record({});
    base = await analyse(recordings);
  });

  it("has something to say about this loudspeaker", () => {
    expect(base.bands.every((band) => band.onset.status === "found")).toBe(true);
    expect(toNumbers(base).size).toBeGreaterThan(5000);
  });

  it("gives the same levels at any gain of the recorder", async () => {
    await fc.assert(
      fc.asyncProperty(fc.double({ min: -40, max: 12, noNaN: true }), async (gainDb) => {
        // Printed to 0.01 dB: the last digit may round either way.
        const other = await analyse(recordings, { gain: 10 ** (gainDb / 20) });
        expect(listApart(other, base, 0.0101).slice(0, 10)).toEqual([]);
      }),
      { numRuns: 6, seed: 3 },
    );
  });

  it("gives the same bands in any order of runs", async () => {
    await fc.assert(
      fc.asyncProperty(
        fc.shuffledSubarray([0, 1, 2], { minLength: 3, maxLength: 3 }),
        async (order) => {
          const { runs, bands, headline } = await analyse(recordings, { order });
          // Runs, and levels of a band, stand in the order of the series; nothing else may move.
          const upwards = <T extends { level_dB: number }>(list: readonly T[]): T[] =>
            list.toSorted((x, y) => x.level_dB - y.level_dB);
          expect(upwards(runs)).toEqual(base.runs);
          expect(bands.map((band) => ({ ...band, levels: upwards(band.levels) }))).toEqual(
            base.bands,
          );
          expect(headline).toEqual(base.headline);
        },
      ),
      { numRuns: 4, seed: 3 },
    );
  });

  it("gives the same levels at any delay, and tells the delay", async () => {
    await fc.assert(
      fc.asyncProperty(fc.nat(60_000), async (delay) => {
        const { runs, bands } = await analyse(record({ delay }));
        for (const run of runs)
          expect(Math.abs((run.latency_s ?? NaN) - delay / 48_000)).toBeLessThan(1e-5);
        expect(listLevelsApart(bands, base.bands)).toEqual([]);
      }),
      { numRuns: 4, seed: 3 },
    );
  });

  it.each([44_100, 96_000])("gives the same levels at %i Hz", async (rateHz) => {
    const { bands } = await analyse(record({ rateHz }), { rateHz });
    expect(listLevelsApart(bands, base.bands)).toEqual([]);
  });
});

/** Other noise: within the tolerances of level and compression, 40 Hz to 12.5 kHz. */
function listLevelsApart(bands: Result["bands"], expected: Result["bands"]): number[][] {
  expect(bands).toHaveLength(expected.length);
  return bands.flatMap((band, b) =>
    band.levels.flatMap((level, k) => {
      const other = expected[b]?.levels[k];
      const bass = band.nominal_Hz < 80;
      const errors = [
        ((level.spl_dB ?? NaN) - (other?.spl_dB ?? NaN)) / (bass ? 0.2 : 0.05),
        ((level.compression_dB ?? NaN) - (other?.compression_dB ?? NaN)) / (bass ? 0.1 : 0.03),
      ];
      return band.nominal_Hz <= 12_500 && errors.some((error) => !(Math.abs(error) <= 1))
        ? [[band.nominal_Hz, level.level_dB, ...errors]]
        : [];
    }),
  );
}

describe("the same series in one computing process and in two", () => {
  const folder = mkdtempSync(join(tmpdir(), "tidemark-same-"));
  afterAll(() => rmSync(folder, { recursive: true }));

  it("gives the same bytes, as it does in no process of its own", async () => {
    const bundle = listBundles().find(({ name }) => name === "compute-process");
    if (bundle === undefined) throw new Error("there is no entry of the computing process");
    await ensureBundle(bundle);
    writeSeriesFolder(folder, { levels: LEVELS_DB, device, lengthS: LENGTH_S });
    const series = parseSeries(readSeriesText(folder));
    const paths = Object.fromEntries(readdirSync(folder).map((file) => [file, join(folder, file)]));
    const task = { kind: "analyse" as const, series, paths };
    const children = [0, 1].map(() => createComputingChild(bundlePath("compute-process")));
    try {
      const [one, two] = children;
      const alone = await one!.run(task);
      // Both at once, several tasks each: warm tables and a loaded machine change nothing.
      const together = await Promise.all([one!.run(task), two!.run(task), two!.run(task)]);
      const texts = [alone, ...together].map(toResultText);
      texts.push(toResultText(await analyseSeries(series, createFolderSource(folder))));
      expect(new Set(texts).size).toBe(1);
      expect(texts[0]?.length).toBeGreaterThan(10_000);
    } finally {
      children.forEach((child) => child.close());
    }
  });
});
