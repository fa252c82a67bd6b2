/** What a comparison says in words and cells; the same on screen, page and file. */
import {
  formatFrequency,
  formatLevel,
  formatNumber,
  formatPlain,
  formatSigned,
  NBSP,
  roundLimitDown,
} from "../charts/format";
import { toMaxLevelNotice, type MaxLevelNotice } from "../exposure/notices";
import type {
  ComparedBand,
  ComparedPart,
  Comparison,
  ComparisonTest,
  Difference,
} from "./comparison-schema";
import { ASSUMED_UNCERTAINTY_DB } from "./difference";

export const LETTERS = ["A", "B", "C", "D"] as const;
export const letterOf = (at: number): string => LETTERS[at] ?? "";

/** From here whole decibels are shown. */
const WHOLE_FROM_DB = 9.95;

/** "At least so much" never grows by rounding. */
const roundDown = (sizeDb: number, decimals: number): number =>
  Math.floor(sizeDb * 10 ** decimals + 1e-9) / 10 ** decimals;

/** A cell of the map: "−8.4…" is 8.4 dB or more, "no" no difference shown, "·" not known. */
export function toDifferenceCell({ shown, difference_dB: db, or_more }: Difference): string {
  if (shown === "none") return "no";
  if (shown === "unknown" || db === null) return "\u00b7";
  const decimals = Math.abs(db) >= WHOLE_FROM_DB ? 0 : 1;
  const size = or_more ? roundDown(Math.abs(db), decimals) : Math.abs(db);
  return `${formatSigned(Math.sign(db) * size, decimals)}${or_more ? "\u2026" : ""}`;
}

/** "8 or more quieter than A", "5.0 dB louder than A": whole decibels where `short`. */
export function toDifferenceWords(
  { shown, difference_dB: db, or_more }: Difference,
  { than, whole }: { than?: string; whole: boolean },
): string {
  const re = than === undefined ? "" : ` than ${than}`;
  if (shown === "none") return "no difference shown";
  if (shown === "unknown" || db === null) return "not known";
  const decimals = whole || Math.abs(db) >= WHOLE_FROM_DB ? 0 : 1;
  const size = Math.abs(db);
  const text = formatNumber(or_more ? roundDown(size, decimals) : size, decimals);
  const unit = whole ? "" : `${NBSP}dB`;
  return `${text}${unit}${or_more ? " or more" : ""} ${db > 0 ? "louder" : "quieter"}${re}`;
}

/** The limit of a band, one decimal: "94.0 dB", "at least 102.7 dB", "below 76.1 dB", "not assessed". */
export function toLimitText({
  status,
  spl_dB: db,
}: Pick<ComparedBand, "status" | "spl_dB">): string {
  if (db === null || status === "not assessed") return "not assessed";
  const level = `${formatNumber(db)}${NBSP}dB`;
  if (status === "not reached") return `at least ${level}`;
  return status === "below lowest" ? `below ${level}` : level;
}

export interface TwoLines {
  /** "at least" stands lighter before the figure. */
  atLeast: boolean;
  words: string;
  note: string | null;
}

/** "at least 100" over "125 Hz to 16 kHz". */
export function toReachedLines(test: ComparisonTest): TwoLines {
  const { reached } = test;
  if (reached === null) {
    return { atLeast: false, words: "no single figure", note: test.reached_missing };
  }
  return {
    atLeast: reached.at_least,
    words: String(reached.spl_dB),
    note: `${formatFrequency(reached.from_Hz)} to ${formatFrequency(reached.to_Hz)}`,
  };
}

/** "75" over "7 or more quieter"; no second line where no difference can be told. */
export function toPartLines(part: ComparedPart): TwoLines {
  const { difference } = part;
  return {
    atLeast: part.at_least,
    words: part.below_lowest
      ? "past it from the start"
      : part.reached_dB === null
        ? "not assessed"
        : String(roundLimitDown(part.reached_dB)),
    note: difference?.shown === "value" ? toDifferenceWords(difference, { whole: true }) : null,
  };
}

