/**
 * An invented result that obeys the schema: a two-way loudspeaker whose protection holds the bass
 * back, whose tweeter warms up, and whose harmonics sink into the noise at the lowest level.
 * For tests of figures and screens; no number in it was measured.
 */
import type { Criterion } from "../../lib/series/series-schema";
import { resultSchema, type Quality, type Result } from "../../lib/result/result-schema";

const NOMINAL_HZ = [
  40, 50, 63, 80, 100, 125, 160, 200, 250, 315, 400, 500, 630, 800, 1000, 1250, 1600, 2000, 2500,
  3150, 4000, 5000, 6300, 8000, 10_000, 12_500, 16_000,
];
export const SAMPLE_LEVELS_DB = [76, 86, 96, 102] as const;
const TOP_HZ = 20_000;
const ORDERS = [2, 3, 4, 5, 6, 7, 8, 9];

const round = (value: number, decimals = 2): number => Number(value.toFixed(decimals));
const exactHz = (index: number): number => 1000 * 10 ** ((index - 14) / 10);

/** Response over the run's level, dB: gentle ripple, rolled off at the bottom. */
const responseDb = (hz: number): number =>
  0.9 * Math.sin(Math.log(hz) * 2.3) +
  0.5 * Math.sin(Math.log(hz) * 5.1) -
  10 * Math.log10(1 + (38 / hz) ** 6);

/** Drive at which a limiter starts to hold the output, and how much of a further decibel it takes. */
function lawOf(hz: number): { thresholdDb: number; taken: number } | null {
  if (hz < 45) return { thresholdDb: 95, taken: 0.4 };
  if (hz < 57) return { thresholdDb: 91, taken: 0.8 };
  if (hz < 71) return { thresholdDb: 92.5, taken: 0.85 };
  if (hz < 90) return { thresholdDb: 98.5, taken: 0.5 };
  if (hz > 2800 && hz < 9000) return { thresholdDb: 98.8, taken: 0.5 };
  return null;
}

/** dB lost at a drive: a limiter with a rounded knee 1.2 dB wide. */
function lossDb(hz: number, driveDb: number): number {
  const law = lawOf(hz);
  if (law === null) return 0.015 * Math.sin(hz);
  const over = driveDb - law.thresholdDb;
  return law.taken * 0.6 * Math.log1p(Math.exp(over / 0.6));
}

/** Drive at which so much is lost; null where that lies above the loudest run. */
function driveAtLoss(hz: number, lost: number): number | null {
  if (lossDb(hz, 102) < lost) return null;
  let low = 60;
  let high = 102;
  for (let turn = 0; turn < 40; turn += 1) {
    const middle = (low + high) / 2;
    if (lossDb(hz, middle) < lost) low = middle;
    else high = middle;
  }
  return high;
}

/** Harmonic in percent of the fundamental, before the noise takes it. */
const harmonicPercent = (order: number, hz: number, levelDb: number): number => {
  const bump =
    Math.exp(-(Math.log2(hz / 2100) ** 2) * 3) * 1.1 + Math.exp(-(Math.log2(hz / 55) ** 2)) * 1.2;
  const ripple = 1 + 0.25 * Math.sin(Math.log(hz) * 9 + order);
  return (0.28 + bump) * ripple * 0.5 ** (order - 2) * 10 ** ((levelDb - 96) / 34);
};

const floorPercent = (hz: number, levelDb: number): number =>
  (0.008 + 0.09 * Math.exp(-hz / 60) + 0.006 * (hz / 16_000) ** 2) * 10 ** ((96 - levelDb) / 20);

function qualityOf(percent: number, floor: number): Quality {
  const over = 20 * Math.log10(percent / floor);
  if (over >= 14) return "measured";
  return over >= 6 ? "uncertain" : "noise";
}

const harmonicsAt = (hz: number, levelDb: number, edgeHz = hz) =>
  ORDERS.map((order) => {
    const percent = harmonicPercent(order, hz, levelDb);
    const floor = floorPercent(hz, levelDb);
    const quality = order * edgeHz > TOP_HZ ? null : qualityOf(percent, floor);
    return {
      order,
      percent: quality === null || quality === "noise" ? null : round(percent, 4),
      quality,
      floor_percent: quality === null ? null : round(floor, 4),
    };
  });

