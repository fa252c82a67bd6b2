/** Devices under the conditions of real benches: noise, steps that are off, clocks that differ, another rate. */
import { describe, expect, it } from "vitest";
import { compareDevice, missed } from "../support/devices/compare-device";
import { DEVICES, type Device } from "../support/devices/device";
import type { Conditions } from "../support/devices/record-device";

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
    expect(result.warnings.filter((w) => /0\.1\s?dB/.test(w.message)).map((w) => w.code)).toContain(
      "level.common-offset",
    );
    expect(result.bands.filter((b) => b.onset.status === "found")).toEqual([]);
  }, 120_000);
});
