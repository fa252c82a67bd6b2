import { describe, expect, it } from "vitest";
import { ZodError } from "zod";
import { resultRunSchema, resultSchema, type Result, type ResultRun } from "./result-schema";
import { toResultText } from "./result-text";

const run: ResultRun = {
  file: "76.wav",
  level_dB: 76,
  drive_dB: 76,
  kind: "short-term",
  measured_level_dB: 76.1,
  latency_s: 0.1,
  drift_ppm: null,
  peak_dBFS: -20,
  clipped: false,
  snr_dB: 50,
  spl_dB: [70.5, null],
  floor_dB: [20, 21],
  harmonics: [{ order: 2, spl_dB: [30, null], floor_dB: [10, null], quality: ["measured", null] }],
  thd_percent: [0.5, null],
  thd_quality: ["uncertain", null],
  thd_orders: ["2-5", ""],
};

const resultOf = (...runs: ResultRun[]): Result => ({
  engine: { name: "tidemark", version: "1" },
  settings: { criteria: [{ thd_percent: 3 }] },
  environment: "anechoic",
  distance_m: 1,
  spl_valid: true,
  grid_Hz: [100, 103],
  runs,
  bands: [],
  shape: [],
  headline: [],
  programme: [],
  warnings: [],
});

describe("toResultText", () => {
  it("prints what the schema of a result gives, in its order of keys", () => {
    const reversed = Object.fromEntries(Object.entries(run).toReversed()) as ResultRun;
    const result = resultOf(run, { ...reversed, variant: "port blocked" });
    expect(toResultText(result)).toBe(`${JSON.stringify(resultSchema.parse(result))}\n`);
  });

  const nan = Number.NaN;
  it.each<[string, unknown]>([
    ["a curve with NaN", { spl_dB: [70, nan] }],
    ["a curve with an infinity", { floor_dB: [70, -Infinity] }],
    ["a curve with text", { thd_percent: ["0.5"] }],
    ["a hole in a curve", { spl_dB: [undefined, 70] }],
    ["a curve that is no list", { spl_dB: 70 }],
    ["an unknown quality", { thd_quality: ["good"] }],
    ["orders that are no text", { thd_orders: [2] }],
    ["a harmonic with NaN", { harmonics: [{ ...run.harmonics[0], spl_dB: [nan] }] }],
    ["no level", { level_dB: null }],
  ])("refuses %s, as the schema does", (_, part) => {
    const wrong = { ...run, ...(part as Partial<ResultRun>) };
    expect(resultRunSchema.safeParse(wrong).success).toBe(false);
    expect(() => toResultText(resultOf(wrong))).toThrow(ZodError);
  });
});
