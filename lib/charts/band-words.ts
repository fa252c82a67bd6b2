/** A band's finding in words: for the readout, for readers of the screen, and for tables. */
import type { BandColumn } from "./band-columns";
import { formatDb, formatFrequency, formatLevel, formatSignedDb, sayFrequency } from "./format";
import { CAUSE_WORDS } from "./marks";
import type { SeriesLevel } from "./series-levels";

const BOUND_WORDS = { compression: "compression", thd: "distortion" } as const;
const RUN = (levelDb: number | undefined): string =>
  levelDb === undefined ? "loudest run" : `${formatLevel(levelDb)} run`;

/** Only a bracket of two runs is known: the limit lies between them. */
const isBracket = ({ limit }: BandColumn, levels: readonly SeriesLevel[]): boolean =>
  limit.bound_by === "thd" &&
  limit.nominal_dB === limit.low_dB &&
  limit.high_dB !== limit.low_dB &&
  levels.some((level) => level.levelDb === limit.low_dB) &&
  levels.some((level) => level.levelDb === limit.high_dB);

/** "limit 94.0 dB, set by compression"; never a bare number where the limit was not found. */
export function sayLimit(column: BandColumn, levels: readonly SeriesLevel[]): string {
  const { limit, limitDb } = column;
  const value = limitDb === null ? null : formatDb(limitDb);
  if (limit.status === "not assessed")
    return `limit not assessed${limit.reason ? `: ${limit.reason}` : ""}`;
  if (limit.status === "below lowest") return `limit below the ${RUN(levels[0]?.levelDb)}`;
  if (limit.status === "not reached") {
    return value === null
      ? `limit not reached up to the ${RUN(levels.at(-1)?.levelDb)}`
      : `limit not reached, at least ${value}`;
  }
  const by = limit.bound_by === null ? "" : `, set by ${BOUND_WORDS[limit.bound_by]}`;
  if (isBracket(column, levels) && limit.low_dB !== null && limit.high_dB !== null) {
    return `limit at least ${value ?? "the lower run"}, between the ${formatLevel(limit.low_dB)} and ${formatLevel(limit.high_dB)} runs${by}`;
  }
  return `limit ${value ?? "found"}${by}`;
}

export function sayOnset(column: BandColumn, levels: readonly SeriesLevel[]): string {
  const { onset, onsetDb } = column;
  if (onset.status === "found")
    return onsetDb === null ? "onset found" : `onset ${formatDb(onsetDb)}`;
  if (onset.status === "below lowest") return `onset below the ${RUN(levels[0]?.levelDb)}`;
  if (onset.status === "not reached") return `no onset up to the ${RUN(levels.at(-1)?.levelDb)}`;
  return `onset unresolved${onset.reason ? `: ${onset.reason}` : ""}`;
}

/** What the loudest run lost; null where it was not measured or too little to be drawn. */
export function sayLoss(column: BandColumn, levels: readonly SeriesLevel[]): string | null {
  if (column.expectedDb === null || column.lostDb === null) return null;
  return `${RUN(levels.at(-1)?.levelDb)}: ${formatSignedDb(column.lostDb)} compression`;
}

export const sayCause = (column: BandColumn): string =>
  column.longTermCause === null
    ? CAUSE_WORDS[column.cause]
    : `${CAUSE_WORDS[column.cause]}, long-term ${CAUSE_WORDS[column.longTermCause]}`;

const DECISION_WORDS = {
  open: "no decision yet",
  confirmed: "confirmed",
  changed: "changed by a person",
} as const;

/** The readout: "limit 94.0 dB, set by compression · onset 92.8 dB · 102 dB run: +7.7 dB compression". */
export const sayFinding = (column: BandColumn, levels: readonly SeriesLevel[]): string =>
  [sayLimit(column, levels), sayOnset(column, levels), sayLoss(column, levels)]
    .filter((part) => part !== null)
    .join(" · ");

/** A column's full name: "63 hertz: limit 94.0 dB set by compression, onset 92.8 dB, limiter, no decision yet". */
export function sayColumn(
  column: BandColumn,
  levels: readonly SeriesLevel[],
  withDecision = true,
): string {
  const parts = [
    sayLimit(column, levels).replace(", set by", " set by"),
    sayOnset(column, levels),
    sayLoss(column, levels),
    column.cause === "none" ? "no cause" : sayCause(column),
    withDecision ? DECISION_WORDS[column.decision] : null,
  ];
  return `${sayFrequency(column.nominalHz)}: ${parts.filter((part) => part !== null).join(", ")}`;
}

/** One sentence over the whole figure, for who does not see it. */
export function sayWall(columns: readonly BandColumn[], levels: readonly SeriesLevel[]): string {
  const found = columns.filter((c) => c.limit.status === "found" && c.limit.nominal_dB !== null);
  const low = columns.find((c) => c.limit.status === "below lowest");
  const first =
    low ??
    found.reduce<BandColumn | null>(
      (least, c) =>
        least === null || (c.limit.nominal_dB ?? 0) < (least.limit.nominal_dB ?? 0) ? c : least,
      null,
    );
  if (columns.length === 0) return "No band was measured";
  const open = columns.filter((c) => c.limit.status === "not reached").length;
  const rest = `${open} of ${columns.length} bands did not reach the limit`;
  return first === null
    ? rest
    : `Gives out first at ${formatFrequency(first.nominalHz)}: ${sayLimit(first, levels)}. ${rest}`;
}
