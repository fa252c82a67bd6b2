import { describe, expect, it } from "vitest";
import { measuredSeries, plainRuns } from "@/tests/support/measured-series";
import { seededRandom } from "@/tests/support/seeded-random";
import { DEFAULT_CRITERIA } from "../../series/series-schema";
import { assessSeries } from "../assess-series";
import { turbulentPortLossDb } from "./static-laws";

const settings = { criteria: [...DEFAULT_CRITERIA] };

describe("turbulentPortLossDb", () => {
  it.each([-40, -20, 0, 20])("solves r (1 + d r) = 1 at %d dB", (driveDb) => {
    const rest = 10 ** (-turbulentPortLossDb(driveDb, 1) / 20);
    expect(rest * (1 + 10 ** (driveDb / 20) * rest)).toBeCloseTo(1, 12);
  });

  it("loses half of every step in the end, and nothing in the beginning", () => {
    expect(turbulentPortLossDb(106, 1) - turbulentPortLossDb(100, 1)).toBeCloseTo(3, 1);
    expect(turbulentPortLossDb(-80, 1)).toBeLessThan(1e-3);
  });
});

describe("a port that gives way from the lowest run on", () => {
  const TUNING_BAND = 1;
  /** Drive at which the resistance doubles, by distance from the tuning. */
  const doublesAt = (b: number): number => 104 + 3 * (b - TUNING_BAND) ** 2;
  const loss = (b: number, driveDb: number): number =>
    turbulentPortLossDb(driveDb - doublesAt(b), 0.8);
  const assess = (tuningHz?: number) =>
    assessSeries(
      measuredSeries({
        device: {
          lossDb: loss,
          harmonic: (b, drive, order) =>
            order === 3 ? 0.08 * (1 - 10 ** (-loss(b, drive) / 20)) : 0,
        },
        runs: plainRuns(76, 86, 96, 102),
        noiseDb: 0.01,
        random: seededRandom(3),
        tuningHz,
      }),
      settings,
    ).bands;

  it("is called a port round its tuning, not an equaliser", () => {
    expect(
      assess(50)
        .slice(0, 3)
        .map(({ cause }) => cause),
    ).toEqual(["port", "port", "port"]);
  });

  it("has its onset counted from the linear port, not from the lowest run", () => {
    // r = 10^(-c/20) of the port's share at 1/3 dB lost, then d = (1 - r)/r^2.
    const rest = 1 - (1 - 10 ** (-1 / 3 / 20)) / 0.8;
    const truthDb = doublesAt(TUNING_BAND) + 20 * Math.log10((1 - rest) / rest ** 2);
    const { onset } = assess(50)[TUNING_BAND] ?? {};
    expect(onset?.status).toBe("found");
    expect(onset?.low_dB).toBeLessThanOrEqual(truthDb);
    expect(onset?.high_dB).toBeGreaterThanOrEqual(truthDb);
    expect(Math.abs((onset?.nominal_dB ?? NaN) - truthDb)).toBeLessThan(2);
  });
});
