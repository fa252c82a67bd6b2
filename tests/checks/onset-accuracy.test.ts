/**
 * Onset on random devices of known static laws, runs at 76, 86, 96 and 102 dB: error, coverage and width against
 * the table of docs/onset-notes.md section 3. One device alone, then whole loudspeakers whose bands share a law.
 */
import { describe, expect, it } from "vitest";
import { assessSeries } from "@/lib/analysis/assess-series";
import { groupShortTerm } from "@/lib/analysis/compression";
import { findOnsets } from "@/lib/analysis/onset/find-onsets";
import { planOnset } from "@/lib/analysis/onset/onset-plan";
import { ONSET_LOSS_DB } from "@/lib/analysis/onset/shapes";
import { readSteps } from "@/lib/analysis/onset/steps";
import { DEFAULT_CRITERIA } from "@/lib/series/series-schema";
import { measuredSeries, plainRuns, type RunPlan } from "../support/measured-series";
import { seededRandom, type SeededRandom } from "../support/seeded-random";
import {
  DEVICE_CLASSES,
  LOUDSPEAKERS,
  type DeviceClass,
  type StaticDevice,
} from "../support/static-devices";

const LEVELS_DB = [76, 86, 96, 102];
const DEVICES = 300;
const SHOWN_LOSS_DB = 0.36;
const settings = { criteria: [...DEFAULT_CRITERIA] };

interface Tally {
  errors: number[];
  widths: number[];
  covered: number;
  missed: number;
}

const emptyTally = (): Tally => ({ errors: [], widths: [], covered: 0, missed: 0 });

function count(tally: Tally, truthDb: number, low: number, nominal: number, high: number): void {
  tally.errors.push(Math.abs(nominal - truthDb));
  tally.widths.push(high - low);
  if (low <= truthDb && truthDb <= high) tally.covered++;
}

function share(values: readonly number[], part: number): number {
  const sorted = values.toSorted((a, b) => a - b);
  return sorted[Math.floor(part * (sorted.length - 1))] ?? Number.NaN;
}

function runsWithSteps(random: SeededRandom, stepDb: number): RunPlan[] {
  return plainRuns(...LEVELS_DB).map((run, k) => ({
    ...run,
    playedDb: run.levelDb + (k === 0 ? 0 : random.normal(stepDb)),
  }));
}

/** Bounds: median error, error of nine in ten, coverage, median width. Source: the table, rounded up to a tenth. */
interface Bounds {
  median: number;
  nineInTen: number;
  cover: number;
  width: number;
}

const plan = planOnset(LEVELS_DB);

function tallyDevices(name: DeviceClass, noiseDb: number, stepDb: number): Tally {
  const tally = emptyTally();
  for (let seed = 1; tally.errors.length + tally.missed < DEVICES; seed++) {
    const random = seededRandom(seed);
    const device = DEVICE_CLASSES[name](random);
    if (device.lossDb(102) < SHOWN_LOSS_DB) continue;
    const series = measuredSeries({
      device: {
        lossDb: (_b, drive) => device.lossDb(drive),
        harmonic: (_b, drive, order) => device.harmonic(drive, order),
      },
      runs: runsWithSteps(random, stepDb),
      random,
      noiseDb,
      bands: 1,
    });
    const groups = groupShortTerm(series);
    const [onset] = findOnsets(groups, readSteps(groups, groups[0], 1), 1, () => plan);
    if (onset?.status !== "found" || !onset.posterior) {
      tally.missed++;
      continue;
    }
    const { lowDb, medianDb, highDb } = onset.posterior.quantiles(ONSET_LOSS_DB, 102);
    count(tally, device.onsetDb, lowDb, medianDb, highDb);
  }
  return tally;
}

/** What falls short of the bounds, with its figure; empty where all is well. */
function shortfalls(tally: Tally, bounds: Bounds): string[] {
  const cover = tally.covered / tally.errors.length;
  const missed = tally.missed / (tally.errors.length + tally.missed);
  const rows: [string, number, boolean][] = [
    ["median error", share(tally.errors, 0.5), share(tally.errors, 0.5) <= bounds.median],
    ["nine in ten", share(tally.errors, 0.9), share(tally.errors, 0.9) <= bounds.nineInTen],
    ["coverage", cover, cover >= bounds.cover],
    ["median width", share(tally.widths, 0.5), share(tally.widths, 0.5) <= bounds.width],
    ["missed", missed, missed <= 0.02],
  ];
  return rows.flatMap(([name, value, fine]) => (fine ? [] : [`${name} ${value.toFixed(2)}`]));
}

const ALONE: Record<DeviceClass, Bounds> = {
  "hard limiter": { median: 0.4, nineInTen: 0.75, cover: 0.97, width: 3 },
  "limiter with a knee": { median: 0.8, nineInTen: 2.7, cover: 0.95, width: 3 },
  compressor: { median: 0.4, nineInTen: 1.0, cover: 0.95, width: 3.3 },
  "port-like": { median: 0.8, nineInTen: 2.2, cover: 0.9, width: 3 },
  "two paths": { median: 0.6, nineInTen: 2, cover: 0.9, width: 2.6 },
  "hard clip": { median: 0.05, nineInTen: 0.15, cover: 0.98, width: 1 },
  tanh: { median: 0.1, nineInTen: 0.4, cover: 0.95, width: 1.3 },
  cubic: { median: 0.1, nineInTen: 0.3, cover: 0.97, width: 1.2 },
};

