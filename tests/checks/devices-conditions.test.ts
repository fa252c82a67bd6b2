/** Devices under the conditions of real benches: noise, steps that are off, clocks that differ, another rate. */
import { describe, expect, it } from "vitest";
import { analyseSeries } from "../../lib/analysis/analyse-series";
import type { SeriesSource } from "../../lib/analysis/measure-series";
import { compareDevice, missed, quantile } from "../support/devices/compare-device";
import { DEVICES, type Device } from "../support/devices/device";
import { recordDevice, type Conditions } from "../support/devices/record-device";

const find = (name: string): Device => {
  const device = DEVICES.find((d) => d.name === name);
  if (device === undefined) throw new Error(`no device ${name}`);
  return device;
};
const limiter = find("look-ahead peak limiter at 93 dB");
const linear = find("no effect");

const ROWS: {
  name: string;
  device: Device;
  conditions: Conditions;
  onsets: "found" | "not reached";
}[] = [
  { name: "a clock 20 ppm fast", device: limiter, conditions: { driftPpm: 20 }, onsets: "found" },
  {
    name: "a clock 20 ppm slow",
    device: linear,
    conditions: { driftPpm: -20 },
    onsets: "not reached",
  },
  { name: "96 kHz", device: { ...limiter, rateHz: 96_000 }, conditions: {}, onsets: "found" },
];

describe("the same tolerances hold", () => {
  it.each(ROWS)(
    "with $name",
    async ({ device, conditions, onsets }) => {
      const report = await compareDevice(device, conditions);
      expect(missed(report.levels)).toEqual([]);
      expect(missed(report.compression)).toEqual([]);
      expect(missed(report.harmonics)).toEqual([]);
      expect(missed(report.thd)).toEqual([]);
      expect(report.onsets.filter((o) => o.status !== onsets)).toEqual([]);
      expect(report.result.warnings.filter((w) => w.code === "run.clock-drift")).toEqual([]);
    },
    120_000,
  );
});

describe("a room that reflects", () => {
  it("gives no SPL, but compression, onset and cause as in the open", async () => {
    const report = await compareDevice(limiter, { inRoom: true });
    const { result, compression, onsets, causes } = report;
    expect(result.spl_valid).toBe(false);
    expect(result.bands.flatMap((b) => b.levels).every((l) => l.spl_dB === null)).toBe(true);
    expect(result.bands.every((b) => b.spl_uncertainty === null)).toBe(true);
    expect(result.warnings.map((w) => w.code)).toContain("spl.not-assessed");
    expect(missed(compression)).toEqual([]);
    expect(onsets.filter((o) => o.status !== "found")).toEqual([]);
    expect(
      quantile(
        onsets.map((o) => o.errorDb),
        0.5,
      ),
    ).toBeLessThanOrEqual(0.4);
    expect(onsets.filter((o) => o.holdsTruth).length).toBeGreaterThanOrEqual(0.85 * onsets.length);
    expect(causes.filter(({ cause }) => !limiter.causes.includes(cause))).toEqual([]);
  }, 120_000);
});

describe("a loopback channel", () => {
  it("takes wrong steps out exactly, tells clocks 100 ppm apart, and neither bends a level", async () => {
    const stepErrorDb = { 86: 0.25, 96: -0.1, 102: -0.4 };
    const conditions = { loopback: true, stepErrorDb, driftPpm: 100 };
    const { result, levels } = await compareDevice(linear, conditions);
    const near = (value: number, digits: number): number => expect.closeTo(value, digits) as number;
    expect(result.runs.map((r) => r.drive_dB)).toEqual([
      76,
      near(86.25, 2),
      near(95.9, 2),
      near(101.6, 2),
    ]);
    expect(result.runs.map((r) => r.drift_ppm)).toEqual(result.runs.map(() => near(-100, 0)));
    expect(result.warnings.map((w) => w.code)).toEqual(result.runs.map(() => "run.clock-drift"));
    expect(missed(levels)).toEqual([]);
    const losses = result.bands
      .filter((b) => b.nominal_Hz >= 80 && b.nominal_Hz <= 12_500)
      .flatMap((b) => b.levels.map((l) => l.compression_dB ?? NaN));
    expect(losses).toHaveLength(23 * 4);
    expect(losses.filter((loss) => !(Math.abs(loss) <= 0.03))).toEqual([]);
    expect(result.bands.filter((b) => b.onset.status !== "not reached")).toEqual([]);
  }, 120_000);
});

describe("variant runs", () => {
  it("are told beside the plain ones and change nothing of them", async () => {
    const plain = await recordDevice(limiter);
    const freed = await recordDevice({
      ...limiter,
      effect: linear.effect,
      name: "its limiter off",
    });
    const series = {
      ...plain.series,
      runs: [
        ...plain.series.runs,
        ...freed.series.runs.map((run) => ({
          ...run,
          file: `off-${run.file}`,
          variant: "limiter off",
        })),
      ],
    };
    const source: SeriesSource = {
      ...plain.source,
      readRecording: (file, ...rest) =>
        file.startsWith("off-")
          ? freed.source.readRecording(file.slice(4), ...rest)
          : plain.source.readRecording(file, ...rest),
    };
    const alone = await analyseSeries(plain.series, plain.source);
    const both = await analyseSeries(series, source);
    const withoutVariants = both.bands.map((band) => ({
      ...band,
      levels: band.levels.filter((level) => level.variant === undefined),
    }));
    expect(withoutVariants).toEqual(alone.bands);
    expect(both.headline).toEqual(alone.headline);
    const losses = both.bands
      .filter((b) => b.nominal_Hz >= 80 && b.nominal_Hz <= 12_500)
      .flatMap((b) => b.levels.filter((l) => l.variant === "limiter off"))
      .map((l) => l.compression_dB ?? NaN);
    expect(losses).toHaveLength(23 * 4);
    expect(losses.filter((loss) => !(Math.abs(loss) <= 0.03))).toEqual([]);
  }, 120_000);
});

describe("a noisy room", () => {
  it("widens uncertainties and bends no level: three of them hold every error", async () => {
    const { result, compression, onsets } = await compareDevice(linear, { roomDb: 56 });
    const uncertainties = result.bands
      .filter((b) => b.nominal_Hz <= 12_500)
      .flatMap((b) => b.levels.map((l) => l.uncertainty_dB ?? NaN));
    expect(uncertainties).toHaveLength(compression.length);
    const beyond = compression.filter(
      (r, i) => !(Math.abs(r.error) <= Math.max(0.03, 3 * (uncertainties[i] ?? 0))),
    );
    expect(beyond).toEqual([]);
    expect(onsets.filter((o) => o.status === "found")).toEqual([]);
  }, 120_000);
});

describe("a step of the player that is off by 0.1 dB", () => {
  it("is said for all bands and never taken off", async () => {
    const { result } = await compareDevice(linear, { stepErrorDb: { 96: -0.1 } });
    const losses = result.bands
      .flatMap((b) => b.levels)
      .filter((l) => l.level_dB === 96)
      .map((l) => l.compression_dB ?? NaN);
    expect(losses.filter((loss) => !(Math.abs(loss - 0.1) <= 0.04))).toEqual([]);
    expect(result.warnings.map((w) => [w.code, w.message])).toEqual([
      ["level.common-offset", expect.stringMatching(/^all bands: 0\.1 dB in the 96 dB run/)],
    ]);
    expect(result.bands.filter((b) => b.onset.status === "found")).toEqual([]);
  }, 120_000);
});
