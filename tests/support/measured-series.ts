/** Measured series of exactly known devices, made by hand: what the front of the engine would hand over. */
import { thirdOctaves } from "@/lib/analysis/bands";
import type { BandMeasure, MeasuredRun, MeasuredSeries } from "@/lib/analysis/types";
import type { Quality } from "@/lib/result/result-schema";
import type { Conditioning } from "@/lib/series/series-schema";
import type { RunKind } from "@/lib/series/vocabulary";
import type { SeededRandom } from "./seeded-random";

export interface Device {
  /** Linear gain of band b, dB: level minus drive; 0 where left out. */
  gainDb?: (b: number) => number;
  /** Loss of band b at a drive, dB. */
  lossDb: (b: number, driveDb: number, run: RunPlan) => number;
  /** Amplitude of a harmonic of band b re its fundamental, as played; 0 where left out. */
  harmonic?: (b: number, driveDb: number, order: number) => number;
}

export interface RunPlan {
  levelDb: number;
  /** What was really played, where the player's step is off; levelDb where left out. */
  playedDb?: number;
  kind?: RunKind;
  variant?: string;
  conditioning?: Conditioning;
  file?: string;
}

export interface SeriesPlan {
  device: Device;
  runs: readonly RunPlan[];
  random?: SeededRandom;
  /** Standard uncertainty of every level, dB: drawn where there is a random source, stated always. */
  noiseDb?: number | ((b: number, levelDb: number) => number);
  /** Floor of a harmonic re the fundamental, amplitude. */
  floor?: number;
  tuningHz?: number;
  splValid?: boolean;
  topHz?: number;
  /** Only the first so many bands. */
  bands?: number;
}

export const plainRuns = (...levelsDb: number[]): RunPlan[] =>
  levelsDb.map((levelDb) => ({ levelDb }));

const ORDERS = [2, 3, 4, 5, 6, 7, 8, 9];

export function measuredSeries(plan: SeriesPlan): MeasuredSeries {
  const all = thirdOctaves(20, 20_000);
  const bands = all.slice(0, plan.bands ?? all.length);
  const topHz = plan.topHz ?? 20_000;
  const gridHz = Float64Array.from({ length: 240 }, (_, i) => 20 * 10 ** ((i + 0.5) / 80));
  return {
    gridHz,
    bands,
    runs: plan.runs.map((run) => toRun(plan, run, gridHz, bands, topHz)),
    splValid: plan.splValid ?? true,
    topHz,
    tuningHz: plan.tuningHz,
    sweep: { startHz: 20, stopHz: 20_000, rateConstantS: 1.6 },
  };
}

function toRun(
  plan: SeriesPlan,
  run: RunPlan,
  gridHz: Float64Array,
  bands: MeasuredSeries["bands"],
  topHz: number,
): MeasuredRun {
  const { device } = plan;
  const kind = run.kind ?? "short-term";
  const driveDb = run.playedDb ?? run.levelDb;
  const levels = bands.map(
    (_, b) => (device.gainDb?.(b) ?? 0) + driveDb - device.lossDb(b, driveDb, run),
  );
  const levelOf = (b: number): number => levels[b] ?? Number.NaN;
  const firstHz = bands[0]?.exactHz ?? 40;
  return {
    file:
      run.file ??
      `${run.levelDb}${kind === "short-term" ? "" : `-${kind}`}${run.variant ? `-${run.variant}` : ""}.wav`,
    levelDb: run.levelDb,
    driveDb: run.levelDb,
    kind,
    variant: run.variant,
    conditioning: run.conditioning,
    measuredLevelDb: run.levelDb,
    latencyS: 0,
    driftPpm: 0,
    peakDbfs: -20,
    clipped: false,
    snrDb: 60,
    splDb: Float64Array.from(gridHz, () => Number.NaN),
    floorDb: Float64Array.from(gridHz, () => Number.NaN),
    levelCurveDb: Float64Array.from(gridHz, (hz) => {
      const at = Math.min(Math.max(10 * Math.log10(hz / firstHz), 0), bands.length - 1);
      const low = Math.floor(at);
      const high = Math.min(low + 1, bands.length - 1);
      return levelOf(low) + (at - low) * (levelOf(high) - levelOf(low));
    }),
    harmonics: [],
    thdPercent: Float64Array.from(gridHz, () => Number.NaN),
    thdQuality: Array.from(gridHz, () => null),
    thdOrders: Array.from(gridHz, () => ""),
    bands: bands.map((band, b): BandMeasure => {
      const noise =
        typeof plan.noiseDb === "function" ? plan.noiseDb(b, run.levelDb) : (plan.noiseDb ?? 0.01);
      const levelDb = levelOf(b) + (plan.random?.normal(noise) ?? 0);
      const harmonics = ORDERS.map((order) =>
        toHarmonic(plan, b, driveDb, order, order * band.exactHz <= topHz),
      );
      const present = harmonics.filter(
        ({ quality }) => quality === "measured" || quality === "uncertain",
      );
      return {
        levelDb,
        splDb: (plan.splValid ?? true) ? levelDb : Number.NaN,
        sigmaDb: noise,
        snrDb: 60,
        harmonics,
        thdPercent:
          present.length === 0
            ? Number.NaN
            : 100 * Math.sqrt(present.reduce((sum, { ratio }) => sum + ratio, 0)),
        thdQuality: thdQuality(
          present.map(({ quality }) => quality),
          harmonics.some(({ quality }) => quality !== null),
        ),
        thdOrders: present.length === 0 ? "" : "2-9",
      };
    }),
  };
}

function thdQuality(present: (Quality | null)[], any: boolean): Quality | null {
  if (!any) return null;
  if (present.includes("measured")) return "measured";
  return present.length > 0 ? "uncertain" : "noise";
}

function toHarmonic(
  { device, floor = 1e-4 }: SeriesPlan,
  b: number,
  driveDb: number,
  order: number,
  exists: boolean,
): BandMeasure["harmonics"][number] {
  if (!exists)
    return {
      order,
      ratio: Number.NaN,
      floorRatio: Number.NaN,
      quality: null,
      inputRatio: Number.NaN,
    };
  const ratio = (device.harmonic?.(b, driveDb, order) ?? 0) ** 2;
  const overDb = 10 * Math.log10(ratio / floor ** 2);
  const quality: Quality = overDb >= 14 ? "measured" : overDb >= 6 ? "uncertain" : "noise";
  const at = b + 10 * Math.log10(order);
  const gain = device.gainDb ?? (() => 0);
  const respondDb = gain(Math.round(at)) - gain(b);
  return {
    order,
    ratio,
    floorRatio: floor ** 2,
    quality,
    inputRatio: ratio / 10 ** (respondDb / 10),
  };
}