function thdOf(harmonics: ReturnType<typeof harmonicsAt>): {
  percent: number | null;
  quality: Quality | null;
  orders: string;
} {
  const seen = harmonics.filter((h) => h.percent !== null);
  const last = seen.at(-1);
  if (last === undefined)
    return { percent: null, quality: harmonics[0]?.quality ?? null, orders: "" };
  const percent = round(Math.sqrt(seen.reduce((sum, h) => sum + (h.percent ?? 0) ** 2, 0)), 4);
  const quality = seen.some((h) => h.quality === "measured") ? "measured" : "uncertain";
  return { percent, quality, orders: seen.length === 1 ? "2" : `2-${last.order}` };
}

const GRID_HZ = Array.from(
  { length: 216 },
  (_, at) => 1000 * 10 ** (((at - 112 + 0.5) * 3) / 240),
).filter((hz) => hz > 35.4 && hz < 17_800);

const CONDITIONING = { minutes: 10, crest_dB: 12, rms_re_sweep_dB: -9, gap_s: 0.5 };
const thermalDb = (hz: number): number =>
  hz > 1500 ? 1.2 * Math.min(1, Math.log2(hz / 1500)) : 0.04;

const RUNS = [
  ...SAMPLE_LEVELS_DB.map((level) => ({
    level,
    kind: "short-term" as const,
    file: `osier8a_${level}_short.wav`,
  })),
  { level: 102, kind: "long-term" as const, file: "osier8a_102_long.wav" },
  { level: 76, kind: "closing" as const, file: "osier8a_76_closing.wav" },
];

function toRun({ level, kind, file }: (typeof RUNS)[number]) {
  const lost = (hz: number): number =>
    lossDb(hz, level) + (kind === "long-term" ? thermalDb(hz) : 0);
  const curves = GRID_HZ.map((hz) => harmonicsAt(hz, level));
  const spl = GRID_HZ.map((hz) => round(level + responseDb(hz) - lost(hz)));
  const thd = curves.map(thdOf);
  return {
    file,
    level_dB: level,
    drive_dB: level,
    kind,
    ...(kind === "long-term" ? { conditioning: CONDITIONING } : {}),
    measured_level_dB: round(level + 0.04),
    latency_s: 0.3121,
    drift_ppm: 3.1,
    peak_dBFS: level - 107.4,
    clipped: false,
    snr_dB: level - 35,
    spl_dB: spl,
    floor_dB: GRID_HZ.map((hz) => round(22 + 200 / hz)),
    harmonics: ORDERS.map((order, nth) => ({
      order,
      spl_dB: curves.map((at, i) => {
        const percent = at[nth]?.percent ?? null;
        return percent === null ? null : round((spl[i] ?? 0) + 20 * Math.log10(percent / 100));
      }),
      floor_dB: curves.map((at, i) => {
        const floor = at[nth]?.floor_percent ?? null;
        return floor === null ? null : round((spl[i] ?? 0) + 20 * Math.log10(floor / 100));
      }),
      quality: curves.map((at) => at[nth]?.quality ?? null),
    })),
    thd_percent: thd.map((t) => t.percent),
    thd_quality: thd.map((t) => t.quality),
    thd_orders: thd.map((t) => t.orders),
  };
}

const toLimit = <Numbers extends object>(criterion: Criterion, numbers: Numbers) => ({
  criterion,
  kind: "short-term" as const,
  ...numbers,
});

