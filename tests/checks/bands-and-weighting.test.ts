/** Weighting and bands against published tables (tests/fixtures/weighting.json, bands.json name their sources). */
import { describe, expect, it } from "vitest";
import {
  CELLS_PER_BAND,
  thirdOctave,
  thirdOctaves,
  toFirstCellOf,
  twentyFourthOctaves,
} from "../../lib/analysis/bands";
import { aWeightingDb, cWeightingDb } from "../../lib/analysis/weighting";
import bands from "../fixtures/bands.json";
import weighting from "../fixtures/weighting.json";

const round1 = (x: number): number => Math.round(x * 10) / 10 + 0;

describe("weighting, IEC 61672-1:2013 Table 3", () => {
  it.each(weighting.rows)("$nominal_hz Hz: A $A_table_db, C $C_table_db dB", (row) => {
    const exactHz = 1000 * 10 ** (row.n / 10);
    // The table is printed to 0.1 dB: the formula must round to it.
    expect(round1(aWeightingDb(exactHz))).toBe(row.A_table_db);
    expect(round1(cWeightingDb(exactHz))).toBe(row.C_table_db);
    // The formula columns carry four decimals.
    expect(Math.abs(aWeightingDb(exactHz) - row.A_formula_db)).toBeLessThan(1e-4);
    expect(Math.abs(cWeightingDb(exactHz) - row.C_formula_db)).toBeLessThan(1e-4);
  });

  it.each([
    ["A", 10 ** 1.5, aWeightingDb, -39.4, 0.05],
    ["A", 1000, aWeightingDb, 0, 1e-9],
    ["A", 10_000, aWeightingDb, -2.49, 0.01],
    ["C", 10_000, cWeightingDb, -4.41, 0.01],
    ["C", 10 ** 1.7, cWeightingDb, -1.3, 0.05],
  ] as const)("%s at %f Hz (worked checks 1 to 3)", (_, hz, weight, expected, tolerance) => {
    expect(Math.abs(weight(hz) - expected)).toBeLessThan(tolerance);
  });
});

describe("bands, IEC 61260-1:2014 base ten", () => {
  it.each(bands.third_octave)("n = $n is nominally $nominal_hz Hz", (row) => {
    const band = thirdOctave(row.n);
    expect(band.nominalHz).toBe(row.nominal_hz);
    // Printed to six figures.
    for (const [value, printed] of [
      [band.exactHz, row.exact_hz],
      [band.lowHz, row.lower_hz],
      [band.highHz, row.upper_hz],
    ] as const) {
      expect(Math.abs(value / printed - 1)).toBeLessThan(5e-6);
    }
  });

  it("1/24 octaves sit at the mid-bands of annex E: 41.567 and 8785.2 Hz", () => {
    const { centreHz } = twentyFourthOctaves(20, 20_000);
    for (const hz of [41.567, 8785.2]) {
      const nearest = centreHz.reduce((best, x) =>
        Math.abs(x - hz) < Math.abs(best - hz) ? x : best,
      );
      expect(Math.abs(nearest / hz - 1)).toBeLessThan(1e-5);
    }
  });

  it("a sweep from 20 Hz to 20 kHz measures the 27 bands from 40 Hz to 16 kHz", () => {
    const measured = thirdOctaves(20, 20_000);
    expect(measured).toHaveLength(27);
    expect([measured[0]?.nominalHz, measured.at(-1)?.nominalHz]).toEqual([40, 16_000]);
  });

  it("eight grid cells tile each band edge to edge", () => {
    const grid = twentyFourthOctaves(20, 20_000);
    for (const band of thirdOctaves(20, 20_000)) {
      const first = toFirstCellOf(band, grid);
      expect(grid.edgeHz[first]! / band.lowHz).toBeCloseTo(1, 12);
      expect(grid.edgeHz[first + CELLS_PER_BAND]! / band.highHz).toBeCloseTo(1, 12);
    }
    expect(grid.edgeHz[0]).toBeGreaterThanOrEqual(20);
    expect(grid.edgeHz.at(-1)).toBeLessThanOrEqual(20_000);
  });
});
