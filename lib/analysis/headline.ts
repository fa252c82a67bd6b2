/** The answer of a series in one sentence's figures, per criterion (docs/domain.md section 8). */
import type { Criterion } from "../series/series-schema";
import type { BandLimit } from "./limits";
import type { ThirdOctave } from "./types";

/** Bands whose limits make the median, Hz. */
const MEDIAN_FROM_HZ = 200;
const MEDIAN_TO_HZ = 5000;
/** A band belongs to the range while its limit is not further than this below the median, dB. */
const RANGE_DROP_DB = 3;
/** Two octaves are six third octaves. */
const FEWEST_BANDS = 6;

export interface HeadlineBand {
  band: Pick<ThirdOctave, "nominalHz">;
  /** Short-term limit of the band under the criterion. */
  limit: Pick<BandLimit, "status" | "splDb" | "nominalDb">;
  /** More drive gives no more output there. */
  ceiling: boolean;
}

export interface Headline {
  criterion: Criterion;
  fromHz: number;
  toHz: number;
  /** Lowest limit in the range, rounded down to whole dB. */
  splDb: number;
  atLeast: boolean;
  /** Drive of the lowest limit of the range, dB, and its band. */
  lowestDriveDb: number;
  first: {
    status: "found" | "below lowest";
    nominalHz: number;
    splDb: number;
    nominalDb: number;
    ceiling: boolean;
  } | null;
}

export type HeadlineResult = { headline: Headline } | { refused: string };

/**
 * @param bands all reported bands, ascending in frequency.
 * @returns the headline, or in words why there is none.
 */
export function composeHeadline(
  criterion: Criterion,
  bands: readonly HeadlineBand[],
): HeadlineResult {
  const limits = bands.map(({ limit }) => limit);
  if (limits.every(({ status }) => status === "not assessed")) {
    return { refused: "no band could be assessed under this criterion" };
  }
  const assessed = bands.filter(({ limit }) => limit.status !== "not assessed");
  if (assessed.every(({ limit }) => !Number.isFinite(limit.splDb))) {
    return { refused: "levels in dB SPL are not valid in this environment" };
  }
  const middle = bands.filter(
    ({ band }) => band.nominalHz >= MEDIAN_FROM_HZ && band.nominalHz <= MEDIAN_TO_HZ,
  );
  const middleSpl = middle
    .flatMap(({ limit }) => (Number.isFinite(limit.splDb) ? [limit.splDb] : []))
    .toSorted((a, b) => a - b);
  if (2 * middleSpl.length < middle.length || middleSpl.length === 0) {
    return { refused: "most bands from 200 Hz to 5 kHz could not be assessed" };
  }
  const floorDb = median(middleSpl) - RANGE_DROP_DB;
  const inRange = bands.map(
    ({ limit }) =>
      (limit.status === "found" || limit.status === "not reached") && limit.splDb >= floorDb - 1e-9,
  );
  const { from, count } = longestRun(inRange);
  if (count < FEWEST_BANDS) {
    return {
      refused: `the bands within ${RANGE_DROP_DB} dB of the median limit span less than two octaves`,
    };
  }
  const range = bands.slice(from, from + count);
  const lowest = range.reduce((a, b) => (b.limit.splDb < a.limit.splDb ? b : a));
  return {
    headline: {
      criterion,
      fromHz: range[0]?.band.nominalHz ?? Number.NaN,
      toHz: range.at(-1)?.band.nominalHz ?? Number.NaN,
      splDb: Math.floor(lowest.limit.splDb + 1e-6),
      atLeast: lowest.limit.status === "not reached",
      lowestDriveDb: Math.min(...range.map(({ limit }) => limit.nominalDb)),
      first: findFirst(bands),
    },
  };
}

function findFirst(bands: readonly HeadlineBand[]): Headline["first"] {
  const below = bands.filter(({ limit }) => limit.status === "below lowest");
  const found = bands.filter(({ limit }) => limit.status === "found");
  // Of bands already past it the quietest one, of the others the one that needs the least drive.
  const first =
    below.length > 0
      ? below.reduce((a, b) => (b.limit.splDb < a.limit.splDb ? b : a))
      : found.length > 0
        ? found.reduce((a, b) => (b.limit.nominalDb < a.limit.nominalDb ? b : a))
        : null;
  if (!first) return null;
  return {
    status: first.limit.status === "below lowest" ? "below lowest" : "found",
    nominalHz: first.band.nominalHz,
    splDb: first.limit.splDb,
    nominalDb: first.limit.nominalDb,
    ceiling: first.ceiling,
  };
}

function median(sorted: readonly number[]): number {
  const middle = sorted.length >> 1;
  const upper = sorted[middle] ?? Number.NaN;
  return sorted.length % 2 === 1 ? upper : ((sorted[middle - 1] ?? Number.NaN) + upper) / 2;
}

function longestRun(flags: readonly boolean[]): { from: number; count: number } {
  let best = { from: 0, count: 0 };
  let from = 0;
  flags.forEach((flag, i) => {
    if (!flag) from = i + 1;
    else if (i + 1 - from > best.count) best = { from, count: i + 1 - from };
  });
  return best;
}
