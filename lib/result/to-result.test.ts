import { describe, expect, it } from "vitest";
import { simulateRecording, toMemorySource } from "../../tests/support/simulated-sweep";
import { analyseSeries } from "../analysis/analyse-series";
import { seriesSchema } from "../series/series-schema";
import { resultSchema, type Result } from "./result-schema";
import { toResultText } from "./result-text";

const LEVELS = [76.005, 86];

async function analyse(environment: string): Promise<Result> {
  const stimulus = {
    startHz: 20,
    stopHz: 20_000,
    lengthS: 1.5,
    rateHz: 44_100,
    leadInS: 0.3,
    leadOutS: 0.3,
  };
  const recordings = LEVELS.map((levelDb, i) =>
    simulateRecording(`${levelDb}.wav`, {
      stimulus,
      device: { amplitudes: () => [10 ** ((levelDb - 106) / 20), 1e-4] },
      delay: 3000,
      after: 20_000,
      noiseRms: 1e-5,
      seed: i,
    }),
  );
  const series = seriesSchema.parse({
    loudspeaker: "Simulated",
    environment,
    distance_m: 1,
    stimulus: {
      start_Hz: 20,
      stop_Hz: 20_000,
      length_s: 1.5,
      rate_Hz: 44_100,
      lead_in_s: 0.3,
      lead_out_s: 0.3,
    },
    calibration: { full_scale_dB: 106 },
    runs: LEVELS.map((level_dB) => ({ file: `${level_dB}.wav`, level_dB })),
    settings: { criteria: [{ compression_dB: 0.3333 }] },
  });
  return analyseSeries(series, toMemorySource(recordings));
}

function* numbersOf(value: unknown, key = ""): Generator<[string, number]> {
  if (typeof value === "number") yield [key, value];
  else if (Array.isArray(value)) for (const item of value) yield* numbersOf(item, key);
  else if (value !== null && typeof value === "object")
    for (const [name, item] of Object.entries(value)) yield* numbersOf(item, name);
}

describe("toResult", () => {
  it("fits the schema, rounds decibels to hundredths and keeps what was stated", async () => {
    const result = await analyse("anechoic");
    expect(resultSchema.parse(result)).toEqual(result);
    expect(result.runs.map((r) => r.level_dB)).toEqual(LEVELS);
    expect(result.settings.criteria).toEqual([{ compression_dB: 0.3333 }]);
    expect(result.bands[0]?.limits[0]?.criterion).toEqual({ compression_dB: 0.3333 });
    const decibels = [...numbersOf({ ...result, settings: null })].filter(
      ([key]) => key.endsWith("_dB") && !["level_dB", "drive_dB", "compression_dB"].includes(key),
    );
    expect(decibels.length).toBeGreaterThan(1000);
    const fine = decibels.filter(
      ([, value]) => Math.abs(value * 100 - Math.round(value * 100)) > 1e-6,
    );
    expect(fine).toEqual([]);
    expect(result.bands[0]?.levels.every((l) => (l.uncertainty_dB ?? 0) >= 0.01)).toBe(true);
  });

  it("gives no SPL anywhere where the place gives none, but compression", async () => {
    const result = await analyse("in-room");
    const spl = [...numbersOf(result)].filter(([key]) => key === "spl_dB" || key === "spl_dBA");
    expect(spl).toEqual([]);
    expect(result.runs.every((r) => r.measured_level_dB === null)).toBe(true);
    expect(result.bands[10]?.levels[1]?.compression_dB).toBeCloseTo(0, 1);
    expect(result.warnings.map((w) => w.code)).toContain("spl.not-assessed");
  });

  it("the same input gives the same bytes", async () => {
    expect(toResultText(await analyse("anechoic"))).toBe(toResultText(await analyse("anechoic")));
  });
});
