/** The front of the engine: a series and its recordings in, measured runs out. One recording in memory at a time. */
import { AnalysisError } from "../errors/app-error";
import type { Warning } from "../result/result-schema";
import type { Run, Series } from "../series/series-schema";
import { isTableName, type ColumnChoice } from "../series/table-columns";
import { assembleRun, toLowResponse, type AssemblyContext } from "./assemble-run";
import { thirdOctaves, twentyFourthOctaves, type Grid } from "./bands";
import { Plans } from "./cell-power";
import { getAt } from "./get-at";
import { measureRun, type MeasuringContext, type RawRun } from "./measure-run";
import { toMicrophoneResponse, type MicrophoneResponse } from "./microphone";
import { measureNoise } from "./noise-floor";
import { toGateWindow, toOrderWindows } from "./order-windows";
import { warnOfOddRuns } from "./run-oddities";
import { toLevelWarnings, toRunWarnings, warnOfTwins } from "./run-warnings";
import { measureScale, type Scale } from "./scale";
import type { SplScaleFacts } from "./spl-uncertainty";
import { toPlayedStimulus } from "./stimulus-in-use";
import { SweepFinder } from "./sweep-in-recording";
import { toTableRun, toTableWarning, type RunTable } from "./table-run";
import type { MeasuredSeries, OnProgress, Recording } from "./types";

/** Where recordings come from: a folder, a store, or memory. */
export interface SeriesSource {
  /** @param channel from 1. */
  readRecording(file: string, channel: number, loopbackChannel?: number): Promise<Recording>;
  /**
   * A microphone file, or a run that was reduced elsewhere.
   * @param columns mapped by hand; without them the head of the table tells.
   */
  readTable(file: string, columns?: ColumnChoice): Promise<RunTable>;
}

export interface MeasureOptions {
  onProgress?: OnProgress;
  /** Tables of earlier series, to be used again by a process that analyses many. */
  plans?: Plans;
  /** Another core, that takes half of the runs. */
  helper?: RunHelper;
}

/** Measures runs of a series elsewhere, by measureRuns. */
export interface RunHelper {
  /**
   * @param runs indices into the runs of the series.
   * @returns what became of each, in their order; after one that failed the rest may be left out.
   */
  measure(series: Series, runs: readonly number[]): Promise<PromiseSettledResult<RawRun>[]>;
}

export const DEFAULT_REFERENCE_BAND_HZ = [500, 2000] as const;
/** The last of the sweep's fade-out spoils what lies at its very end. */
const FADE_OUT_S = 0.012;
const HIGHEST_SHARE_OF_RATE = 0.45;
/** The first half octave of a sweep is not measured. */
const FIRST_VALID = Math.SQRT2;

/**
 * @param source is asked for one file at a time.
 * @returns measured runs in the order of the series, and warnings in the tester's words.
 * @throws AnalysisError where nothing can be computed; FileError from the source.
 */
export async function measureSeries(
  series: Series,
  source: SeriesSource,
  { onProgress, plans = new Plans(), helper }: MeasureOptions = {},
): Promise<{ measured: MeasuredSeries; warnings: Warning[] }> {
  requireReference(series.runs);
  const away = helper === undefined ? [] : listLaterHalf(series.runs);
  const elsewhere = away.length === 0 ? undefined : helper?.measure(series, away);
  // Whoever waits for it below hears of it; nobody does where a run before fails.
  elsewhere?.catch(() => undefined);
  const scale = await measureScale(series, (file) => source.readRecording(file, 1), plans);
  const context = await toMeasuringContext(series, source, plans);
  const warnings = [...scale.warnings, ...warnOfOddRuns(series.runs)];
  const raw: RawRun[] = [];
  for (const [i, run] of series.runs.entries()) {
    if (isTableName(run.file)) {
      raw.push(await readTableRun(run, source, context, scale, warnings));
    } else {
      const result = away.includes(i)
        ? take((await elsewhere)?.[away.indexOf(i)])
        : await measureRecordedRun(run, source, context, onProgress);
      warnings.push(...toRunWarnings(result, run.file, context.finder.stimulus.sweep));
      raw.push(result);
    }
    onProgress?.({ file: run.file, stage: "levels", done: raw.length, total: series.runs.length });
  }
  const measured = assembleSeries(series, raw, context, scale);
  const twins = warnOfTwins(
    series.runs.map(({ file }) => file),
    raw,
  );
  return {
    measured,
    warnings: [...warnings, ...twins, ...toLevelWarnings(measured, context.referenceBandHz)],
  };
}

