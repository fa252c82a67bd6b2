/** Bass boost withdrawn with level: an equaliser at work (docs/domain.md section 6). */
import type { LevelGroup } from "./compression";
import type { BandOnset } from "./onset/find-onsets";
import { ONSET_LOSS_DB } from "./onset/shapes";
import { sayHz, sayNumber, sayRun } from "./say";
import { CEILING_SLOPE, stepSlopes } from "./slope";
import type { ThirdOctave } from "./types";

/** Bands up to here can be an equaliser's, Hz. */
const TOP_HZ = 315;
const MIDS_HZ = [500, 4000] as const;
const FREE_LOSS_DB = 0.12;
const STEEPEST_SLOPE = 0.97;
const SPREAD = 0.08;
const ONSET_SLACK_DB = 0.5;

/**
 * Loss in the bass from the lowest step on, at one slope below 1, while the mid bands stay free.
 *
 * @returns the reason with its figures, or null where it is no equaliser's law.
 */
export function findEqualiser(
  groups: readonly LevelGroup[],
  bands: readonly ThirdOctave[],
  onsets: readonly BandOnset[],
  b: number,
): string | null {
  const onset = onsets[b];
  const band = bands[b];
  if (!onset?.detection || !band || band.exactHz > TOP_HZ || onset.overload === "overload")
    return null;
  const slopes = stepSlopes(groups, onset);
  if (slopes.length < 2 || onset.detection.firstActive !== 1) return null;
  const mean = slopes.reduce((sum, { slope }) => sum + slope, 0) / slopes.length;
  const constant = slopes.every(
    ({ slope, sigma }) => Math.abs(slope - mean) <= Math.max(SPREAD, 3 * sigma),
  );
  if (!constant || mean <= CEILING_SLOPE || mean >= STEEPEST_SLOPE) return null;
  // From the lowest step on: the onset of such a law lies no higher than 1/3 dB of loss over the lowest run.
  const latest = (groups[0]?.driveDb ?? Number.NaN) + ONSET_LOSS_DB / (1 - mean) + ONSET_SLACK_DB;
  const onsetDb = onset.posterior?.quantiles(ONSET_LOSS_DB, Infinity).medianDb ?? Number.NaN;
  if (!(onsetDb <= latest)) return null;
  const mids = bands.flatMap((mid, i) => {
    const inMids = mid.exactHz >= MIDS_HZ[0] * 0.95 && mid.exactHz <= MIDS_HZ[1] * 1.05;
    const lossDb = (groups[0]?.gainDb[i] ?? Number.NaN) - (groups[1]?.gainDb[i] ?? Number.NaN);
    return inMids && Number.isFinite(lossDb) ? [lossDb] : [];
  });
  const free = mids.filter((lossDb) => lossDb < FREE_LOSS_DB).length;
  if (mids.length === 0 || 2 * free <= mids.length) return null;
  return `From the ${sayRun(groups[0]?.levelDb ?? Number.NaN)} run on, every step raises ${sayHz(band.nominalHz)} by the same ${sayNumber(mean, 2)} of its size while the mids follow and the distortion does not suffice for an overload: bass boost withdrawn with level.`;
}
