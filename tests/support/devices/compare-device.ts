/** A device's set through the whole engine, held against its truth: errors as shares of their tolerance. */
import { analyseSeries } from "../../../lib/analysis/analyse-series";
import type { Band, BandLevel, Result } from "../../../lib/result/result-schema";
import type { Device } from "./device";
import { LEVELS_DB, recordDevice, type Conditions, type DeviceSet } from "./record-device";
import { findOnsetDb, measureStaticLaw, type StaticLaw } from "./static-law";

/** Highest band of the accuracy table. */
const HIGHEST_HZ = 12_500;
const ONSET_LOSS_DB = 1 / 3;
const LEAST_SNR_DB = 15;

/** One number beside its truth; it stands while `share` is at most 1. */
export interface Reading {
  what: string;
  error: number;
  tolerance: number;
}

export interface OnsetReading {
  nominalHz: number;
  truthDb: number;
  status: Band["onset"]["status"];
  errorDb: number;
  widthDb: number;
  holdsTruth: boolean;
}

export interface DeviceReport {
  result: Result;
  levels: Reading[];
  compression: Reading[];
  harmonics: Reading[];
  thd: Reading[];
  onsets: OnsetReading[];
  /** Bands that lose 1 dB or more at the top and have a cause of their own. */
  causes: { nominalHz: number; cause: Band["cause"] }[];
  /** Highest run that meets a criterion: bands where it is another than in truth. */
  wrongHighestRuns: string[];
}

/** Tolerances of the accuracy table. */
const levelTolerance = (hz: number): number => (hz >= 80 ? 0.05 : 0.2);
const compressionTolerance = (hz: number): number => (hz >= 80 ? 0.03 : 0.1);
const distortionTolerance = (least: number, snrDb: number): number =>
  Math.max(least, 18 * 10 ** (-snrDb / 20));

const toThirdOctave = (band: Band): number => Math.round(10 * Math.log10(band.exact_Hz / 1000));
const toDb = (ratio: number): number => 20 * Math.log10(ratio);

export async function compareDevice(
  device: Device,
  conditions: Conditions = {},
): Promise<DeviceReport> {
  const set = await recordDevice(device, conditions);
  const result = await analyseSeries(set.series, set.source);
  const bands = result.bands.filter((b) => b.nominal_Hz <= HIGHEST_HZ);
  const everywhere = device.sameEverywhere ? await measureStaticLaw(device, 1000) : null;
  const report: DeviceReport = {
    result,
    levels: [],
    compression: [],
    harmonics: [],
    thd: [],
    onsets: [],
    causes: [],
    wrongHighestRuns: [],
  };
  for (const band of bands) {
    for (const level of band.levels) readLevel(report, set, band, level);
    readOnset(report, band, everywhere ?? (await measureStaticLaw(device, band.exact_Hz)));
    const lost = truthLossDb(set, toThirdOctave(band), Math.max(...LEVELS_DB));
    if (lost >= 1 && !band.cause_inferred) {
      report.causes.push({ nominalHz: band.nominal_Hz, cause: band.cause });
    }
    report.wrongHighestRuns.push(
      ...findWrongHighestRuns(set, band),
      ...findWrongThdRuns(set, band),
    );
  }
  return report;
}

function readLevel(report: DeviceReport, set: DeviceSet, band: Band, level: BandLevel): void {
  const n = toThirdOctave(band);
  const truth = set.truth.get(level.level_dB);
  const what = `${band.nominal_Hz} Hz, ${level.level_dB} dB`;
  const hz = band.nominal_Hz;
  report.levels.push({
    what,
    error: (level.spl_dB ?? NaN) - (truth?.levelDb.get(n) ?? NaN),
    tolerance: levelTolerance(hz),
  });
  report.compression.push({
    what,
    error: (level.compression_dB ?? NaN) - truthLossDb(set, n, level.level_dB),
    tolerance: compressionTolerance(hz),
  });
  for (const { order, percent, floor_percent } of level.harmonics.filter((h) => h.order <= 3)) {
    const ratio = truth?.harmonics.get(order)?.get(n);
    const snrDb = toDb((percent ?? 0) / (floor_percent ?? NaN));
    if (ratio === undefined || percent === null || !(snrDb >= LEAST_SNR_DB)) continue;
    report.harmonics.push({
      what: `${what}, H${order}`,
      error: toDb(percent / 100 / ratio),
      tolerance: distortionTolerance(0.1, snrDb),
    });
  }
  if (level.thd_quality !== "measured") return;
  const [low = NaN, high = NaN] = level.thd_orders.split("-").map(Number);
  const orders = level.harmonics.filter((h) => h.order >= low && h.order <= (high || low));
  const rms = (values: number[]): number => Math.hypot(...values);
  const ratios = orders.map((h) => truth?.harmonics.get(h.order)?.get(n) ?? 0);
  const floor = rms(orders.map((h) => h.floor_percent ?? 0));
  report.thd.push({
    what: `${what}, THD ${level.thd_orders}`,
    error: toDb((level.thd_percent ?? NaN) / 100 / rms(ratios)),
    tolerance: distortionTolerance(0.15, toDb((level.thd_percent ?? NaN) / floor)),
  });
}

