import { describe, expect, it } from "vitest";
import { planSchema } from "./plan-schema";
import { toPlannedRuns } from "./planned-runs";
import { seriesSchema } from "./series-schema";
import { toSeriesJson, type UsableRun } from "./to-series-json";

const loudspeaker = {
  maker: "Withy Lane",
  model: "Osier 5A",
  largestDimensionM: 0.31,
  tuningHz: 52,
};
const plan = planSchema.parse({
  levels: [{ level_dB: 76 }, { level_dB: 86 }, { level_dB: 96, long_term: true }],
  variants: [{ text: "port blocked", level_dB: 96 }],
});
const all: UsableRun[] = toPlannedRuns(plan, "osier5a").map((run, index) => ({
  id: `run-${index}`,
  role: run.role,
  levelDb: run.levelDb,
  variant: run.variant,
  file: run.fileName,
  digest: String(index).padStart(64, "0"),
  channel: run.slot === "short-86" ? 2 : 1,
}));
const without = (...roles: string[]) => all.filter((run) => !roles.includes(run.role));

describe("toSeriesJson", () => {
  it("writes the whole series as the contract has it", () => {
    const { series, files } = toSeriesJson({ loudspeaker, plan, runs: all });
    expect(seriesSchema.parse(JSON.parse(JSON.stringify(series)))).toEqual(series);
    expect(series).toMatchObject({
      loudspeaker: "Withy Lane Osier 5A",
      environment: "anechoic",
      distance_m: 1,
      largest_dimension_m: 0.31,
      tuning_Hz: 52,
      stimulus: { start_Hz: 20, stop_Hz: 20_000, length_s: 11.05, lead_in_s: 1, lead_out_s: 0.8 },
      calibration: {
        file: "osier5a_calibrator.wav",
        after_file: "osier5a_calibrator_after.wav",
        level_dB: 94,
      },
      ambient: { file: "osier5a_room.wav" },
      settings: { criteria: plan.criteria },
    });
    expect(series.runs.map((run) => [run.file, run.level_dB, run.kind, run.channel])).toEqual([
      ["osier5a_76_short.wav", 76, "short-term", 1],
      ["osier5a_86_short.wav", 86, "short-term", 2],
      ["osier5a_96_short.wav", 96, "short-term", 1],
      ["osier5a_96_variant1.wav", 96, "short-term", 1],
      ["osier5a_96_long.wav", 96, "long-term", 1],
      ["osier5a_76_closing.wav", 76, "closing", 1],
    ]);
    expect(series.runs[3]?.variant).toBe("port blocked");
    expect(series.runs[4]?.conditioning).toEqual(plan.conditioning);
    expect(files).toHaveLength(all.length);
    expect(files[0]).toEqual({
      file: "osier5a_calibrator.wav",
      digest: "0".repeat(64),
      run_id: "run-0",
    });
  });

  it("is the same text for the same recordings", () => {
    const text = () => JSON.stringify(toSeriesJson({ loudspeaker, plan, runs: all }));
    expect(text()).toBe(text());
  });

  it.each([
    ["the calibrator after", without("calibrator-before"), "osier5a_calibrator_after.wav"],
    ["the calibrator before", without("calibrator-after"), "osier5a_calibrator.wav"],
  ])("makes do with %s alone", (_name, runs, file) => {
    const { calibration } = toSeriesJson({ loudspeaker, plan, runs }).series;
    expect(calibration).toEqual({ file, level_dB: 94, frequency_Hz: 1000 });
  });

  it("takes a known sensitivity", () => {
    const known = planSchema.parse({
      ...plan,
      calibration: { by: "sensitivity", full_scale_dB: 124 },
    });
    const runs = without("calibrator-before", "calibrator-after", "ambient");
    const { series } = toSeriesJson({ loudspeaker, plan: known, runs });
    expect(series.calibration).toEqual({ full_scale_dB: 124 });
    expect(series.ambient).toBeUndefined();
  });

  it("needs no calibration where all runs are tables, and keeps how their columns were mapped", () => {
    const columns = { frequency: 2, level: 1, harmonics: [], kilohertz: false };
    const runs = without("calibrator-before", "calibrator-after", "ambient").map((run) => ({
      ...run,
      file: run.file.replace(".wav", ".csv"),
      columns: run.levelDb === 86 ? columns : null,
    }));
    const { series } = toSeriesJson({ loudspeaker, plan, runs });
    expect(series.calibration).toBeUndefined();
    expect(series.runs.map((run) => run.columns)).toEqual([
      undefined,
      columns,
      undefined,
      undefined,
      undefined,
      undefined,
    ]);
    const mixed = runs.map((run, at) => (at === 0 ? { ...run, file: "76.wav" } : run));
    expect(() => toSeriesJson({ loudspeaker, plan, runs: mixed })).toThrow(
      expect.objectContaining({ code: "calibration.missing" }) as Error,
    );
  });

  it("names the microphone file with its own digest", () => {
    const microphone = { file_name: "capsule 4.txt", digest: "a".repeat(64), kind: "correction" };
    const withFile = planSchema.parse({ ...plan, microphone });
    const { series, files } = toSeriesJson({ loudspeaker, plan: withFile, runs: all });
    expect(series.microphone).toEqual({ file: "microphone.txt", kind: "correction" });
    expect(files.at(-1)).toEqual({
      file: "microphone.txt",
      digest: "a".repeat(64),
      run_id: null,
    });
  });

  it.each([
    ["no level", all.filter((run) => run.role !== "short-term"), "series.too-few-runs"],
    [
      "one level",
      all.filter((run) => run.role !== "short-term" || run.levelDb === 76),
      "series.too-few-runs",
    ],
    ["no calibrator", without("calibrator-before", "calibrator-after"), "calibration.missing"],
  ])("refuses %s", (_name, runs, code) => {
    expect(() => toSeriesJson({ loudspeaker, plan, runs })).toThrow(
      expect.objectContaining({ code }) as Error,
    );
  });
});
