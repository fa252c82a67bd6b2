/** The shown rows as a table for a spreadsheet: with the method line and the hearing notice. */
import type { ListLimits, SeriesRow } from "@/lib/api/series";
import { toMaxLevelNotice, toMethodLine } from "@/lib/exposure/notices";
import type { Criterion } from "@/lib/series/series-schema";
import { findLimits, toCriterionKey, toCriterionWords } from "./list-words";

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

/** RFC 4180, CRLF, comment lines first; numbers as they are shown: limits rounded down. */
export function toSeriesCsv(rows: readonly SeriesRow[], criterion: Criterion): string {
  const loudest = toLoudestLevel(rows);
  const lines = [`# ${toMethodLine(`limit: ${toCriterionWords(criterion)}`)} Short-term, at 1 m.`];
  if (loudest !== null) {
    const notice = toMaxLevelNotice({ levelDb: loudest, distanceM: 1 });
    lines.push(`# ${notice.signal}: ${notice.lead} ${notice.text}`);
  }
  return [
    ...lines.map((line) => toCell(line.replaceAll("\u00a0", " "))),
    toLine(HEAD),
    ...rows.map((row) => toLine(toCells(row, findLimits(row, toCriterionKey(criterion))))),
    "",
  ].join("\r\n");
}

/** The loudest level of any shown row; null where none was measured. */
export function toLoudestLevel(rows: readonly SeriesRow[]): number | null {
  const levels = rows.flatMap((row) => (row.max_level_dB === null ? [] : [row.max_level_dB]));
  return levels.length === 0 ? null : Math.max(...levels);
}

function toCells(row: SeriesRow, limits: ListLimits | null): string[] {
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
    toNumber(headline === null ? null : Math.floor(headline.spl_dB + 1e-9)),
    headline === null ? "" : headline.at_least ? "yes" : "no",
    toNumber(headline?.from_Hz ?? null),
    toNumber(headline?.to_Hz ?? null),
    toNumber(first?.nominal_Hz ?? null),
    toNumber(first?.spl_dB == null ? null : Math.floor(first.spl_dB + 1e-9)),
    toNumber(first?.nominal_dB == null ? null : Math.floor(first.nominal_dB + 1e-9)),
    first === null ? "" : (limits?.first_cause ?? ""),
    row.changed_at,
  ];
}

const toNumber = (value: number | null): string => (value === null ? "" : String(value));
const toLine = (cells: readonly string[]): string => cells.map(toCell).join(",");

/** A cell that a spreadsheet would take for a formula gets an apostrophe before it. */
function toCell(text: string): string {
  const safe = /^[=+\-@\t\r]/.test(text) ? `'${text}` : text;
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}
