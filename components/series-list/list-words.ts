/** What a row of the list says in words, for one criterion. */
import type { ListLimits, SeriesRow } from "@/lib/api/series";
import { formatFrequency, formatPlain, NBSP, roundLimitDown } from "@/lib/charts/format";
import { toCriterionKey } from "@/lib/result/criteria";
import type { Criterion } from "@/lib/series/series-schema";

/** "THD 10 % or compression 3 dB, whichever comes first" */
export function toCriterionWords(criterion: Criterion): string {
  const { thd, compression } = toHalves(criterion);
  if (thd !== null && compression !== null) {
    return `${thd} or compression ${compression}, whichever comes first`;
  }
  return thd ?? `compression ${compression}`;
}

/** "THD 10 % or 3 dB", where room is short. */
export function toCriterionShort(criterion: Criterion): string {
  const { thd, compression } = toHalves(criterion);
  if (thd !== null && compression !== null) return `${thd} or ${compression}`;
  return thd ?? `compression ${compression}`;
}

function toHalves(criterion: Criterion): { thd: string | null; compression: string | null } {
  const { thd_percent: percent, compression_dB: lossDb } = criterion;
  return {
    thd: percent === undefined ? null : `THD ${formatPlain(percent)}${NBSP}%`,
    compression: lossDb === undefined ? null : `${formatPlain(lossDb)}${NBSP}dB`,
  };
}

/** THD 10 % or 3 dB, unless the address says otherwise. */
export const DEFAULT_CRITERION: Criterion = { thd_percent: 10, compression_dB: 3 };
const ALWAYS_OFFERED: readonly Criterion[] = [
  DEFAULT_CRITERION,
  { thd_percent: 3, compression_dB: 1 },
  { thd_percent: 10 },
  { thd_percent: 3 },
  { compression_dB: 3 },
  { compression_dB: 1 },
];

/** The usual criteria, then the lab's own that some shown row holds. */
export function listCriteria(rows: readonly SeriesRow[]): Criterion[] {
  const own = rows.flatMap((row) => row.limits.map((limits) => limits.criterion));
  return [
    ...new Map([...ALWAYS_OFFERED, ...own].map((c) => [toCriterionKey(c), c] as const)).values(),
  ];
}

export const findLimits = (row: SeriesRow, criterionKey: string): ListLimits | null =>
  row.limits.find((limits) => toCriterionKey(limits.criterion) === criterionKey) ?? null;

export interface TwoLines {
  words: string;
  note: string | null;
}

/** "at least 101" and "80 Hz to 16 kHz"; null where nothing is known yet. */
export function toReachedWords(limits: ListLimits | null): TwoLines | null {
  if (limits === null) return null;
  const { headline } = limits;
  if (headline === null) {
    return { words: "no headline", note: limits.headline_missing };
  }
  const level = String(roundLimitDown(headline.spl_dB));
  return {
    words: headline.at_least ? `at least ${level}` : level,
    note: `${formatFrequency(headline.from_Hz)} to ${formatFrequency(headline.to_Hz)}`,
  };
}

/** "50 Hz at 93 dB" and "run level 96 dB"; "not reached up to" and "the 102 dB run". */
export function toFirstWords(row: SeriesRow, limits: ListLimits | null): TwoLines | null {
  if (limits === null || limits.headline === null) return null;
  const { first } = limits.headline;
  if (first === null) {
    const highest = Math.max(...row.levels_dB);
    if (!Number.isFinite(highest)) return null;
    return { words: "not reached up to", note: `the ${formatPlain(highest)}${NBSP}dB run` };
  }
  const band = formatFrequency(first.nominal_Hz);
  if (first.status === "below lowest") {
    const lowest = formatPlain(Math.min(...row.levels_dB));
    return { words: `${band}, already past it`, note: `at the ${lowest}${NBSP}dB run` };
  }
  const at = first.spl_dB === null ? "" : ` at ${roundLimitDown(first.spl_dB)}${NBSP}dB`;
  return {
    words: `${band}${at}`,
    note:
      first.nominal_dB === null ? null : `run level ${roundLimitDown(first.nominal_dB)}${NBSP}dB`,
  };
}
