import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { AppError } from "../errors/app-error";
import { parseSeries } from "./parse-series";

const SERIES = {
  loudspeaker: "Fennel 5",
  environment: "anechoic",
  distance_m: 1,
  stimulus: { start_Hz: 20, stop_Hz: 20_000, length_s: 11, rate_Hz: 48_000 },
  calibration: { full_scale_dB: 124 },
  runs: [{ file: "76.wav", level_dB: 76 }],
};

const withRun = (keys: object): object => ({
  ...SERIES,
  runs: [{ file: "76.wav", level_dB: 76, ...keys }],
});

describe("parseSeries", () => {
  it("fills in defaults and bears a byte-order mark", () => {
    const series = parseSeries(`\uFEFF${JSON.stringify(SERIES)}`);
    expect(series.runs[0]).toMatchObject({ kind: "short-term", channel: 1 });
    expect(series.settings.criteria).toHaveLength(4);
    expect(series.stimulus.lead_in_s).toBe(0);
  });

  it.each([
    ["series.unknown-key", { ...SERIES, colour: 1 }, "colour"],
    [
      "series.unknown-key",
      { ...SERIES, runs: [{ file: "76.wav", level_dB: 76, gain: 1 }] },
      "runs[0].gain",
    ],
    [
      "series.unknown-key",
      { ...SERIES, calibration: { full_scale_dB: 124, unit: "dB" } },
      "calibration.unit",
    ],
    ["series.invalid", { ...SERIES, distance_m: 0 }, "distance_m"],
    ["series.invalid", { ...SERIES, environment: "hall" }, "environment"],
    ["series.invalid", { ...SERIES, environment: "gated" }, "gate_ms"],
    ["series.invalid", { ...SERIES, runs: [] }, "runs"],
    [
      "series.invalid",
      { ...SERIES, stimulus: { ...SERIES.stimulus, stop_Hz: 30_000 } },
      "stimulus.stop_Hz",
    ],
    ["series.invalid", { ...SERIES, reference_band_Hz: [30_000, 40_000] }, "reference_band_Hz"],
    ["series.invalid", withRun({ sweeps: 3 }), "runs[0].period_s is needed"],
    ["series.invalid", withRun({ period_s: 12 }), "runs[0].sweeps is needed"],
    ["series.invalid", withRun({ sweeps: 3, period_s: 4 }), "runs[0].period_s must not"],
    ["series.invalid", withRun({ loopback_channel: 1 }), "runs[0].loopback_channel"],
    ["series.invalid", { ...SERIES, settings: { criteria: [{}] } }, "settings.criteria[0]"],
    ["series.file-name", { ...SERIES, ambient: { file: "../room.wav" } }, "ambient.file"],
    [
      "series.file-name",
      { ...SERIES, runs: [{ file: "/etc/passwd", level_dB: 76 }] },
      "runs[0].file",
    ],
  ])("refuses with %s and names the place", (code, series, place) => {
    const parse = (): unknown => parseSeries(JSON.stringify(series));
    expect(parse).toThrow(expect.objectContaining({ code }));
    expect(parse).toThrow(place);
  });

  it("is a series or a typed error for any text (fuzzed)", () => {
    const outcome = (text: string): unknown => {
      try {
        return parseSeries(text).loudspeaker;
      } catch (error) {
        return error instanceof AppError ? error.code : error;
      }
    };
    const changed = fc
      .tuple(fc.constantFrom(...Object.keys(SERIES)), fc.jsonValue())
      .map(([key, value]) => JSON.stringify({ ...SERIES, [key]: value }));
    fc.assert(
      fc.property(fc.oneof(fc.string(), fc.json(), changed), (text) => {
        expect(outcome(text)).toBeTypeOf("string");
      }),
      { numRuns: 500 },
    );
  });
});