/** The later half of the runs that are recordings: what stands before them is heard of first. */
function listLaterHalf(runs: readonly Run[]): number[] {
  const recorded = [...runs.keys()].filter((i) => !isTableName(runs[i]!.file));
  return recorded.slice(Math.ceil(recorded.length / 2));
}

function take(settled: PromiseSettledResult<RawRun> | undefined): RawRun {
  if (settled?.status === "fulfilled") return settled.value;
  throw settled?.reason ?? new Error("a run was measured elsewhere and never came back");
}

/**
 * The part of measureSeries that a helper does.
 *
 * @param runs indices of runs that are recordings.
 * @returns what became of each, in their order; nothing after one that failed.
 * @throws AnalysisError, FileError where no run can be measured.
 */
export async function measureRuns(
  series: Series,
  source: SeriesSource,
  runs: readonly number[],
  plans: Plans,
): Promise<PromiseSettledResult<RawRun>[]> {
  const context = await toMeasuringContext(series, source, plans);
  const settled: PromiseSettledResult<RawRun>[] = [];
  for (const run of runs.map((i) => getAt(series.runs, i))) {
    const [result] = await Promise.allSettled([measureRecordedRun(run, source, context)]);
    settled.push(result);
    if (result.status === "rejected") break;
  }
  return settled;
}

async function measureRecordedRun(
  run: Run,
  source: SeriesSource,
  context: MeasuringContext,
  onProgress?: OnProgress,
): Promise<RawRun> {
  const recording = await source.readRecording(run.file, run.channel, run.loopback_channel);
  onProgress?.({ file: run.file, stage: "read", done: 0, total: 3 });
  const { sweep } = context.finder.stimulus;
  requireRate(recording, sweep.rateHz);
  const shape = { kind: run.kind, sweeps: run.sweeps, periodS: run.period_s };
  return measureRun(recording, shape, context, onProgress);
}

async function readTableRun(
  run: Run,
  source: SeriesSource,
  { edgeHz }: MeasuringContext,
  { fullScaleDb }: Scale,
  warnings: Warning[],
): Promise<RawRun> {
  const table = await source.readTable(run.file, run.columns);
  warnings.push(toTableWarning(run.file, table));
  return toTableRun(table, run.file, edgeHz, fullScaleDb);
}

function requireReference(runs: readonly Run[]): void {
  if (!runs.some(isPlain)) {
    throw new AnalysisError(
      "series.reference-missing",
      "The series has no short-term run without a variant: there is nothing to compare with.",
    );
  }
}

const isPlain = (run: Run): boolean => run.kind === "short-term" && run.variant === undefined;
const toDriveDb = (run: Run): number => run.drive_dB ?? run.level_dB;

function requireRate(recording: Recording, rateHz: number): void {
  if (recording.rateHz === rateHz) return;
  throw new AnalysisError(
    "stimulus.rate",
    `${recording.file} runs at ${recording.rateHz} Hz, the stimulus at ${rateHz} Hz. Record at the rate of the stimulus.`,
    {
      file: recording.file,
      details: { rateHz: recording.rateHz, stimulusRateHz: rateHz },
    },
  );
}

async function toMeasuringContext(
  series: Series,
  source: SeriesSource,
  plans: Plans,
): Promise<MeasuringContext> {
  const { stimulus, ambient, environment, gate_ms: gateMs } = series;
  const played = toPlayedStimulus(
    stimulus,
    stimulus.file === undefined ? undefined : await source.readRecording(stimulus.file, 1),
  );
  const { startHz, stopHz, rateConstantS, rateHz } = played.sweep;
  const room = ambient === undefined ? null : await source.readRecording(ambient.file, 1);
  return {
    finder: new SweepFinder(played, plans),
    plans,
    edgeHz: twentyFourthOctaves(startHz, stopHz).edgeHz,
    windows: toOrderWindows(rateConstantS, rateHz),
    gate:
      environment === "gated" && gateMs !== undefined ? toGateWindow(gateMs / 1000, rateHz) : null,
    ambient: room === null ? null : measureNoise(room.samples, room.rateHz, plans),
    microphone: await readMicrophone(series, source),
    referenceBandHz: series.reference_band_Hz ?? DEFAULT_REFERENCE_BAND_HZ,
  };
}

