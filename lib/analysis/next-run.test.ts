import { describe, expect, it } from "vitest";
import { measuredSeries, plainRuns } from "@/tests/support/measured-series";
import { gainRider } from "@/tests/support/static-devices";
import { seededRandom } from "@/tests/support/seeded-random";
import type { Band } from "../result/result-schema";
import { DEFAULT_CRITERIA } from "../series/series-schema";
import { assessSeries } from "./assess-series";

const limiter = gainRider(91, 4, 0.05);
const device = { lossDb: (_b: number, drive: number) => limiter.lossDb(drive) };

function bandOf(...levelsDb: number[]): Band {
  const series = measuredSeries({
    device,
    runs: plainRuns(...levelsDb),
    random: seededRandom(12),
    bands: 6,
  });
  const [band] = assessSeries(series, { criteria: [...DEFAULT_CRITERIA] }).bands;
  if (!band) throw new Error("no band");
  return band;
}
const widthOf = ({ onset }: Band): number =>
  (onset.high_dB ?? Number.NaN) - (onset.low_dB ?? Number.NaN);

describe("the next run", () => {
  it("is a whole level inside the series that narrows the interval, about as far as promised", () => {
    const before = bandOf(76, 86, 96, 102);
    const next = before.evidence.next_run;
    expect(next).not.toBeNull();
    expect(Number.isInteger(next?.level_dB)).toBe(true);
    expect(next?.level_dB).toBeGreaterThan(86);
    expect(next?.level_dB).toBeLessThan(96);
    expect(next?.width_now_dB).toBeCloseTo(widthOf(before), 6);
    const after = bandOf(76, 86, next?.level_dB ?? Number.NaN, 96, 102);
    expect(widthOf(after)).toBeLessThan(widthOf(before));
    expect(Math.abs(widthOf(after) - (next?.width_expected_dB ?? Number.NaN))).toBeLessThan(0.8);
  });

  it("is the best of the levels that were weighed, none of them recorded already", () => {
    const next = bandOf(76, 86, 96, 102).evidence.next_run;
    const candidates = next?.candidates ?? [];
    expect(candidates.length).toBeGreaterThan(3);
    const widths = candidates.map((one) => one.width_expected_dB);
    expect(next?.width_expected_dB ?? NaN).toBeLessThanOrEqual(Math.min(...widths) + 0.02);
    expect(candidates.map((one) => one.level_dB)).not.toContain(86);
    expect(candidates.find((one) => one.level_dB === next?.level_dB)?.width_expected_dB).toBe(
      next?.width_expected_dB,
    );
  });

  it("is not suggested where nothing was found", () => {
    expect(bandOf(66, 70, 76).evidence.next_run).toBeNull();
  });
});

describe("any set of levels", () => {
  it.each([
    [[80, 100]],
    [[76, 86, 96, 102]],
    [[70.5, 81.25, 90.1, 97.33]],
    [[60, 66, 72, 78, 80, 82, 84, 86, 88, 90, 92, 98]],
  ])("%j: the interval holds the truth and every run with a loss is used", (levels) => {
    const band = bandOf(...levels);
    expect(band.onset.status).toBe("found");
    expect(band.onset.low_dB).toBeLessThanOrEqual(limiter.onsetDb);
    expect(band.onset.high_dB).toBeGreaterThanOrEqual(limiter.onsetDb);
    expect(band.evidence.law_curve?.expected_dB[0]).toBeCloseTo(levels[0] ?? Number.NaN, 0);
    // The drawn law meets the highest run.
    expect(band.evidence.law_curve?.measured_dB.at(-1)).toBeCloseTo(
      (levels.at(-1) ?? Number.NaN) - limiter.lossDb(levels.at(-1) ?? Number.NaN),
      0,
    );
  });

  it("twelve levels know the onset better than four", () => {
    const many = bandOf(60, 66, 72, 78, 80, 82, 84, 86, 88, 90, 92, 98);
    expect(widthOf(many)).toBeLessThan(widthOf(bandOf(76, 86, 96, 102)));
    expect(Math.abs((many.onset.nominal_dB ?? 0) - limiter.onsetDb)).toBeLessThan(0.2);
  });
});
