/** The shown rows as a table for a spreadsheet: with the method line and the hearing notice. */
import type { ListLimits, SeriesRow } from "@/lib/api/series";
import { toCsv } from "@/lib/csv/csv";
import { toMaxLevelNotice, toMethodLine } from "@/lib/exposure/notices";
import type { Criterion } from "@/lib/series/series-schema";
import { toCriterionKey } from "@/lib/result/criteria";
import { findLimits, toCriterionWords } from "./list-words";

const HEAD = [
  "series",
  "maker",
  "model",
  "kind",
  "serial number",
  "state",
  "levels, dB",
  "reached, dB SPL at 1 m",
  "at least",
  "from, Hz",
  "to, Hz",
  "gives out first, Hz",
  "its limit, dB SPL at 1 m",
  "run level there, dB",
  "cause",
  "last change",
];

/** Numbers as they are shown: limits rounded down. */
export function toSeriesCsv(rows: readonly SeriesRow[], criterion: Criterion): string {
  const loudest = toLoudestLevel(rows);
  const lines = [`${toMethodLine(`limit: ${toCriterionWords(criterion)}`)} Short-term, at 1 m.`];
  if (loudest !== null) {
    const notice = toMaxLevelNotice({ levelDb: loudest, distanceM: 1 });
    lines.push(`${notice.signal}: ${notice.lead} ${notice.text}`);
  }
  return toCsv(
    lines,
    HEAD,
    rows.map((row) => toCells(row, findLimits(row, toCriterionKey(criterion)))),
  );
}

/** The loudest level of any shown row; null where none was measured. */
export function toLoudestLevel(rows: readonly SeriesRow[]): number | null {
  const levels = rows.flatMap((row) => (row.max_level_dB === null ? [] : [row.max_level_dB]));
  return levels.length === 0 ? null : Math.max(...levels);
}

function toCells(row: SeriesRow, limits: ListLimits | null): (string | number | null)[] {
  const headline = limits?.headline ?? null;
  const first = headline?.first ?? null;
  return [
    row.number,
    row.loudspeaker.maker,
    row.loudspeaker.model,
    row.loudspeaker.kind,
    row.loudspeaker.serial,
    row.state,
    row.levels_dB.join(" "),
    headline === null ? null : Math.floor(headline.spl_dB + 1e-9),
    headline === null ? "" : headline.at_least ? "yes" : "no",
    headline?.from_Hz ?? null,
    headline?.to_Hz ?? null,
    first?.nominal_Hz ?? null,
    first?.spl_dB == null ? null : Math.floor(first.spl_dB + 1e-9),
    first?.nominal_dB == null ? null : Math.floor(first.nominal_dB + 1e-9),
    first === null ? "" : (limits?.first_cause ?? ""),
    row.changed_at,
  ];
}