async function readMicrophone(
  { microphone, calibration }: Series,
  source: SeriesSource,
): Promise<MicrophoneResponse | null> {
  if (microphone === undefined) return null;
  const calibratorHz =
    calibration !== undefined && "frequency_Hz" in calibration ? calibration.frequency_Hz : 1000;
  return toMicrophoneResponse(
    { ...microphone, ...(await source.readTable(microphone.file)) },
    calibratorHz,
  );
}

function assembleSeries(
  series: Series,
  raw: readonly RawRun[],
  context: MeasuringContext,
  scale: Scale,
): MeasuredSeries {
  const { sweep } = context.finder.stimulus;
  const grid = twentyFourthOctaves(sweep.startHz, sweep.stopHz);
  const topHz = Math.min(
    sweep.stopHz,
    HIGHEST_SHARE_OF_RATE * sweep.rateHz,
    context.microphone?.highestHz ?? Infinity,
  );
  const bands = thirdOctaves(sweep.startHz, sweep.stopHz);
  const plain = series.runs
    .map((run, i) => ({ run, raw: raw[i]! }))
    .filter(({ run }) => isPlain(run));
  const reference = plain.reduce((low, next) =>
    toDriveDb(next.run) < toDriveDb(low.run) ? next : low,
  );
  const assembly: AssemblyContext = {
    grid,
    bands,
    ...toValidity(series, grid, sweep.startHz, scale.splValid),
    topHz: Math.min(topHz, sweep.stopHz * Math.exp(-FADE_OUT_S / sweep.rateConstantS)),
    fullScaleDb: scale.fullScaleDb,
    referenceBandHz: context.referenceBandHz,
    gateNoiseShare: (context.gate?.energyS ?? 0) / context.windows[0]!.energyS,
    lowResponse: toLowResponse(reference.raw),
  };
  return {
    gridHz: grid.centreHz,
    bands,
    runs: series.runs.map((run, i) =>
      assembleRun(raw[i]!, run, toAppliedDriveDb(run, raw[i]!, reference), assembly),
    ),
    splValid: scale.splValid,
    topHz,
    tuningHz: series.tuning_Hz,
    sweep: { startHz: sweep.startHz, stopHz: sweep.stopHz, rateConstantS: sweep.rateConstantS },
    ...(scale.calibratorChangeDb === undefined
      ? {}
      : { calibratorChangeDb: scale.calibratorChangeDb }),
    splScale: toSplScale(series, scale),
  };
}

function toSplScale(series: Series, { calibratorChangeDb }: Scale): SplScaleFacts {
  const { calibration, environment, distance_m, gate_ms, microphone, uncertainty } = series;
  const byTone = calibration !== undefined && "frequency_Hz" in calibration;
  // A table states its own level: how well it is known is its maker's knowledge.
  const stated = series.runs.some((run) => isPlain(run) && isTableName(run.file));
  return {
    environment,
    distanceM: distance_m,
    gateMs: gate_ms,
    calibratedBy:
      stated || calibration === undefined ? null : byTone ? "calibrator" : "sensitivity",
    calibratorChangeDb,
    hasMicrophoneFile: microphone !== undefined,
    stated: uncertainty ?? {},
  };
}

/** What was really applied: the loopback channel knows it exactly, re the reference run. */
function toAppliedDriveDb(run: Run, raw: RawRun, reference: { run: Run; raw: RawRun }): number {
  if (raw.loopbackDb === null || reference.raw.loopbackDb === null) return toDriveDb(run);
  return toDriveDb(reference.run) + raw.loopbackDb - reference.raw.loopbackDb;
}

function toValidity(
  { gate_ms: gateMs, environment }: Series,
  grid: Grid,
  startHz: number,
  splValid: boolean,
): Pick<AssemblyContext, "fundamentalValid" | "splValid"> {
  const lowestGated = environment === "gated" && gateMs !== undefined ? 1000 / gateMs : 0;
  const cells = Array.from(grid.centreHz, (_, c) => grid.edgeHz[c]!);
  return {
    fundamentalValid: cells.map((low) => low >= FIRST_VALID * startHz),
    splValid: cells.map((low) => splValid && low >= lowestGated),
  };
}
