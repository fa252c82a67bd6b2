/**
 * The whole engine on recordings through other programs' limiters, compressors and clippers of known
 * settings, against the noise-free device under the same sweep and its static law by steady tones.
 */
import { beforeAll, describe, expect, it } from "vitest";
import {
  compareDevice,
  missed,
  quantile,
  type DeviceReport,
  type OnsetReading,
} from "../support/devices/compare-device";
import { DEVICES, type OnsetClass } from "../support/devices/device";

const reports = new Map<string, DeviceReport>();
const reportOf = (name: string): DeviceReport => {
  const report = reports.get(name);
  if (report === undefined) throw new Error(`${name} was not measured`);
  return report;
};

describe.each(DEVICES)("$name", (device) => {
  beforeAll(async () => {
    reports.set(device.name, await compareDevice(device));
  }, 180_000);

  it("level of every band and run within 0.05 dB from 80 Hz, 0.2 dB below", () => {
    expect(reportOf(device.name).levels).toHaveLength(26 * 4);
    expect(missed(reportOf(device.name).levels)).toEqual([]);
  });

  it("compression within 0.03 dB from 80 Hz, 0.1 dB below", () => {
    expect(missed(reportOf(device.name).compression)).toEqual([]);
  });

  it("H2 and H3 within 0.1 dB or their own noise", () => {
    expect(missed(reportOf(device.name).harmonics)).toEqual([]);
  });

  it("THD within 0.15 dB or its own noise where measured, and never a bare number", () => {
    const report = reportOf(device.name);
    expect(missed(report.thd)).toEqual([]);
    const bare = report.result.bands
      .flatMap((b) => b.levels)
      .filter((l) => l.thd_percent !== null && l.thd_quality === null);
    expect(bare).toEqual([]);
  });

  it("an onset just where there is one", () => {
    const wrong = reportOf(device.name).onsets.filter(({ truthDb, status }) =>
      truthDb < 101
        ? status !== "found" && status !== "below lowest"
        : truthDb > 102.5 && status !== "not reached",
    );
    expect(wrong).toEqual([]);
  });

  it("intervals that contain the truth in 85 % of bands", () => {
    const found = reportOf(device.name).onsets.filter((o) => o.status === "found");
    const held = found.filter((o) => o.holdsTruth).length;
    expect(held).toBeGreaterThanOrEqual(0.85 * found.length);
  });

  it("its own cause where 1 dB or more is lost, and none where nothing is", () => {
    const report = reportOf(device.name);
    expect(report.causes.filter(({ cause }) => !device.causes.includes(cause))).toEqual([]);
    const invented = report.result.bands.filter(
      (b) => b.onset.status === "not reached" && b.cause !== "none",
    );
    expect(invented.map((b) => [b.nominal_Hz, b.cause])).toEqual([]);
  });

  it("the highest run that meets a criterion of compression or THD", () => {
    expect(reportOf(device.name).wrongHighestRuns).toEqual([]);
  });
});

/** Median error, nine bands in ten, median width; dB. */
const ONSET_LIMITS: Record<
  Exclude<OnsetClass, "none">,
  { median: number; nine: number; width: number }
> = {
  hard: { median: 0.4, nine: 0.7, width: 3.5 },
  overload: { median: 0.3, nine: 1, width: 3.5 },
  soft: { median: 2, nine: 4.2, width: 6 },
};

describe.each(Object.entries(ONSET_LIMITS))("onsets of all sets: %s", (onset, limits) => {
  const found = (): OnsetReading[] =>
    DEVICES.filter((d) => d.onset === onset)
      .flatMap((d) => reportOf(d.name).onsets)
      .filter((o) => o.status === "found");

  it(`median error at most ${limits.median} dB, nine in ten within ${limits.nine} dB`, () => {
    const errors = found().map((o) => o.errorDb);
    expect(errors.length).toBeGreaterThan(20);
    expect(quantile(errors, 0.5)).toBeLessThanOrEqual(limits.median);
    expect(quantile(errors, 0.9)).toBeLessThanOrEqual(limits.nine);
  });

  it(`median width at most ${limits.width} dB`, () => {
    expect(
      quantile(
        found().map((o) => o.widthDb),
        0.5,
      ),
    ).toBeLessThanOrEqual(limits.width);
  });
});
