import { describe, expect, it } from "vitest";
import { listLimitsSchema } from "../api/series";
import { makeSampleResult } from "../../tests/support/sample-result";
import { toListLimits, toReachedDb } from "./list-limits";

const result = makeSampleResult();
const limits = toListLimits(result);

describe("what the list shows of a result", () => {
  it("is one wall per criterion with every band, as the API answers it", () => {
    expect(limits.map((one) => one.criterion)).toEqual(result.settings.criteria);
    for (const one of limits) {
      expect(listLimitsSchema.parse(one)).toEqual(one);
      expect(one.wall.map((column) => column.nominal_Hz)).toEqual(
        result.bands.map((band) => band.nominal_Hz),
      );
    }
  });

  it("takes limit, loudest level and first cause from the bands themselves", () => {
    limits.forEach((one, index) => {
      const band = result.bands[5];
      const limit = band?.limits.filter((l) => l.kind === "short-term")[index];
      expect(one.wall[5]?.spl_dB).toBe(limit?.spl_dB);
      const levels = band?.levels.filter((l) => l.kind === "short-term" && l.variant === undefined);
      expect(one.wall[5]?.reached_dB).toBe(Math.max(...(levels ?? []).map((l) => l.spl_dB ?? 0)));
    });
    const [first] = result.headline;
    const own = limits.filter((one) => one.headline === first);
    expect(toReachedDb(own)).toBe(first?.spl_dB);
  });

  it("says why there is no headline", () => {
    const without = { ...result, headline: [] };
    const [first] = toListLimits(without);
    expect(first?.headline).toBeNull();
    expect(first?.headline_missing).not.toBe("");
    const warned = toListLimits({
      ...without,
      warnings: [{ code: "headline.too-narrow", message: "Under two octaves." }],
    });
    expect(warned[0]?.headline_missing).toBe("Under two octaves.");
    expect(toReachedDb(toListLimits(without))).toBeNull();
  });

  it("calls a limit by distortion without compression by its name", () => {
    const bands = result.bands.map((band) => ({
      ...band,
      cause: "none" as const,
      limits: band.limits.map((limit) => ({ ...limit, bound_by: "thd" as const })),
    }));
    const headline = result.headline.map((one) => ({
      ...one,
      first: {
        status: "found" as const,
        nominal_Hz: 100,
        spl_dB: 90,
        nominal_dB: 91,
        ceiling: false,
      },
    }));
    const found = toListLimits({ ...result, bands, headline });
    const causes = found.filter((one) => one.headline !== null).map((one) => one.first_cause);
    expect(new Set(causes)).toEqual(new Set(["distortion only"]));
  });
});
