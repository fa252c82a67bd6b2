/** What the front of the engine has to say about a run, in the tester's words. */
import type { Warning } from "../result/result-schema";
import type { SweepInUse } from "./deconvolution";
import { toDriftUncertaintyPpm } from "./drift";
import type { RawRun } from "./measure-run";
import { sayDb, sayNumber } from "./say";
import type { MeasuredRun, MeasuredSeries } from "./types";

/** -40 dBFS. */
const LARGEST_MEAN = 0.01;
const LEAST_SNR_DB = 20;
const DRIFT_PPM = 50;
/** No two clocks of players and recorders lie further apart. */
const CLOCKS_PPM = 1000;
const MISSING_S = 0.01;

/** Defaults of docs/domain.md section 9; none of them stops an analysis. */
export function toRunWarnings(raw: RawRun, file: string, sweep: SweepInUse): Warning[] {
  const warnings: Warning[] = [];
  const warn = (code: string, message: string): number => warnings.push({ code, message, file });
  if (raw.clipped)
    warn(
      "run.clipped",
      `${file} reaches digital full scale: its distortion and its compression are not the loudspeaker's.`,
    );
  if (Math.abs(raw.mean) > LARGEST_MEAN)
    warn(
      "run.dc-offset",
      `${file} is shifted by ${sayNumber(20 * Math.log10(Math.abs(raw.mean)), 0)} dBFS of DC; up to ${sayNumber(20 * Math.log10(LARGEST_MEAN), 0)} dBFS is usual. It takes headroom and points at a fault of the input.`,
    );
  if (raw.snrDb < LEAST_SNR_DB)
    warn(
      "run.low-signal",
      `${file} is only ${sayDb(raw.snrDb)} over the noise in the reference band; ${LEAST_SNR_DB} dB are wanted.`,
    );
  if (raw.missing > MISSING_S * sweep.rateHz) {
    warn(
      "run.sweep-cut",
      `${file} lacks ${(raw.missing / sweep.rateHz).toFixed(3)} s of the sweep at its ${raw.latencyS < 0 ? "start" : "end"}.`,
    );
  }
  // A loopback channel has no loudspeaker whose phase could feign a drift.
  const unsurePpm = raw.loopbackDb === null ? toDriftUncertaintyPpm(sweep.rateConstantS) : 0;
  if (Math.abs(raw.driftPpm) > Math.max(CLOCKS_PPM, 4 * unsurePpm)) {
    warn(
      "run.other-sweep",
      `${file}: the sweep runs ${(Math.abs(raw.driftPpm) / 10_000).toFixed(2)} % too ${raw.driftPpm > 0 ? "fast" : "slow"} for one from ${sweep.startHz} to ${sweep.stopHz} Hz in ${sweep.lengthS.toFixed(3)} s, more than two clocks can differ: another sweep was played. Check its start, its end and its length; frequencies and harmonics are read in the wrong places.`,
    );
  } else if (Math.abs(raw.driftPpm) > Math.max(DRIFT_PPM, unsurePpm)) {
    warn(
      "run.clock-drift",
      `${file}: player and recorder differ by about ${sayNumber(raw.driftPpm, 0)} ppm. Magnitudes hold; frequencies are off by as much.`,
    );
  }
  return warnings;
}

/** Takes of the same bytes: no two recordings have the same noise, no two tables the same last digit throughout. */
export function warnOfTwins(files: readonly string[], raw: readonly RawRun[]): Warning[] {
  const powerOf = (i: number): Float64Array | undefined => raw[i]?.orders[0]?.power;
  return files.flatMap((file, i) => {
    const own = powerOf(i);
    const twin = files.findIndex(
      (_, j) => j < i && own !== undefined && own.every((p, c) => Object.is(p, powerOf(j)?.[c])),
    );
    if (twin < 0) return [];
    return [
      {
        code: "run.duplicate",
        message: `${file} holds the same as ${files[twin] ?? ""}: one recording would count as two. Check that each run has its own file.`,
        file,
      },
    ];
  });
}

const OFF_PLAN_DB = 3;
const HIGH_THD_PERCENT = 10;

/**
 * Levels held against the plan: the lowest run must be as loud as planned, a higher one not louder
 * (quieter is what we are here to find); and the lowest run must not already distort.
 */
export function toLevelWarnings(
  { runs, bands, splValid }: MeasuredSeries,
  [lowHz, highHz]: readonly [number, number],
): Warning[] {
  const plain = runs.filter((run) => run.kind === "short-term" && run.variant === undefined);
  const lowest = plain.reduce<MeasuredRun | undefined>(
    (low, run) => (low === undefined || run.driveDb < low.driveDb ? run : low),
    undefined,
  );
  const warnings: Warning[] = [];
  for (const run of splValid ? plain : []) {
    const off = run.measuredLevelDb - run.levelDb;
    if (off > OFF_PLAN_DB || (run === lowest && off < -OFF_PLAN_DB)) {
      warnings.push({
        code: "run.level-plan",
        message: `${run.file} measures ${sayDb(run.measuredLevelDb)} where ${run.levelDb} dB were planned: ${Math.abs(off).toFixed(1)} dB ${off > 0 ? "more" : "less"}. Check the gain, the calibration and the distance.`,
        file: run.file,
      });
    }
  }
  const distorting = lowest?.bands.filter((measure, i) => {
    const band = bands[i];
    return (
      band !== undefined &&
      band.exactHz >= lowHz &&
      band.exactHz <= highHz &&
      measure.thdQuality === "measured" &&
      measure.thdPercent > HIGH_THD_PERCENT
    );
  });
  if (lowest !== undefined && distorting !== undefined && distorting.length > 0) {
    const worst = Math.max(...distorting.map((measure) => measure.thdPercent));
    warnings.push({
      code: "run.distorted",
      message: `${lowest.file}, the lowest level, already distorts by ${worst.toFixed(0)} % between ${lowHz} and ${highHz} Hz: check the input gain and the cables, or start lower.`,
      file: lowest.file,
    });
  }
  return warnings;
}
