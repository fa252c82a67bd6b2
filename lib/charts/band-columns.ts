/**
 * What the wall, its words and its table say of each band under one criterion: the same facts for
 * all three.
 */
import { chooseLimit, findUsableTopHz } from "../result/choose-limit";
import type { Band, BandLevel, Limit, Result } from "../result/result-schema";
import type { Criterion } from "../series/series-schema";
import type { DecidableCause } from "../series/vocabulary";
import type { CauseName, DecisionState } from "./marks";
import { isPlain, listPlainLevels, meanOf, type SeriesLevel } from "./series-levels";

/** What a person decided on a band. */
export interface BandDecision {
  readonly state: DecisionState;
  /** The cause that was decided; left out while open. */
  readonly cause?: DecidableCause | "distortion only";
}

export interface BandColumn {
  readonly nominalHz: number;
  readonly exactHz: number;
  /** [ranks] measured output of each plain level, dB; null in the noise. */
  readonly measuredDb: readonly (number | null)[];
  /** Highest measured output. */
  readonly topDb: number | null;
  /** What the loudest run should have given; null where it lost less than is drawn. */
  readonly expectedDb: number | null;
  /** Decibels that the loudest run lost, however little. */
  readonly lostDb: number | null;
  readonly limit: Limit;
  /** Output at the limit, on the wall's scale. */
  readonly limitDb: number | null;
  /** Output at the onset, where it was found. */
  readonly onsetDb: number | null;
  readonly onset: Band["onset"];
  readonly cause: CauseName;
  /** Of the long-term loss; null where there is none or no run. */
  readonly longTermCause: "thermal" | "unresolved" | null;
  readonly causeChanged: boolean;
  readonly decision: DecisionState;
}

/** Compression under this is not drawn on the wall. */
export const SHOWN_COMPRESSION_DB = 0.5;

export interface BandColumns {
  readonly levels: readonly SeriesLevel[];
  readonly columns: readonly BandColumn[];
  /** Whether the scale is SPL; else the run level less what was lost, because SPL does not hold here. */
  readonly spl: boolean;
}

interface ColumnsInput {
  result: Pick<Result, "bands" | "grid_Hz" | "runs" | "spl_valid">;
  criterion: Criterion;
  /** By nominal frequency; a band that is not named is open. */
  decisions?: ReadonlyMap<number, BandDecision>;
}

export function toBandColumns({
  result,
  criterion,
  decisions = new Map(),
}: ColumnsInput): BandColumns {
  const levels = listPlainLevels(result.runs);
  const usableTopHz = findUsableTopHz(result);
  const columns = result.bands.map((band) =>
    toColumn(
      band,
      levels,
      chooseLimit(band, criterion, { usableTopHz }),
      decisions.get(band.nominal_Hz),
    ),
  );
  return { levels, columns, spl: result.spl_valid };
}

/** The part of a band that a column is drawn from. */
export type ColumnBand = Pick<Band, "nominal_Hz" | "exact_Hz" | "onset" | "cause" | "long_term"> & {
  levels: readonly ColumnLevel[];
};
type ColumnLevel = Pick<
  BandLevel,
  "level_dB" | "kind" | "variant" | "spl_dB" | "expected_dB" | "compression_dB"
>;

/** SPL where it holds, else the run's level less what was lost. */
const outputOf = (level: ColumnLevel): number | null =>
  level.spl_dB ?? (level.compression_dB === null ? null : level.level_dB - level.compression_dB);

/** @param limit of this band, under the criterion that is shown. */
export function toColumn(
  band: ColumnBand,
  levels: readonly SeriesLevel[],
  limit: Limit,
  decision: BandDecision | undefined,
): BandColumn {
  const plain = band.levels.filter(isPlain);
  const at = (levelDb: number): ColumnLevel[] => plain.filter((run) => run.level_dB === levelDb);
  const measuredDb = levels.map(({ levelDb }) => meanOf(at(levelDb).map(outputOf)));
  const loudest = at(levels.at(-1)?.levelDb ?? Number.NaN);
  const lostDb = meanOf(loudest.map((run) => run.compression_dB));
  const expectedDb = meanOf(
    loudest.map((run) => run.expected_dB ?? (run.spl_dB === null ? run.level_dB : null)),
  );
  const there = measuredDb.filter((value) => value !== null);
  const curve = levels.flatMap(({ levelDb }, rank): [number, number][] => {
    const output = measuredDb[rank];
    return output === null || output === undefined ? [] : [[levelDb, output]];
  });
  const changed = decision?.state === "changed";
  return {
    nominalHz: band.nominal_Hz,
    exactHz: band.exact_Hz,
    measuredDb,
    topDb: there.length === 0 ? null : Math.max(...there),
    expectedDb: lostDb !== null && lostDb >= SHOWN_COMPRESSION_DB ? expectedDb : null,
    lostDb,
    limit,
    limitDb: limit.spl_dB ?? outputAtDrive(curve, limit.nominal_dB),
    onset: band.onset,
    onsetDb:
      band.onset.status === "found"
        ? (band.onset.spl_dB ?? outputAtDrive(curve, band.onset.nominal_dB))
        : null,
    cause:
      decision?.state !== undefined && decision.state !== "open" && decision.cause !== undefined
        ? decision.cause
        : computedCause(band, limit),
    longTermCause: longTermCauseOf(band),
    causeChanged: changed,
    decision: decision?.state ?? "open",
  };
}

/** "Distortion only" where THD alone sets the limit and nothing was lost. */
export const computedCause = (
  band: Pick<Band, "cause">,
  limit: Pick<Limit, "bound_by" | "status">,
): Band["cause"] | "distortion only" =>
  band.cause === "none" &&
  limit.bound_by === "thd" &&
  (limit.status === "found" || limit.status === "below lowest")
    ? "distortion only"
    : band.cause;

/** Of the loudest long-term run. */
function longTermCauseOf(band: Pick<Band, "long_term">): "thermal" | "unresolved" | null {
  const loudest = band.long_term.reduce<Band["long_term"][number] | null>(
    (top, run) => (top === null || run.level_dB > top.level_dB ? run : top),
    null,
  );
  return loudest === null || loudest.cause === "none" ? null : loudest.cause;
}

/** Straight between the runs; null outside them. */
function outputAtDrive(
  curve: readonly (readonly [driveDb: number, outputDb: number])[],
  driveDb: number | null,
): number | null {
  if (driveDb === null) return null;
  for (const [at, point] of curve.entries()) {
    const next = curve[at + 1] ?? point;
    if (driveDb >= point[0] && driveDb <= next[0]) {
      const span = next[0] - point[0];
      return span === 0
        ? point[1]
        : point[1] + ((next[1] - point[1]) * (driveDb - point[0])) / span;
    }
  }
  return null;
}