describe.each([
  { noiseDb: 0.01, stepDb: 0 },
  { noiseDb: 0.03, stepDb: 0.04 },
])("one device alone, noise $noiseDb dB, steps off by $stepDb dB", ({ noiseDb, stepDb }) => {
  it.each(Object.keys(ALONE) as DeviceClass[])("%s, 300 devices", (name) => {
    expect(shortfalls(tallyDevices(name, noiseDb, stepDb), ALONE[name])).toEqual([]);
  });
});

const TOGETHER: Record<keyof typeof LOUDSPEAKERS, Bounds> = {
  "hard limiter": { median: 0.3, nineInTen: 0.5, cover: 0.97, width: 2.2 },
  "limiter with a knee": { median: 0.7, nineInTen: 2.2, cover: 0.95, width: 2.8 },
  compressor: { median: 0.3, nineInTen: 1.0, cover: 0.95, width: 2.3 },
  "bass limiter with a crossover": { median: 0.6, nineInTen: 1.5, cover: 0.93, width: 3.2 },
  port: { median: 0.3, nineInTen: 0.6, cover: 0.93, width: 1.6 },
  "bass that clips": { median: 0.06, nineInTen: 0.12, cover: 0.98, width: 1 },
  "bass that saturates": { median: 0.2, nineInTen: 0.8, cover: 0.95, width: 1.8 },
};
const SETS = 12;

describe.each([
  { noiseDb: 0.01, stepDb: 0 },
  { noiseDb: 0.03, stepDb: 0.04 },
])("whole loudspeakers, noise $noiseDb dB, steps off by $stepDb dB", ({ noiseDb, stepDb }) => {
  it.each(Object.keys(TOGETHER) as (keyof typeof LOUDSPEAKERS)[])("%s", (name) => {
    const tally = emptyTally();
    for (let seed = 1; seed <= SETS; seed++) {
      const random = seededRandom(seed);
      const of = LOUDSPEAKERS[name](random);
      const devices: StaticDevice[] = Array.from({ length: 27 }, (_, b) => of(b));
      const lossDb = (b: number, drive: number) => devices[b]?.lossDb(drive) ?? Number.NaN;
      const series = measuredSeries({
        device: { lossDb, harmonic: (b, drive, order) => devices[b]?.harmonic(drive, order) ?? 0 },
        runs: runsWithSteps(random, stepDb),
        random,
        noiseDb,
      });
      assessSeries(series, settings).bands.forEach(({ onset }, b) => {
        if (lossDb(b, 102) < SHOWN_LOSS_DB + 3 * stepDb) return;
        const { low_dB: low, nominal_dB: nominal, high_dB: high } = onset;
        if (low === null || nominal === null || high === null) tally.missed++;
        else count(tally, devices[b]?.onsetDb ?? Number.NaN, low, nominal, high);
      });
    }
    expect(shortfalls(tally, TOGETHER[name])).toEqual([]);
  });
});

describe("a ceiling with a hard knee that one run alone shows", () => {
  it.each([
    { levels: [80, 98], thetaDb: [84, 97] },
    { levels: [76, 86, 100], thetaDb: [87, 99] },
    { levels: LEVELS_DB, thetaDb: [97, 101] },
  ])("lies in the interval of every band, runs at $levels dB", ({ levels, thetaDb }) => {
    const [fromDb = 0, toDb = 0] = thetaDb;
    const outside: string[] = [];
    for (let seed = 1; seed <= 10; seed++) {
      const random = seededRandom(seed);
      const thresholds = Array.from({ length: 27 }, () => random.uniform(fromDb, toDb));
      const lossDb = (b: number, drive: number) => Math.max(0, drive - (thresholds[b] ?? 0));
      const series = measuredSeries({
        device: { lossDb, harmonic: () => 0 },
        runs: plainRuns(...levels),
        random,
        noiseDb: 0.01,
      });
      assessSeries(series, settings).bands.forEach(({ onset, nominal_Hz }, b) => {
        const truthDb = (thresholds[b] ?? Number.NaN) + ONSET_LOSS_DB;
        const [low, high] = [onset.low_dB ?? Number.NaN, onset.high_dB ?? Number.NaN];
        if (!(low <= truthDb && truthDb <= high + 0.02))
          outside.push(`seed ${seed}, ${nominal_Hz} Hz: ${truthDb.toFixed(2)}, ${low} to ${high}`);
      });
    }
    // 90 % of 270 is what the interval says of itself.
    expect(outside.length).toBeLessThanOrEqual(27);
  });
});

describe("a linear loudspeaker", () => {
  it("shows no onset in any band of 300 series", () => {
    const invented: string[] = [];
    for (let seed = 1; seed <= 300; seed++) {
      const random = seededRandom(seed);
      // The bass is noisy: 0.15 dB at 40 Hz, 0.02 dB from 160 Hz up.
      const noiseDb = (b: number, levelDb: number) =>
        0.02 + (levelDb < 80 ? 0.13 * Math.max(0, 1 - b / 6) : 0.02);
      const series = measuredSeries({
        device: { lossDb: () => 0, harmonic: (_b, drive) => 0.003 * 10 ** ((drive - 90) / 20) },
        runs: runsWithSteps(random, 0.05),
        random,
        noiseDb,
      });
      const { bands } = assessSeries(series, settings);
      for (const { onset, cause, nominal_Hz } of bands) {
        if (onset.status === "found" || onset.status === "below lowest" || cause !== "none") {
          if (onset.status !== "unresolved")
            invented.push(`seed ${seed}, ${nominal_Hz} Hz: ${onset.status}, ${cause}`);
        }
      }
    }
    expect(invented).toEqual([]);
  });
});
