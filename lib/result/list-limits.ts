/** What the list of series shows of a result: one small wall and one headline per criterion. */
import type { ListLimits } from "../api/series";
import type { Criterion } from "../series/series-schema";
import { plainShortTermLevels } from "./finding";
import type { Band, Limit, Result } from "./result-schema";

/** In the order of the criteria that the analysis judged by. */
export function toListLimits(result: Result): ListLimits[] {
  return result.settings.criteria.map((criterion) => {
    const headline = result.headline.find((h) => isSame(h.criterion, criterion)) ?? null;
    return {
      criterion,
      wall: result.bands.map((band) => toColumn(band, criterion)),
      headline,
      headline_missing: headline === null ? toMissing(result) : null,
      first_cause:
        headline?.first == null
          ? null
          : toFirstCause(result.bands, headline.first.nominal_Hz, criterion),
    };
  });
}

/** Level of the first criterion's headline, for sorting; null without one. */
export function toReachedDb(limits: readonly ListLimits[]): number | null {
  return limits[0]?.headline?.spl_dB ?? null;
}

function toColumn(band: Band, criterion: Criterion): ListLimits["wall"][number] {
  const limit = shortTermLimit(band, criterion);
  const levels = plainShortTermLevels(band).flatMap((l) => (l.spl_dB === null ? [] : [l.spl_dB]));
  return {
    nominal_Hz: band.nominal_Hz,
    status: limit?.status ?? "not assessed",
    spl_dB: limit?.spl_dB ?? null,
    reached_dB: levels.length === 0 ? null : Math.max(...levels),
  };
}

function toFirstCause(
  bands: readonly Band[],
  nominalHz: number,
  criterion: Criterion,
): ListLimits["first_cause"] {
  const band = bands.find((b) => b.nominal_Hz === nominalHz);
  if (band === undefined) return null;
  const bound = shortTermLimit(band, criterion)?.bound_by;
  return band.cause === "none" && bound === "thd" ? "distortion only" : band.cause;
}

function shortTermLimit(band: Band, criterion: Criterion): Limit | undefined {
  return band.limits.find((l) => l.kind === "short-term" && isSame(l.criterion, criterion));
}

function toMissing(result: Result): string {
  const warning = result.warnings.find((w) => w.code.startsWith("headline."));
  if (warning !== undefined) return warning.message;
  return result.spl_valid
    ? "No run of bands is wide enough for a headline."
    : `Levels do not hold in this place (${result.environment}).`;
}

const isSame = (a: Criterion, b: Criterion): boolean =>
  a.thd_percent === b.thd_percent && a.compression_dB === b.compression_dB;