/** "50 Hz at 87 dB" over "from the 96 to the 102 dB run", or "run level 85 dB". */
export function toFirstLines({ first, levels_dB }: ComparisonTest): TwoLines {
  if (first === null) {
    const highest = formatLevel(Math.max(...levels_dB));
    return { atLeast: false, words: `not reached up to the ${highest} run`, note: null };
  }
  const band = formatFrequency(first.nominal_Hz);
  if (first.status === "below lowest") {
    const lowest = formatLevel(Math.min(...levels_dB));
    return { atLeast: false, words: `${band}, already past it`, note: `at the ${lowest} run` };
  }
  const at = first.spl_dB === null ? "" : ` at ${roundLimitDown(first.spl_dB)}${NBSP}dB`;
  const { bracket_dB: bracket, nominal_dB: drive } = first;
  return {
    atLeast: false,
    words: `${band}${at}`,
    note:
      bracket !== null
        ? `from the ${formatPlain(bracket[0])} to the ${formatLevel(bracket[1])} run`
        : drive === null
          ? null
          : `run level ${roundLimitDown(drive)}${NBSP}dB`,
  };
}

/** "not reached up to the 102 dB run"; where the tests end at different levels, their own loudest run. */
export function toOpenWords(tests: readonly Pick<ComparisonTest, "levels_dB">[]): string {
  const loudest = [...new Set(tests.map((test) => Math.max(...test.levels_dB)))];
  const [only] = loudest;
  return loudest.length === 1 && only !== undefined && Number.isFinite(only)
    ? `not reached up to the ${formatLevel(only)} run`
    : "not reached up to its loudest run";
}

/** "under 0.9 dB", "under 0.9 to 1.4 dB": what a difference must pass to be shown. */
export function toUncertaintyWords(comparison: Comparison): string {
  const all = comparison.tests
    .flatMap((test) => test.differences)
    .flatMap((one) => one.uncertainty_dB ?? []);
  if (all.length === 0) return "under the uncertainty";
  const [low, high] = [Math.min(...all).toFixed(1), Math.max(...all).toFixed(1)];
  return low === high ? `under ${low}${NBSP}dB` : `under ${low} to ${high}${NBSP}dB, band by band`;
}

/** The finding of the figure in a sentence or two, for who does not see it. */
export function sayComparison({ tests }: Comparison): string {
  return tests
    .map((test, at) => {
      const { atLeast, words, note } = toReachedLines(test);
      const level = test.reached === null ? words : `${atLeast ? "at least " : ""}${words} dB`;
      const first = toFirstLines(test);
      return `${letterOf(at)}, ${test.model}: ${level}${note === null ? "" : `, ${note}`}; ${
        test.first === null ? "" : "gives out first: "
      }${first.words}.`;
    })
    .join(" ");
}

/** What stands under table and file. */
export function toMethodNotes(comparison: Comparison): string {
  const assumed = comparison.tests.some((test) => test.uncertainty_assumed);
  return `A limit that lies between two runs counts at its lower end. Differences carry both uncertainties, k = 2${
    assumed
      ? `; where a test states none for its levels, ${ASSUMED_UNCERTAINTY_DB}${NBSP}dB is taken`
      : ""
  }.`;
}

/** For the loudest level of any test; null where no level stands in the view. */
export function toComparisonNotice(tests: readonly ComparisonTest[]): MaxLevelNotice | null {
  const levels = tests.flatMap((test) => test.bands.flatMap((band) => band.spl_dB ?? []));
  return levels.length === 0
    ? null
    : toMaxLevelNotice({
        levelDb: Math.max(...levels),
        distanceM: 1,
        stage: tests.some((test) => test.stage),
        mayPlayLouder: true,
      });
}
