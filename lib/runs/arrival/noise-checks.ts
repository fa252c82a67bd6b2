/** What the silence around a sweep, or a recording of the room, gives away: hum, and a gain that rides by itself. */
import type { Plans } from "../../analysis/cell-power";
import { measureNoise } from "../../analysis/noise-floor";
import { sayDb } from "../../analysis/say";
import type { Recording } from "../../analysis/types";
import type { ArrivalCheck } from "../arrival-schema";
import { AGAIN_REMEDY, passed, speaking } from "./check";
import { round } from "./file-facts";
import { median } from "./median";
import type { SweepTimeline } from "./sweep-timeline";

const MAINS_HZ = [50, 60] as const;
const HUM_LINES = 8;
const HUM_LIMIT_DB = 12;
/** So many lines of one mains frequency are no coincidence. */
const FEWEST_LINES = 2;
const SHORTEST_HUM_S = 0.6;
const LONGEST_SILENCE_S = 2;
const GUARD_S = 0.02;

type Samples = Recording["samples"];

/** The silence before the sweep, at most 2 s of it. */
export function toSilenceBefore(
  { samples, rateHz }: Recording,
  { startS }: SweepTimeline,
): Samples {
  const end = Math.max(0, Math.round((startS - GUARD_S) * rateHz));
  return samples.subarray(Math.max(0, end - LONGEST_SILENCE_S * rateHz), end);
}

/** @returns null where there is too little to tell. */
export function checkHum(silence: Samples, rateHz: number, plans: Plans): ArrivalCheck | null {
  if (silence.length < SHORTEST_HUM_S * rateHz) return null;
  const noise = measureNoise(silence, rateHz, plans);
  if (noise === null) return null;
  const { byFrequency, binHz } = noise;
  const density = (k: number): number => (byFrequency[k] ?? 0) / Math.max(1, k);
  const toLineDb = (hz: number): number => {
    const middle = Math.round(hz / binHz);
    const beside: number[] = [];
    // Hann spreads a line over two bins to either side; the next line is far.
    const far = Math.floor((0.45 * 50) / binHz);
    for (let d = 3; d <= far; d += 1) beside.push(density(middle - d), density(middle + d));
    const line = Math.max(density(middle - 1), density(middle), density(middle + 1));
    return 10 * Math.log10(line / median(beside));
  };
  const found = MAINS_HZ.map((hz) => {
    const lines = Array.from({ length: HUM_LINES }, (_, i) => toLineDb((i + 1) * hz));
    const over = lines.filter((db) => db > HUM_LIMIT_DB);
    return { hz, count: over.length, mostDb: Math.max(...lines) };
  }).sort((a, b) => b.count - a.count);
  const [worst] = found;
  const most = worst === undefined || !Number.isFinite(worst.mostDb) ? 0 : worst.mostDb;
  const figure = { value: round(most, 1), limit: HUM_LIMIT_DB, unit: "dB" };
  if (worst === undefined || worst.count < FEWEST_LINES) {
    return passed("hum", {
      title: "no hum",
      finding: `No mains lines stand over ${HUM_LIMIT_DB} dB out of the noise.`,
      figure: null,
    });
  }
  return speaking("hum", "warn", {
    title: "mains hum",
    finding: `Hum of ${worst.hz} Hz and its multiples stands up to ${sayDb(most, 0)} out of the noise.`,
    spoils: "Low harmonics that fall on these frequencies cannot be told from it.",
    remedy:
      "Look for an earth loop: feed player, recorder and loudspeaker from one socket, or use balanced cables. The calibration stands as long as the input gain does.",
    figure,
  });
}

const HISS_HZ = [2000, 8000] as const;
const GAIN_LIMIT_DB = 4;
const AFTER_GUARD_S = 0.2;
const PIECE_S = 0.05;
const FEWEST_PIECES = 3;

/**
 * A recorder that sets its own gain turns down for the sweep, so the hiss after it is lower than before.
 * A room's decay makes it higher, which says nothing.
 * @returns null where there is too little silence, or no hiss.
 */
export function checkAutomaticGain(
  recording: Recording,
  timeline: SweepTimeline,
  plans: Plans,
): ArrivalCheck | null {
  const { samples, rateHz } = recording;
  const after = Math.round((timeline.endS + AFTER_GUARD_S) * rateHz);
  const beforeHiss = toHiss(toSilenceBefore(recording, timeline), rateHz, plans);
  const afterHiss = toHiss(samples.subarray(after, after + rateHz), rateHz, plans);
  if (beforeHiss === null || afterHiss === null || !(beforeHiss > 0)) return null;
  const changeDb = 10 * Math.log10(beforeHiss / afterHiss);
  const figure = Number.isFinite(changeDb)
    ? { value: round(changeDb, 1), limit: GAIN_LIMIT_DB, unit: "dB" }
    : null;
  if (changeDb <= GAIN_LIMIT_DB) {
    return passed("automatic-gain", {
      title: "steady gain",
      finding: "The hiss before and after the sweep shows no change of gain.",
      figure,
    });
  }
  return speaking("automatic-gain", "warn", {
    title: "gain rides by itself",
    finding: `The hiss after the sweep is ${Number.isFinite(changeDb) ? sayDb(changeDb, 0) : "gone"}${Number.isFinite(changeDb) ? " lower than" : " that was there"} before it: the recorder seems to set its own gain.`,
    spoils: "Levels would follow the recorder's gain, and look like compression.",
    remedy: `Switch off automatic gain, limiter and noise reduction in the recorder and its driver, record the calibrator again and repeat every level. If a noise in the room did it: ${AGAIN_REMEDY.charAt(0).toLowerCase()}${AGAIN_REMEDY.slice(1)}`,
    figure,
  });
}

/** Power from 2 to 8 kHz: the middle one of short pieces, so that a single noise does not count; null of too few. */
export function toHiss(silence: Samples, rateHz: number, plans: Plans): number | null {
  const length = Math.round(2 * PIECE_S * rateHz);
  const powers: number[] = [];
  for (let from = 0; from + length <= silence.length; from += length / 2) {
    const noise = measureNoise(silence.subarray(from, from + length), rateHz, plans);
    if (noise === null) continue;
    const [low, high] = HISS_HZ.map((hz) => Math.round(hz / noise.binHz));
    let sum = 0;
    for (let k = low ?? 1; k <= (high ?? 0); k += 1) sum += (noise.byFrequency[k] ?? 0) / k;
    powers.push(sum);
  }
  return powers.length < FEWEST_PIECES ? null : median(powers);
}
