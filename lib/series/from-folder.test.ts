import { describe, expect, it } from "vitest";
import { AppError } from "../errors/app-error";
import { toLoudspeakerFacts, toPlannedFolder } from "./from-folder";
import { planSchema } from "./plan-schema";
import { toPlannedRuns } from "./planned-runs";
import { seriesSchema, type Series } from "./series-schema";
import { toSeriesJson } from "./to-series-json";

const conditioning = { minutes: 5, crest_dB: 12, rms_re_sweep_dB: -3, gap_s: 0.5 };
const base = {
  loudspeaker: "Fennel 5",
  environment: "anechoic",
  distance_m: 1,
  tuning_Hz: 52,
  stimulus: {
    start_Hz: 20,
    stop_Hz: 20_000,
    length_s: 11.052408446,
    rate_Hz: 48_000,
    lead_in_s: 1,
    lead_out_s: 0.8,
  },
  calibration: { file: "cal.wav", level_dB: 94, after_file: "cal-after.wav" },
  microphone: { file: "mic/our mic.txt", kind: "response" },
  ambient: { file: "quiet.wav" },
  uncertainty: { calibrator_dB: 0.3, temperature_C: 21 },
  // Not in the order of a plan, and under names of its own.
  runs: [
    { file: "96.wav", level_dB: 96 },
    { file: "76.wav", level_dB: 76, channel: 2 },
    { file: "deep/76 again.flac", level_dB: 76 },
    { file: "96-blocked.wav", level_dB: 96, variant: "port blocked" },
    { file: "96-long.wav", level_dB: 96, kind: "long-term", conditioning },
    { file: "close.wav", level_dB: 76, kind: "closing" },
  ],
  settings: { criteria: [{ thd_percent: 3 }] },
};
const parse = (change: object = {}): Series => seriesSchema.parse({ ...base, ...change });
const facts = (series: Series) => ({
  loudspeaker: toLoudspeakerFacts(series),
  microphoneDigest: series.microphone === undefined ? null : "ab".repeat(32),
});

function faultOf(series: Series): AppError {
  try {
    toPlannedFolder(series, facts(series));
  } catch (error) {
    if (error instanceof AppError) return error;
  }
  throw new Error("it was taken");
}

describe("toPlannedFolder", () => {
  it("plans what gives the engine the very series.json again, order and names included", () => {
    const series = parse();
    const { plan, uploads } = toPlannedFolder(series, facts(series));
    const bySlot = new Map(uploads.map((one) => [one.slot, one]));
    const planned = toPlannedRuns(plan, "anything");
    expect(planned.map(({ slot, fileName }) => [slot, fileName])).toEqual(
      uploads.map(({ slot, file }) => [slot, file]),
    );
    const again = toSeriesJson({
      loudspeaker: { maker: "Fennel", model: "5", largestDimensionM: null, tuningHz: 52 },
      plan,
      runs: planned.map(({ slot, role, levelDb, variant, fileName }) => ({
        id: slot,
        role,
        levelDb,
        variant,
        file: fileName,
        digest: slot,
        channel: bySlot.get(slot)?.channel ?? 1,
      })),
    }).series;
    expect(again).toEqual({ ...series, reference_band_Hz: [500, 2000] });
  });

  it("sends calibrator and room first, then the ladder upwards", () => {
    const series = parse();
    expect(toPlannedFolder(series, facts(series)).uploads.map(({ slot }) => slot)).toEqual([
      "calibrator-before",
      "ambient",
      "short-76",
      "short-76-2",
      "short-96",
      "variant-1-96",
      "long-96",
      "closing-76",
      "calibrator-after",
    ]);
  });

  it.each([
    ["a stimulus of its own", { stimulus: { ...base.stimulus, file: "s.wav" } }, "stimulus.file"],
    ["reflections", { uncertainty: { reflections_dB: 1 } }, "uncertainty"],
    [
      "a drive",
      { runs: [...base.runs, { file: "86.wav", level_dB: 86, drive_dB: 85 }] },
      "drive_dB",
    ],
    [
      "a train",
      { runs: [...base.runs, { file: "86.wav", level_dB: 86, sweeps: 2, period_s: 20 }] },
      "sweeps",
    ],
    [
      "a level with a long-term run alone",
      { runs: [...base.runs, { file: "l.wav", level_dB: 90, kind: "long-term", conditioning }] },
      "runs",
    ],
    [
      "two ways of conditioning",
      {
        runs: [...base.runs, { file: "76-long.wav", level_dB: 76, kind: "long-term" }],
      },
      "conditioning",
    ],
    [
      "a closing run at another level",
      { runs: [...base.runs.slice(0, 5), { file: "c.wav", level_dB: 96, kind: "closing" }] },
      "closing",
    ],
  ])("refuses %s and names it", (_what, change, named) => {
    const fault = faultOf(parse(change));
    expect(fault.code).toBe("series.not-plannable");
    expect(fault.message).toContain(named);
    expect(fault.message).toContain("analysis command");
  });

  it("refuses what a plan does not take, and a folder without calibration", () => {
    expect(faultOf(parse({ distance_m: 40 }))).toMatchObject({ code: "plan.invalid" });
    expect(faultOf(parse({ calibration: undefined }))).toMatchObject({
      code: "calibration.missing",
    });
  });

  it("refuses a name that means something else in a folder of ours", () => {
    const runs = [...base.runs, { file: "Result.JSON", level_dB: 86 }];
    expect(faultOf(parse({ runs }))).toMatchObject({ code: "series.file-name" });
  });

  it("refuses a loudspeaker that says something else", () => {
    const series = parse();
    const other = { ...facts(series), loudspeaker: { largestDimensionM: null, tuningHz: 40 } };
    expect(() => toPlannedFolder(series, other)).toThrow("tuning_Hz");
  });

  it("keeps its names apart from ours where a run is asked for later", () => {
    const series = parse({ runs: [...base.runs, { file: "folder_86_short.wav", level_dB: 82 }] });
    const { plan } = toPlannedFolder(series, facts(series));
    const asked = {
      slot: "short-86",
      levelDb: 86,
      kind: "short-term",
      variant: null,
      by: "T. Reith",
      reason: "narrower",
    } as const;
    const names = toPlannedRuns(plan, "folder", [asked]).map(({ fileName }) => fileName);
    expect(names).toContain("another_folder_86_short.wav");
    expect(new Set(names).size).toBe(names.length);
  });

  it("takes what a plan of ours gives", () => {
    const plan = planSchema.parse({ levels: [{ level_dB: 76 }, { level_dB: 86, repeats: 1 }] });
    const runs = toPlannedRuns(plan, "osier").map(({ slot, role, levelDb, variant, fileName }) => ({
      id: slot,
      role,
      levelDb,
      variant,
      file: fileName,
      digest: slot,
      channel: 1,
    }));
    const { series } = toSeriesJson({
      loudspeaker: { maker: "A", model: "B", largestDimensionM: 0.4, tuningHz: null },
      plan,
      runs,
    });
    const taken = toPlannedFolder(series, facts(series));
    expect(taken.uploads.map(({ slot }) => slot)).toEqual(runs.map(({ id }) => id));
  });
});
