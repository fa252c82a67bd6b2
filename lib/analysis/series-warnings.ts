/** What a reader of the figures must know about the series as a whole. */
import { getAt } from "./get-at";
import type { Warning } from "../result/result-schema";
import { groupRuns, type LevelGroup } from "./compression";
import type { BandOnset } from "./onset/find-onsets";
import type { NoLaw } from "./onset/no-law";
import { ONSET_LOSS_DB } from "./onset/shapes";
import type { StepReading } from "./onset/steps";
import { sayBands, sayDb, sayNumber, sayRun } from "./say";
import type { MeasuredSeries } from "./types";

/** The reference must lie this far under the first onset, dB. */
const REFERENCE_MARGIN_DB = 10;
/** A closing run further than this off the first, dB, tells of a drift. */
const CLOSING_DRIFT_DB = 0.2;
/** A band that gets louder than its drive by more than this, dB, and than its uncertainty, is told. */
const RISING_GAIN_DB = 0.2;

export function warnOfSeries(
  series: MeasuredSeries,
  groups: readonly LevelGroup[],
  steps: readonly StepReading[],
  onsets: readonly BandOnset[],
): Warning[] {
  return [
    ...warnOfFewLevels(groups),
    ...warnOfReference(series, groups, onsets),
    ...warnOfSteps(steps),
    ...warnOfNoLaw(series, onsets),
    ...warnOfRisingGain(series, groups, onsets),
    ...warnOfDrift(series, groups),
  ];
}

const fileOf = (group: LevelGroup): { file?: string } => {
  const file = group.runs[0]?.file;
  return file === undefined ? {} : { file };
};

function warnOfFewLevels(groups: readonly LevelGroup[]): Warning[] {
  if (groups.length >= 2) return [];
  return [
    {
      code: "series.one-level",
      message:
        "Only one level was run: compression and onset need two or more. Add runs at higher levels.",
    },
  ];
}

function warnOfReference(
  series: MeasuredSeries,
  groups: readonly LevelGroup[],
  onsets: readonly BandOnset[],
): Warning[] {
  const reference = groups[0];
  if (!reference) return [];
  const run = sayRun(reference.levelDb);
  const nominal = (keep: (onset: BandOnset) => boolean): number[] =>
    series.bands.flatMap(({ nominalHz }, b) => (keep(getAt(onsets, b)) ? [nominalHz] : []));
  const past = nominal(({ status }) => status === "below lowest");
  if (past.length > 0) {
    return [
      {
        code: "reference.compressed",
        message: `The reference, the ${run} run, is itself compressed at ${sayBands(past)}: losses there are lower bounds. Add a run 10 dB quieter.`,
        ...fileOf(reference),
      },
    ];
  }
  const onsetOf = ({ status, posterior }: BandOnset): number =>
    status === "found" && posterior
      ? posterior.quantiles(ONSET_LOSS_DB, Infinity).medianDb
      : Infinity;
  const first = Math.min(...onsets.map(onsetOf));
  if (first - reference.driveDb >= REFERENCE_MARGIN_DB) return [];
  const close = nominal((onset) => onsetOf(onset) - reference.driveDb < REFERENCE_MARGIN_DB);
  return [
    {
      code: "reference.compressed",
      message: `The reference, the ${run} run, lies only ${sayDb(first - reference.driveDb)} under the first onset (${sayBands(close)}): it may be compressed already. Add a run at least 10 dB under ${sayDb(first)}.`,
      ...fileOf(reference),
    },
  ];
}

function warnOfSteps(steps: readonly StepReading[]): Warning[] {
  return steps.flatMap(({ group, offsetDb, share, separable, takenDb, told }) => {
    if (!told) return [];
    const bands = share >= 0.9 ? "all bands" : `all free bands (${sayNumber(100 * share, 0)} %)`;
    const meaning = separable
      ? `a step of the player that is off, since other bands are limited and these are not${takenDb === 0 ? "" : "; the onsets reckon with it, levels and losses are printed as measured"}`
      : "a step of the player that is off and a loss common to all bands look alike; nothing is corrected";
    return [
      {
        code: "level.common-offset",
        message: `${bands}: ${sayDb(offsetDb)} in the ${sayRun(group.levelDb)} run: ${meaning}.`,
        ...fileOf(group),
      },
    ];
  });
}

function warnOfNoLaw(series: MeasuredSeries, onsets: readonly BandOnset[]): Warning[] {
  const bandsOf = (control: NoLaw["control"]): number[] =>
    series.bands.flatMap(({ nominalHz }, b) =>
      onsets[b]?.noLaw?.control === control ? [nominalHz] : [],
    );
  const slow = bandsOf("slow control");
  const several = bandsOf("several controls");
  return [
    ...(slow.length === 0
      ? []
      : [
          {
            code: "onset.slow-control",
            message: `Slow control at ${sayBands(slow)}: the losses contradict every static control, so the gain depends on time. What a sweep shows there holds for its length only; repeat the series with one twice as long to see how far it moves.`,
          },
        ]),
    ...(several.length === 0
      ? []
      : [
          {
            code: "onset.several-controls",
            message: `No single law follows the losses at ${sayBands(several)}: two gain controls or two paths add up there, or a slow control acts. Repeat the series with a sweep twice as long; what stays is static.`,
          },
        ]),
  ];
}

function warnOfRisingGain(
  series: MeasuredSeries,
  groups: readonly LevelGroup[],
  onsets: readonly BandOnset[],
): Warning[] {
  const rising = series.bands.flatMap(({ nominalHz }, b) => {
    const detection = onsets[b]?.detection;
    if (!detection) return [];
    const most = [...detection.lossDb.keys()].some((k) => {
      const lossDb = detection.lossDb[k] ?? Number.NaN;
      return -lossDb > Math.max(RISING_GAIN_DB, 4.5 * (detection.lossSigmaDb[k] ?? 0));
    });
    return most ? [nominalHz] : [];
  });
  if (rising.length === 0 || groups.length < 2) return [];
  return [
    {
      code: "level.rising-gain",
      message: `The output grows more than the drive at ${sayBands(rising)}: automatic gain, a wrong step, or something that moved. Check the steps and repeat the runs.`,
    },
  ];
}

function warnOfDrift(series: MeasuredSeries, groups: readonly LevelGroup[]): Warning[] {
  return groupRuns(series, "closing", undefined).flatMap((closing) => {
    const same = groups.find(({ levelDb }) => Math.abs(levelDb - closing.levelDb) < 1e-6);
    if (!same) return [];
    const differences = series.bands
      .map((_, b) => (closing.gainDb[b] ?? Number.NaN) - (same.gainDb[b] ?? Number.NaN))
      .filter((difference) => Number.isFinite(difference))
      .toSorted((a, b) => a - b);
    const median = differences[differences.length >> 1];
    if (median === undefined || Math.abs(median) <= CLOSING_DRIFT_DB) return [];
    return [
      {
        code: "series.drift",
        message: `The closing run differs from the ${sayRun(same.levelDb)} run by ${sayDb(median, 2)} (median of the bands; 0.2 dB allowed): something drifted or changed during the series. Repeat the series once it has warmed up.`,
        ...fileOf(closing),
      },
    ];
  });
}
