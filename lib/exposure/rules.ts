/**
 * Noise exposure: how long a level may last, and what a day or a week adds up to.
 * Levels are A-weighted, at the ear, in dB re 20 uPa; times are seconds; doses are shares, 1 = the whole allowance.
 */
import { AppError } from "../errors/app-error";

export interface ExposureRule {
  name: string;
  /** Level that may last the whole period. */
  criterionDbA: number;
  periodS: number;
  /** Step that halves the allowed time. */
  exchangeDb: number;
  /** dB per tenfold dose in the mean level of the period. */
  meanPerDecadeDb: number;
}

/** Step that halves the time at equal energy: 10 lg 2. */
export const EQUAL_ENERGY_DB = 10 * Math.log10(2);

const HOUR_S = 3600;

/**
 * The rules of a working day, by the lab's setting.
 * @see NIOSH 98-126 (1998): 85 dBA, 8 h, 3 dB exchange; TWA = 10 lg(D) + 85
 * @see Directive 2003/10/EC Art. 3, upper action value: LEX,8h 85 dB(A), equal energy
 */
export const DAY_RULES = {
  niosh: {
    name: "NIOSH",
    criterionDbA: 85,
    periodS: 8 * HOUR_S,
    exchangeDb: 3,
    meanPerDecadeDb: 10,
  },
  eu: {
    name: "EU upper action value",
    criterionDbA: 85,
    periodS: 8 * HOUR_S,
    exchangeDb: EQUAL_ENERGY_DB,
    meanPerDecadeDb: 10,
  },
} as const satisfies Record<string, ExposureRule>;
export type DayRuleName = keyof typeof DAY_RULES;

/**
 * The rules of a listener's week: 1.6 Pa^2 h, which is 80 dBA for 40 h; 75 dBA for sensitive listeners.
 * Equal energy by the definition, not the rounded 3 dB.
 * @see ITU-T H.870 (WHO-ITU safe listening), clause 7
 */
export const WEEK_RULES = {
  adult: {
    name: "H.870",
    criterionDbA: 80,
    periodS: 40 * HOUR_S,
    exchangeDb: EQUAL_ENERGY_DB,
    meanPerDecadeDb: 10,
  },
  sensitive: {
    name: "H.870, sensitive listeners",
    criterionDbA: 75,
    periodS: 40 * HOUR_S,
    exchangeDb: EQUAL_ENERGY_DB,
    meanPerDecadeDb: 10,
  },
} as const satisfies Record<string, ExposureRule>;

/** Time at a level and its length. */
export interface Exposure {
  levelDbA: number;
  durationS: number;
}

/**
 * Time after which the allowance of the rule's period is used up, s. Not rounded.
 * @throws AppError "analysis.argument" for a level that is no number
 */
export function computeAllowedS(levelDbA: number, rule: ExposureRule): number {
  if (!Number.isFinite(levelDbA)) {
    throw new AppError("analysis.argument", `exposure level ${levelDbA} dB(A) is not a number`);
  }
  return rule.periodS / 2 ** ((levelDbA - rule.criterionDbA) / rule.exchangeDb);
}

/**
 * Sum of time over allowed time. Levels under the criterion count as well: the safe side.
 * @throws AppError "analysis.argument" for a level or length that is no number, or a negative length
 */
export function computeDose(exposures: readonly Exposure[], rule: ExposureRule): number {
  let dose = 0;
  for (const { levelDbA, durationS } of exposures) {
    if (!(durationS >= 0 && durationS < Infinity)) {
      throw new AppError("analysis.argument", `exposure of ${durationS} s`);
    }
    dose += durationS / computeAllowedS(levelDbA, rule);
  }
  return dose;
}

/** Level that gives the same dose when it lasts the whole period, dB(A): TWA, or LEX,8h by the EU rule. -Infinity for no dose. */
export function computeMeanLevelDbA(dose: number, rule: ExposureRule): number {
  return rule.criterionDbA + rule.meanPerDecadeDb * Math.log10(dose);
}

const REFERENCE_PA = 20e-6;

/** SPL of a sound pressure, dB re 20 uPa. */
export function toLevelDb(pressurePa: number): number {
  return 20 * Math.log10(pressurePa / REFERENCE_PA);
}

/** Sound exposure in Pa^2 h, the unit in which H.870 states its allowance. */
export function toExposurePa2h(exposure: Exposure): number {
  return (REFERENCE_PA ** 2 * 10 ** (exposure.levelDbA / 10) * exposure.durationS) / HOUR_S;
}

/**
 * Peak action values and limit, dB(C).
 * @see Directive 2003/10/EC Art. 3: 112, 140 and 200 Pa, printed there as 135, 137 and 140 dB(C)
 */
export const EU_PEAK_DB_C = { lowerAction: 135, upperAction: 137, limit: 140 } as const;

/** @see WHO global standard for safe listening venues and events (2022), feature 1: LAeq,15min */
export const VENUE_LIMIT_DB_A = 100;

/** Whether a mean level over 15 minutes keeps to the venue limit; the limit itself still does. */
export function meetsVenueLimit(laeq15MinDbA: number): boolean {
  return laeq15MinDbA <= VENUE_LIMIT_DB_A;
}
