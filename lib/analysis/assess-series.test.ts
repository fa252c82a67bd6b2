import { describe, expect, it } from "vitest";
import { gainRider, overload } from "@/tests/support/static-devices";
import { measuredSeries, plainRuns } from "@/tests/support/measured-series";
import { seededRandom } from "@/tests/support/seeded-random";
import type { AppError } from "../errors/app-error";
import { bandSchema, headlineSchema, programmeSchema, shapeSchema } from "../result/result-schema";
import { DEFAULT_CRITERIA } from "../series/series-schema";
import { assessSeries } from "./assess-series";

const settings = { criteria: [...DEFAULT_CRITERIA] };
const runs = plainRuns(76, 86, 96, 102);

describe("assessSeries", () => {
  it("finds a limiter's onset, ceiling and limits in every band", () => {
    const limiter = gainRider(92, 0, 0);
    const { bands, headline, warnings } = assessSeries(
      measuredSeries({
        device: { lossDb: (_b, drive) => limiter.lossDb(drive) },
        runs,
        random: seededRandom(1),
      }),
      settings,
    );
    expect(bands).toHaveLength(27);
    for (const band of bands) {
      expect(band.onset.status).toBe("found");
      expect(Math.abs((band.onset.nominal_dB ?? 0) - limiter.onsetDb)).toBeLessThan(0.7);
      expect(band.onset.low_dB).toBeLessThanOrEqual(limiter.onsetDb);
      expect(band.onset.high_dB).toBeGreaterThanOrEqual(limiter.onsetDb);
      // The ceiling is the level of the highest run: 92 dB, whatever the knee is.
      expect(band.onset.ceiling_dB).toBeCloseTo(92, 0);
      expect(band.cause).toBe("limiter");
      const compression = band.limits.filter(
        ({ criterion }) => criterion.compression_dB !== undefined,
      );
      expect(compression.map(({ status }) => status)).toEqual(["found", "found"]);
    }
    const loss = headline.find(({ criterion }) => criterion.compression_dB === 3);
    expect(loss?.at_least).toBe(false);
    expect(loss?.spl_dB).toBeGreaterThanOrEqual(91);
    expect(loss?.spl_dB).toBeLessThanOrEqual(92);
    expect(loss?.first?.ceiling).toBe(true);
    expect(warnings.map(({ code }) => code)).not.toContain("reference.compressed");
  });

  it("answers in the shapes of the result", () => {
    const clip = overload("hard clip", 95);
    const assessment = assessSeries(
      measuredSeries({
        device: { lossDb: (_b, u) => clip.lossDb(u), harmonic: (_b, u, n) => clip.harmonic(u, n) },
        runs,
        random: seededRandom(2),
      }),
      settings,
    );
    expect(() => assessment.bands.map((band) => bandSchema.parse(band))).not.toThrow();
    expect(() => assessment.headline.map((row) => headlineSchema.parse(row))).not.toThrow();
    expect(() => assessment.programme.map((row) => programmeSchema.parse(row))).not.toThrow();
    expect(() => assessment.shape.map((row) => shapeSchema.parse(row))).not.toThrow();
    expect(assessment.bands[5]?.cause).toBe("overload");
  });

  it("gives the same numbers for the same input", () => {
    const build = () =>
      measuredSeries({
        device: { lossDb: (b, u) => gainRider(90 + b / 5, 6, 0.2).lossDb(u) },
        runs,
        random: seededRandom(3),
      });
    expect(JSON.stringify(assessSeries(build(), settings))).toBe(
      JSON.stringify(assessSeries(build(), settings)),
    );
  });

  it("does not depend on the order of the runs", () => {
    const series = measuredSeries({
      device: { lossDb: (b, u) => gainRider(90 + b / 5, 6, 0.2).lossDb(u) },
      runs,
      random: seededRandom(3),
    });
    const reversed = { ...series, runs: series.runs.toReversed() };
    expect(assessSeries(reversed, settings).bands.map(({ onset }) => onset)).toEqual(
      assessSeries(series, settings).bands.map(({ onset }) => onset),
    );
  });

  it("refuses a series without a plain short-term run", () => {
    const series = measuredSeries({
      device: { lossDb: () => 0 },
      runs: [
        { levelDb: 96, kind: "long-term" },
        { levelDb: 96, variant: "port blocked" },
      ],
    });
    expect(() => assessSeries(series, settings)).toThrow(
      expect.objectContaining({ code: "series.reference-missing" }) as AppError,
    );
  });
});
