/** A comparison as a table for a spreadsheet: with the method line and the hearing notice. */
import { toCsv } from "../csv/csv";
import { toMethodLine } from "../exposure/notices";
import { sayCriterion } from "../result/criteria";
import { letterOf, toComparisonNotice, toMethodNotes } from "./compare-words";
import type { Comparison, ComparisonTest } from "./comparison-schema";

const round2 = (value: number | null): number | null =>
  value === null ? null : Math.round(value * 100) / 100;

/** One row per band; levels are dB SPL at 1 m, differences dB over A. */
export function toComparisonCsv(comparison: Comparison): string {
  const { tests, criterion, kind, bands_Hz: bandsHz, left_out: leftOut } = comparison;
  const notice = toComparisonNotice(tests);
  const comments = [
    `${toMethodLine(`limit: ${sayCriterion(criterion)}`)} ${kind === "long-term" ? "Long-term" : "Short-term"} runs; levels in dB SPL at 1 m (3.3 ft), unweighted, third-octave bands.`,
    ...(notice === null ? [] : [`${notice.signal}: ${notice.lead} ${notice.text}`]),
    ...tests.map(
      (test, at) =>
        `${letterOf(at)}: ${test.maker} ${test.model}, ${test.number}, ${test.lab}, measured ${test.environment}, ${test.distance_m} m${at === 0 ? " (reference)" : ""}`,
    ),
    ...leftOut.map((one) => `Left out: ${one.maker} ${one.model}. ${one.why}`),
    toMethodNotes(comparison),
  ];
  const head = [
    "band, Hz",
    ...tests.flatMap((_, at) => [
      `${letterOf(at)} limit, dB SPL`,
      `${letterOf(at)} status`,
      `${letterOf(at)} run level, dB`,
      ...(at === 0
        ? []
        : [`${letterOf(at)} re A, dB`, `${letterOf(at)} re A is`, `${letterOf(at)} re A, k=2, dB`]),
    ]),
  ];
  return toCsv(
    comments,
    head,
    bandsHz.map((hz, band) => [hz, ...tests.flatMap((test, at) => toCells(test, at, hz, band))]),
  );
}

function toCells(test: ComparisonTest, at: number, hz: number, band: number) {
  const limit = test.bands.find((one) => one.nominal_Hz === hz);
  const cells = [round2(limit?.spl_dB ?? null), limit?.status ?? null, limit?.nominal_dB ?? null];
  const difference = test.differences[band];
  if (at === 0 || difference === undefined) return cells;
  const { shown, difference_dB: db, or_more, uncertainty_dB } = difference;
  const is =
    shown === "none"
      ? "no difference shown"
      : shown === "unknown" || db === null
        ? "not known"
        : `${or_more ? "at least " : ""}${db > 0 ? "louder" : "quieter"}`;
  return [...cells, round2(db), is, round2(uncertainty_dB)];
}