/** What the noise-free device loses against its own quietest run, dB. */
function truthLossDb(set: DeviceSet, n: number, levelDb: number): number {
  const lowest = Math.min(...LEVELS_DB);
  const at = (db: number): number => set.truth.get(db)?.levelDb.get(n) ?? NaN;
  return at(lowest) + levelDb - lowest - at(levelDb);
}

function readOnset(report: DeviceReport, band: Band, law: StaticLaw): void {
  const truthDb = findOnsetDb(law, ONSET_LOSS_DB);
  const { status, nominal_dB, low_dB, high_dB } = band.onset;
  const [low, high] = [low_dB ?? NaN, high_dB ?? NaN];
  report.onsets.push({
    nominalHz: band.nominal_Hz,
    truthDb,
    status,
    errorDb: Math.abs((nominal_dB ?? NaN) - truthDb),
    widthDb: high - low,
    holdsTruth: truthDb >= low && truthDb <= high,
  });
}

/** Compression criteria alone: where no run lies within its tolerance of the criterion. */
function findWrongHighestRuns(set: DeviceSet, band: Band): string[] {
  const n = toThirdOctave(band);
  return band.limits.flatMap((limit) => {
    const criterionDb = limit.criterion.compression_dB;
    if (criterionDb === undefined || limit.kind !== "short-term") return [];
    const losses = LEVELS_DB.map((db) => truthLossDb(set, n, db));
    if (
      losses.some((loss) => Math.abs(loss - criterionDb) <= compressionTolerance(band.nominal_Hz))
    )
      return [];
    const firstFailed = losses.findIndex((loss) => loss > criterionDb);
    const truth = firstFailed === -1 ? LEVELS_DB.at(-1) : LEVELS_DB[firstFailed - 1];
    const met =
      limit.reached === true
        ? LEVELS_DB.findLast((db) => db <= (limit.nominal_dB ?? NaN))
        : LEVELS_DB.at(-1);
    return met === truth
      ? []
      : [`${band.nominal_Hz} Hz, ${criterionDb} dB: ${met} instead of ${truth}`];
  });
}

/** THD criteria: where no run lies within its tolerance of the criterion, and noise leaves none open. */
function findWrongThdRuns(set: DeviceSet, band: Band): string[] {
  const n = toThirdOctave(band);
  const plain = band.levels.filter((level) => level.variant === undefined);
  return band.limits.flatMap((limit) => {
    const percent = limit.criterion.thd_percent;
    if (percent === undefined || limit.kind !== "short-term" || limit.status === "not assessed")
      return [];
    const truths = plain.map(({ level_dB }) => {
      const ratios = [...(set.truth.get(level_dB)?.harmonics.values() ?? [])];
      return 100 * Math.hypot(...ratios.map((order) => order.get(n) ?? 0));
    });
    const close = plain.some(({ harmonics }, i) => {
      const floor = Math.hypot(...harmonics.map((h) => h.floor_percent ?? 0));
      const tolerance = distortionTolerance(0.15, toDb((truths[i] ?? NaN) / floor));
      return Math.abs(toDb((truths[i] ?? NaN) / percent)) <= tolerance;
    });
    if (close) return [];
    const firstFailed = truths.findIndex((truth) => truth > percent);
    const truth = firstFailed === -1 ? LEVELS_DB.at(-1) : LEVELS_DB[firstFailed - 1];
    const met =
      limit.status === "below lowest"
        ? undefined
        : LEVELS_DB.findLast((db) => db <= (limit.nominal_dB ?? NaN));
    return met === truth
      ? []
      : [`${band.nominal_Hz} Hz, ${percent} % THD: ${met} instead of ${truth}`];
  });
}

/** Readings that miss their tolerance times `factor`. */
export const missed = (readings: readonly Reading[], factor = 1): string[] =>
  readings
    .filter((r) => !(Math.abs(r.error) <= factor * r.tolerance))
    .map(
      (r) =>
        `${r.what}: off by ${r.error.toFixed(3)} dB, tolerance ${(factor * r.tolerance).toFixed(3)} dB`,
    );

/** Value under which a share of the numbers lies. */
export function quantile(values: readonly number[], share: number): number {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))] ?? NaN;
}
