/** Published exposure limits against what we compute. Section numbers are those of docs/check-values.md. */
import { describe, expect, it } from "vitest";
import {
  computeAllowedS,
  computeDose,
  computeMeanLevelDbA,
  DAY_RULES,
  EU_PEAK_DB_C,
  meetsVenueLimit,
  toExposurePa2h,
  toLevelDb,
  WEEK_RULES,
  type ExposureRule,
} from "../../lib/exposure/rules";
import exposure from "../fixtures/exposure.json";

const { niosh, eu } = DAY_RULES;
const HOUR_S = 3600;

/** Not offered to labs; its 5 dB exchange tests the same formulas at another constant. */
const OSHA: ExposureRule = {
  name: "OSHA 1910.95",
  criterionDbA: 90,
  periodS: 8 * HOUR_S,
  exchangeDb: 5,
  meanPerDecadeDb: 16.61,
};

const at = (levelDbA: number, hours: number) => ({ levelDbA, durationS: hours * HOUR_S });

interface Check {
  name: string;
  value: number;
  expected: number;
  tolerance: number;
  source: string;
}

const hourDose = computeDose([at(100, 1)], niosh);
const oshaDose = computeDose([at(90, 4), at(95, 2), at(85, 2)], OSHA);
const iso9612 = [at(70, 1.5), at(80.8, 5), at(90.1, 1.5)];

const CHECKS: Check[] = [
  {
    name: "NIOSH 100 dBA, min",
    value: computeAllowedS(100, niosh) / 60,
    expected: 15,
    tolerance: 0.01,
    source: "row 8",
  },
  {
    name: "NIOSH 85 dBA, min",
    value: computeAllowedS(85, niosh) / 60,
    expected: 480,
    tolerance: 0.01,
    source: "row 8",
  },
  {
    name: "NIOSH 94 dBA, min",
    value: computeAllowedS(94, niosh) / 60,
    expected: 60,
    tolerance: 0.01,
    source: "row 8",
  },
  {
    name: "NIOSH 1 h at 100 dBA, %",
    value: hourDose * 100,
    expected: 400,
    tolerance: 0.05,
    source: "row 9",
  },
  {
    name: "NIOSH 400 %, TWA dBA",
    value: computeMeanLevelDbA(hourDose, niosh),
    expected: 91,
    tolerance: 0.05,
    source: "row 9",
  },
  {
    name: "NIOSH 99 dBA, min",
    value: computeAllowedS(99, niosh) / 60,
    expected: 18.899,
    tolerance: 0.01,
    source: "row 10",
  },
  {
    name: "OSHA 95 dBA, h",
    value: computeAllowedS(95, OSHA) / HOUR_S,
    expected: 4,
    tolerance: 0.001,
    source: "row 11",
  },
  {
    name: "OSHA 92 dBA, h",
    value: computeAllowedS(92, OSHA) / HOUR_S,
    expected: 6.063,
    tolerance: 0.001,
    source: "row 11",
  },
  {
    name: "OSHA 115 dBA, h",
    value: computeAllowedS(115, OSHA) / HOUR_S,
    expected: 0.25,
    tolerance: 0.001,
    source: "row 11",
  },
  {
    name: "OSHA mixed day, %",
    value: oshaDose * 100,
    expected: 112.5,
    tolerance: 0.01,
    source: "row 12",
  },
  {
    name: "OSHA mixed day, TWA dBA",
    value: computeMeanLevelDbA(oshaDose, OSHA),
    expected: 90.85,
    tolerance: 0.01,
    source: "row 12",
  },
  {
    name: "OSHA 91 %, TWA dBA",
    value: computeMeanLevelDbA(0.91, OSHA),
    expected: 89.32,
    tolerance: 0.01,
    source: "row 13",
  },
  {
    name: "OSHA 50 %, TWA dBA",
    value: computeMeanLevelDbA(0.5, OSHA),
    expected: 85,
    tolerance: 0.01,
    source: "row 13",
  },
  {
    name: "OSHA 92 dBA 8 h, %",
    value: computeDose([at(92, 8)], OSHA) * 100,
    expected: 131.95,
    tolerance: 0.01,
    source: "row 14",
  },
  {
    name: "112 Pa, dB",
    value: toLevelDb(112),
    expected: 134.96,
    tolerance: 0.01,
    source: "row 15",
  },
  { name: "140 Pa, dB", value: toLevelDb(140), expected: 136.9, tolerance: 0.01, source: "row 15" },
  { name: "200 Pa, dB", value: toLevelDb(200), expected: 140, tolerance: 0.01, source: "row 15" },
  {
    name: "EU 100 dBA 15 min, LEX,8h",
    value: computeMeanLevelDbA(computeDose([at(100, 0.25)], eu), eu),
    expected: 84.95,
    tolerance: 0.01,
    source: "row 16",
  },
  {
    name: "ISO 9612 example, LEX,8h",
    value: computeMeanLevelDbA(computeDose(iso9612, eu), eu),
    expected: 84.3,
    tolerance: 0.05,
    source: "row 17",
  },
  {
    name: "80 dBA 40 h, Pa2h",
    value: toExposurePa2h(at(80, 40)),
    expected: 1.6,
    tolerance: 0.001,
    source: "row 18",
  },
  {
    name: "75 dBA 40 h, Pa2h",
    value: toExposurePa2h(at(75, 40)),
    expected: 0.506,
    tolerance: 0.001,
    source: "row 18",
  },
  {
    name: "H.870 80 dBA, h a week",
    value: computeAllowedS(80, WEEK_RULES.adult) / HOUR_S,
    expected: 40,
    tolerance: 0.001,
    source: "row 18",
  },
  {
    name: "H.870 75 dBA sensitive, h a week",
    value: computeAllowedS(75, WEEK_RULES.sensitive) / HOUR_S,
    expected: 40,
    tolerance: 0.001,
    source: "row 18",
  },
  {
    name: "H.870 95 dBA, h a week",
    value: computeAllowedS(95, WEEK_RULES.adult) / HOUR_S,
    expected: 1.265,
    tolerance: 0.0005,
    source: "row 19",
  },
  {
    name: "H.870 100 dBA, min a week",
    value: computeAllowedS(100, WEEK_RULES.adult) / 60,
    expected: 24,
    tolerance: 0.01,
    source: "section 3",
  },
];

