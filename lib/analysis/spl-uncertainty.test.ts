import { describe, expect, it } from "vitest";
import { measuredSeries, plainRuns } from "@/tests/support/measured-series";
import { seededRandom } from "@/tests/support/seeded-random";
import { DEFAULT_CRITERIA } from "../series/series-schema";
import { assessSeries } from "./assess-series";
import type { SplScaleFacts } from "./spl-uncertainty";
import type { MeasuredSeries } from "./types";

const scale: SplScaleFacts = {
  environment: "anechoic",
  distanceM: 1,
  calibratedBy: "calibrator",
  hasMicrophoneFile: true,
  stated: {},
};
const budgetOf = (series: MeasuredSeries, nominalHz = 1000) =>
  assessSeries(series, { criteria: [...DEFAULT_CRITERIA] }).bands.find(
    (band) => band.nominal_Hz === nominalHz,
  )?.spl_uncertainty;
const make = (levels: number[], noiseDb: number, over: Partial<MeasuredSeries> = {}) => ({
  ...measuredSeries({
    device: { lossDb: () => 0 },
    runs: plainRuns(...levels),
    random: seededRandom(5),
    noiseDb,
  }),
  splScale: scale,
  ...over,
});

describe("the budget of an absolute level", () => {
  it("is the doubled root of the squares of its parts, each with what it rests on", () => {
    const budget = budgetOf(make([76, 86], 0.02));
    const sum = budget?.parts.reduce((total, part) => total + part.standard_dB ** 2, 0) ?? 0;
    expect(budget?.expanded_dB).toBeCloseTo(2 * Math.sqrt(sum), 12);
    expect(budget?.parts.map(({ name, common }) => [name, common])).toEqual([
      ["calibrator", true],
      ["microphone", false],
      ["distance", true],
      ["reflections", false],
      ["temperature", true],
      ["repeat", false],
      ["drift", true],
      ["noise", false],
    ]);
    expect(budget?.parts.every(({ basis }) => basis !== "")).toBe(true);
  });

  it("takes noise from the least certain run and repeats from their scatter", () => {
    const part = (series: MeasuredSeries, name: string) =>
      budgetOf(series)?.parts.find((one) => one.name === name);
    const noisy = measuredSeries({
      device: { lossDb: () => 0 },
      runs: plainRuns(76, 86),
      random: seededRandom(5),
      noiseDb: (_b, level) => (level === 76 ? 0.05 : 0.01),
    });
    expect(part({ ...noisy, splScale: scale }, "noise")?.standard_dB).toBeCloseTo(0.05, 9);
    expect(part(make([76, 86], 0.02), "repeat")).toMatchObject({
      standard_dB: 0.1,
      basis: "nothing was repeated; assumed",
    });
    const repeated = part(make([76, 76, 76, 86, 86, 86], 0.03), "repeat");
    expect(repeated?.basis).toBe("scatter of the repeats");
    // Scatter of 0.03 dB over the root of three takes.
    expect(repeated?.standard_dB).toBeGreaterThan(0.01);
    expect(repeated?.standard_dB).toBeLessThan(0.026);
  });

  it("grows where the microphone is known worse, and shrinks with what is stated", () => {
    const at = (nominalHz: number, over: Partial<SplScaleFacts> = {}) =>
      budgetOf(make([76, 86], 0.01, { splScale: { ...scale, ...over } }), nominalHz)?.expanded_dB ??
      Number.NaN;
    expect(at(8000)).toBeGreaterThan(at(1000));
    expect(at(1000, { hasMicrophoneFile: false })).toBeGreaterThan(at(1000));
    expect(at(1000, { stated: { calibrator_dB: 0.1 } })).toBeLessThan(at(1000));
    expect(at(1000, { calibratorChangeDb: 0.6 })).toBeGreaterThan(at(1000));
  });

  it.each([
    ["SPL is not assessed in this place", { splValid: false }],
    ["tables state their levels", { splScale: { ...scale, calibratedBy: null } }],
  ] as const)("is none where %s", (_, over) => {
    expect(budgetOf(make([76, 86], 0.01, over))).toBeNull();
  });
});
