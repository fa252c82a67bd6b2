/** What series.json says of its runs and cannot mean: told before anything is read. */
import type { Warning } from "../result/result-schema";
import type { Run } from "../series/series-schema";
import { sayRun } from "./say";

/** Steps of a player are finer than this, dB. */
const SAME_DB = 0.05;

const driveOf = (run: Run): number => run.drive_dB ?? run.level_dB;
/** As it was stated, with a true minus. */
const sayPlain = (value: number): string => String(value).replace("-", "\u2212");
const sameKind = (a: Run, b: Run): boolean => a.kind === b.kind && a.variant === b.variant;

/** @param runs as stated, in their order. None of this stops an analysis. */
export function warnOfOddRuns(runs: readonly Run[]): Warning[] {
  return runs.flatMap((run, at) => {
    const before = runs.slice(0, at).filter((other) => sameKind(run, other));
    return [
      ...warnOfDrive(run, before),
      ...warnOfConditioning(run),
      ...warnOfClosing(run, runs),
    ].map((warning) => ({ ...warning, file: run.file }));
  });
}

/** Level and drive rise together: the one is stated of the other. */
function warnOfDrive(run: Run, before: readonly Run[]): Warning[] {
  const odd = before.find((other) => {
    const levelStepDb = run.level_dB - other.level_dB;
    const driveStepDb = driveOf(run) - driveOf(other);
    return Math.abs(levelStepDb) < SAME_DB
      ? Math.abs(driveStepDb) >= SAME_DB
      : levelStepDb * driveStepDb <= 0;
  });
  if (odd === undefined) return [];
  const stated = (one: Run): string =>
    `level_dB ${sayPlain(one.level_dB)}, drive_dB ${sayPlain(driveOf(one))}`;
  return [
    {
      code: "series.drive-order",
      message: `${run.file} (${stated(run)}) and ${odd.file} (${stated(odd)}): the louder run must have the higher drive_dB, and repeats of a level the same. Losses are reckoned from drive_dB; correct whichever is wrong.`,
    },
  ];
}

function warnOfConditioning(run: Run): Warning[] {
  if (run.conditioning === undefined || run.kind === "long-term") return [];
  return [
    {
      code: "series.conditioning-unused",
      message: `${run.file} states a conditioning but is a ${run.kind} run: it is read as one without. State the kind long-term if the signal was played before it.`,
    },
  ];
}

function warnOfClosing(run: Run, runs: readonly Run[]): Warning[] {
  if (run.kind !== "closing") return [];
  const repeats = runs.some(
    (other) =>
      other.kind === "short-term" &&
      other.variant === undefined &&
      Math.abs(other.level_dB - run.level_dB) < SAME_DB,
  );
  if (repeats) return [];
  return [
    {
      code: "series.closing-level",
      message: `${run.file} closes the series at ${sayRun(run.level_dB)}, where no short-term run was made: it repeats none of them, so it tells of no drift.`,
    },
  ];
}