describe("exposure: worked checks", () => {
  it.each(CHECKS)("$name is $expected ($source)", ({ value, expected, tolerance }) => {
    expect(Math.abs(value - expected)).toBeLessThanOrEqual(tolerance);
  });

  it("passes a venue at 100.0 dB and flags 100.1 (row 20)", () => {
    expect([100, 100.1].map(meetsVenueLimit)).toEqual([true, false]);
  });

  it("prints the directive's peak pressures as its whole decibels (section 3)", () => {
    const { lower_action, upper_action, limit } = exposure.eu_2003_10_ec;
    expect(
      [lower_action, upper_action, limit].map((v) => Math.round(toLevelDb(v.peak_pa))),
    ).toEqual([EU_PEAK_DB_C.lowerAction, EU_PEAK_DB_C.upperAction, EU_PEAK_DB_C.limit]);
  });
});

describe("exposure: published tables", () => {
  it.each(exposure.niosh.rows)(
    "NIOSH 98-126 table 1-1 at $level_dba dBA",
    ({ level_dba, table_s, formula_s }) => {
      const allowedS = computeAllowedS(level_dba, niosh);
      expect(Math.abs(allowedS / formula_s - 1)).toBeLessThan(
        1e-3 / Math.min(formula_s, 1e3) + 1e-6,
      );
      // The table prints minutes below 95 dBA and seconds from there; 99 dBA is its misprint.
      const printedToS = level_dba < 95 ? 30 : 1;
      expect(Math.abs(allowedS - table_s) <= printedToS).toBe(level_dba !== 99);
    },
  );

  it.each(exposure.osha.table_g16a)(
    "OSHA table G-16a at $level_dba dBA",
    ({ level_dba, formula_h }) => {
      expect(computeAllowedS(level_dba, OSHA) / HOUR_S / formula_h).toBeCloseTo(1, 3);
    },
  );

  it.each(exposure.who_itu_h870.weekly_hours_adult)(
    "H.870 week at $level_dba dBA",
    ({ level_dba, h_equal_energy }) => {
      expect(
        Math.abs(computeAllowedS(level_dba, WEEK_RULES.adult) / HOUR_S / h_equal_energy - 1),
      ).toBeLessThan(2e-3);
    },
  );
});