function toBand(nominal: number, index: number) {
  const hz = exactHz(index);
  const sound = (drive: number): number => round(drive + responseDb(hz) - lossDb(hz, drive));
  const levels = RUNS.map(({ level, kind, file }) => {
    const harmonics = harmonicsAt(hz, level, hz * 10 ** (1 / 20));
    const thd = thdOf(harmonics);
    const lost = lossDb(hz, level) - lossDb(hz, 76) + (kind === "long-term" ? thermalDb(hz) : 0);
    return {
      file,
      level_dB: level,
      kind,
      spl_dB: round(level + responseDb(hz) - lost),
      expected_dB: round(level + responseDb(hz)),
      compression_dB: round(lost),
      uncertainty_dB: 0.06,
      snr_dB: level - 35,
      thd_percent: thd.percent,
      thd_quality: thd.quality,
      thd_orders: thd.orders,
      harmonics,
    };
  });
  const found = driveAtLoss(hz, 1 / 3);
  const open = { low_dB: 102, high_dB: 102, nominal_dB: 102, spl_dB: sound(102) };
  const limitAt = (drive: number | null) =>
    drive === null
      ? { status: "not reached" as const, ...open, bound_by: null, reached: false }
      : {
          status: "found" as const,
          nominal_dB: round(drive),
          low_dB: round(drive - 0.6),
          high_dB: round(drive + 0.5),
          spl_dB: sound(drive),
          bound_by: "compression" as const,
          reached: true,
        };
  const tooHigh = {
    status: "not assessed" as const,
    nominal_dB: null,
    low_dB: null,
    high_dB: null,
    spl_dB: null,
    bound_by: null,
    reached: null,
    reason: "harmonics above 20 kHz",
  };
  const beyond = hz * 10 ** (1 / 20) > TOP_HZ / 2;
  const cause =
    found === null
      ? ("none" as const)
      : hz < 45
        ? ("port" as const)
        : hz < 71
          ? ("limiter" as const)
          : ("compressor" as const);
  const drives = Array.from({ length: 27 }, (_, at) => 76 + at);
  return {
    nominal_Hz: nominal,
    exact_Hz: round(hz, 4),
    levels,
    onset:
      found === null
        ? {
            status: "not reached" as const,
            nominal_dB: 102,
            low_dB: null,
            high_dB: null,
            spl_dB: null,
            ceiling_dB: null,
          }
        : {
            status: "found" as const,
            nominal_dB: round(found),
            low_dB: round(found - 0.7),
            high_dB: round(found + 0.6),
            spl_dB: sound(found),
            ceiling_dB: (lawOf(hz)?.taken ?? 0) > 0.7 ? sound(102) : null,
          },
    cause,
    cause_inferred: false,
    cause_reason:
      found === null
        ? "nothing was lost up to the 102 dB run"
        : "the output stops rising while distortion does not",
    evidence: {
      slope: found === null ? 1 : round(1 - (lawOf(hz)?.taken ?? 0)),
      odd_ratio: 0.04,
      growth_dB: 0.3,
      growth_needed_dB: 3,
      law: found === null ? "linear" : "hard limiter",
      law_curve: {
        expected_dB: drives.map((d) => round(d + responseDb(hz))),
        measured_dB: drives.map(sound),
      },
      next_run: found === null ? null : { level_dB: 92, width_now_dB: 2.5, width_expected_dB: 0.9 },
    },
    long_term: [
      {
        level_dB: 102,
        total_dB: round(lossDb(hz, 102) + thermalDb(hz)),
        thermal_dB: round(thermalDb(hz)),
        uncertainty_dB: 0.04,
        lower_bound: hz > 1000,
        cause: hz > 1700 ? ("thermal" as const) : ("none" as const),
      },
    ],
    limits: [
      ...[3, 10].map((thd_percent) => toLimit({ thd_percent }, beyond ? tooHigh : limitAt(null))),
      ...[1, 3].map((compression_dB) =>
        toLimit({ compression_dB }, limitAt(driveAtLoss(hz, compression_dB))),
      ),
    ],
  };
}

/** @returns the same result at every call, fresh to be changed by a test. */
export function makeSampleResult(): Result {
  return resultSchema.parse({
    engine: { name: "tidemark", version: "1.0.0" },
    settings: {},
    environment: "anechoic",
    distance_m: 1,
    spl_valid: true,
    grid_Hz: GRID_HZ.map((hz) => round(hz, 3)),
    runs: RUNS.map(toRun),
    bands: NOMINAL_HZ.map(toBand),
    shape: RUNS.map(({ level, kind, file }) => ({
      file,
      level_dB: level,
      kind,
      broadband_dB: 0.3,
      excess_dB: 8,
      excess_Hz: 50,
    })),
    headline: [
      {
        criterion: { compression_dB: 3 },
        from_Hz: 80,
        to_Hz: 16_000,
        spl_dB: 101,
        at_least: true,
        first: { status: "found", nominal_Hz: 50, spl_dB: 93, nominal_dB: 94.5, ceiling: true },
      },
    ],
    programme: [],
    warnings: [],
  });
}
