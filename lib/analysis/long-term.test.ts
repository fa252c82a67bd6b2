import { describe, expect, it } from "vitest";
import { measuredSeries, plainRuns, type Device } from "@/tests/support/measured-series";
import { seededRandom } from "@/tests/support/seeded-random";
import { DEFAULT_CRITERIA } from "../series/series-schema";
import { assessSeries } from "./assess-series";

const settings = { criteria: [...DEFAULT_CRITERIA] };
const conditioning = { minutes: 10, crest_dB: 12, rms_re_sweep_dB: -3, gap_s: 0.5 };
const runs = [...plainRuns(76, 86, 96), { levelDb: 96, kind: "long-term" as const, conditioning }];
/** 0.4 dB short-term at 96 dB everywhere; heat takes 0.3 dB more below 1 kHz (band 14), 0.02 dB above. */
const device: Device = {
  lossDb: (b, drive, run) =>
    (drive > 90 ? 0.4 : 0) + (run.kind === "long-term" ? (b < 14 ? 0.3 : 0.02) : 0),
};

describe("long-term losses", () => {
  const { bands } = assessSeries(
    measuredSeries({ device, runs, random: seededRandom(5), noiseDb: 0.003 }),
    settings,
  );

  it("separates what came with time from the short-term loss", () => {
    const [loss] = bands[3]?.long_term ?? [];
    // Tolerance of the thermal part: 0.02 dB.
    expect(Math.abs((loss?.thermal_dB ?? 0) - 0.3)).toBeLessThan(0.02);
    expect(Math.abs((loss?.total_dB ?? 0) - 0.7)).toBeLessThan(0.02);
    expect(loss?.cause).toBe("thermal");
    expect(bands[20]?.long_term[0]?.cause).toBe("none");
  });

  it("marks a lower bound above 1 kHz once a second has passed: gap + R ln(f/f1)", () => {
    // 0.5 s + 1.6 s ln(f / 20 Hz) passes 1 s at 27 Hz, so the frequency decides.
    const bounds = bands
      .filter(({ long_term }) => long_term[0]?.lower_bound)
      .map(({ nominal_Hz }) => nominal_Hz);
    expect(bounds[0]).toBe(1250);
    expect(bounds.at(-1)).toBe(16_000);
  });

  it("does not know the thermal part without a short run of that level", () => {
    const without = measuredSeries({
      device,
      runs: runs.filter((run) => run.levelDb !== 96 || "kind" in run),
    });
    const [loss] = assessSeries(without, settings).bands[3]?.long_term ?? [];
    expect(loss).toMatchObject({ thermal_dB: null, cause: "unresolved" });
    expect(loss?.total_dB).toBeCloseTo(0.7, 6);
  });

  it("takes no thermal part under three standard uncertainties for heat", () => {
    const noisy = measuredSeries({ device, runs, noiseDb: 0.1 });
    const [loss] = assessSeries(noisy, settings).bands[3]?.long_term ?? [];
    // 0.3 dB against 3 * 0.14 dB; the printed uncertainty is twice the standard one.
    expect(loss?.cause).toBe("none");
    expect(loss?.uncertainty_dB).toBeCloseTo(2 * Math.hypot(0.1, 0.1), 6);
  });

  it("tells broadband loss and local excess of every run against the reference", () => {
    const { shape } = assessSeries(measuredSeries({ device, runs }), settings);
    expect(shape.map(({ kind, level_dB }) => `${kind} ${level_dB}`)).toEqual([
      "short-term 86",
      "short-term 96",
      "long-term 96",
    ]);
    const long = shape[2];
    expect(long?.broadband_dB).toBeCloseTo(0.4 + (14 * 0.3 + 13 * 0.02) / 27, 6);
    expect(long?.excess_dB).toBeCloseTo(0.7 - (long?.broadband_dB ?? 0), 6);
    expect(long?.excess_Hz).toBe(40);
  });
});
