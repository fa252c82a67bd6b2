/**
 * How much louder one loudspeaker's limit lies than the reference's, and what can be said where a
 * limit was not reached: "or more", or nothing at all. Differences under the uncertainty of both
 * are none (docs/domain.md section 10).
 */
import type { ComparedBand, Difference } from "./comparison-schema";

/**
 * Of a level at 1 m, k = 2, dB, where a test states none: calibrator, microphone, distance and place
 * of a careful measurement together (common practice).
 */
export const ASSUMED_UNCERTAINTY_DB = 1;

/** Where a limit lies, as far as the test tells. */
export interface Reach {
  levelDb: number;
  /** up: the limit was not reached and lies here or higher; down: it lies below the lowest run. */
  open: "none" | "up" | "down";
  /** So much lower, and so much higher, the true limit may be, dB, k = 2. */
  downDb: number;
  upDb: number;
}

/** From the 90 % interval of the estimator to k = 2. */
const INTERVAL_TO_K2 = 2 / 1.645;

/**
 * A limit between two runs counts at its lower end; then it may lie higher by the whole step.
 * The drive's interval is taken over to the level decibel for decibel: under a compression
 * criterion the level at the limit is the drive plus a constant.
 *
 * @returns null where the limit was not assessed or the level does not hold.
 */
export function toReach(
  band: Pick<ComparedBand, "status" | "spl_dB" | "nominal_dB" | "low_dB" | "high_dB"> & {
    uncertainty_dB: number;
  },
): Reach | null {
  const { status, spl_dB: levelDb, uncertainty_dB: ownDb } = band;
  if (levelDb === null || status === "not assessed") return null;
  if (status === "not reached") return { levelDb, open: "up", downDb: ownDb, upDb: ownDb };
  if (status === "below lowest") return { levelDb, open: "down", downDb: ownDb, upDb: ownDb };
  const nominal = band.nominal_dB ?? 0;
  const below = nominal - (band.low_dB ?? nominal);
  const above = (band.high_dB ?? nominal) - nominal;
  const scale = isBracket(band) ? 1 : INTERVAL_TO_K2;
  return {
    levelDb,
    open: "none",
    downDb: Math.hypot(ownDb, below * scale),
    upDb: Math.hypot(ownDb, above * scale),
  };
}

/** Only two runs bound the limit: it counts at the lower one. */
export const isBracket = (
  limit: Pick<ComparedBand, "status" | "nominal_dB" | "low_dB" | "high_dB">,
): boolean =>
  limit.status === "found" &&
  limit.nominal_dB !== null &&
  limit.low_dB === limit.nominal_dB &&
  limit.high_dB !== null &&
  limit.high_dB > limit.nominal_dB;

const UNKNOWN: Difference = {
  shown: "unknown",
  difference_dB: null,
  or_more: false,
  uncertainty_dB: null,
};

/**
 * Both reached: the difference. Only the reference reached: this one is louder by so much or more,
 * if its loudest run was. Only this one reached: quieter by so much or more, if it was. Neither:
 * nothing is known. Limits below the lowest run count the other way round.
 */
export function toDifference(compared: Reach | null, reference: Reach | null): Difference {
  if (compared === null || reference === null) return UNKNOWN;
  const differenceDb = compared.levelDb - reference.levelDb;
  const atLeast = compared.open !== "down" && reference.open !== "up";
  const atMost = compared.open !== "up" && reference.open !== "down";
  if (!atLeast && !atMost) return UNKNOWN;
  const uncertaintyDb =
    differenceDb >= 0
      ? Math.hypot(compared.downDb, reference.upDb)
      : Math.hypot(compared.upDb, reference.downDb);
  const under = Math.abs(differenceDb) < uncertaintyDb;
  if (atLeast && atMost) {
    return under
      ? { shown: "none", difference_dB: null, or_more: false, uncertainty_dB: uncertaintyDb }
      : toValue(differenceDb, false, uncertaintyDb);
  }
  // A bound that points the other way, or that the uncertainty swallows, says nothing.
  const says = atLeast ? differenceDb > 0 : differenceDb < 0;
  return says && !under ? toValue(differenceDb, true, uncertaintyDb) : UNKNOWN;
}

const toValue = (differenceDb: number, orMore: boolean, uncertaintyDb: number): Difference => ({
  shown: "value",
  difference_dB: differenceDb,
  or_more: orMore,
  uncertainty_dB: uncertaintyDb,
});
