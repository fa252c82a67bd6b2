/** The scales of every figure: bands of equal pitch, decibels upwards, logarithms. */
import { round2 } from "./figure";

/** Bands of equal width side by side; frequencies between them fall where the logarithm says. */
export interface BandScale {
  readonly count: number;
  readonly pitch: number;
  readonly width: number;
  /** Left edge of a band's place, px from the plot's left edge. */
  left(index: number): number;
  centre(index: number): number;
  /** Any frequency; unbounded outside the bands. */
  toX(frequencyHz: number): number;
  /** Index of the band under x, kept within the bands. */
  indexAt(x: number): number;
  toHz(x: number): number;
}

/**
 * @param exactHz [bands] exact mid-band frequencies, third octaves upwards without holes.
 * @param pitch px from band to band.
 */
export function toBandScale(exactHz: readonly number[], pitch: number): BandScale {
  const first = exactHz[0] ?? 1000;
  const offset = 0.5 - 10 * Math.log10(first / 1000);
  const count = exactHz.length;
  return {
    count,
    pitch,
    width: round2(count * pitch),
    left: (index) => round2(index * pitch),
    centre: (index) => round2((index + 0.5) * pitch),
    toX: (frequencyHz) => pitch * (10 * Math.log10(frequencyHz / 1000) + offset),
    indexAt: (x) => Math.min(count - 1, Math.max(0, Math.floor(x / pitch))),
    toHz: (x) => 1000 * 10 ** ((x / pitch - offset) / 10),
  };
}

/** Octave bands that carry a label; phones show every other one. */
const OCTAVES_HZ = [16, 31.5, 63, 125, 250, 500, 1000, 2000, 4000, 8000, 16_000, 31_500];
export const isLabelledBand = (nominalHz: number, sparse = false): boolean => {
  const at = OCTAVES_HZ.indexOf(nominalHz);
  return at >= 0 && (!sparse || at % 2 === 0);
};

/** A straight scale that grows upwards on screen. */
export interface DbScale {
  readonly minDb: number;
  readonly maxDb: number;
  readonly height: number;
  toY(levelDb: number): number;
  /** Whole tens in the range. */
  readonly ticksDb: readonly number[];
}

export function toDbScale(minDb: number, maxDb: number, height: number): DbScale {
  const ticksDb: number[] = [];
  for (let tick = Math.ceil(minDb / 10) * 10; tick <= maxDb; tick += 10) ticksDb.push(tick);
  return {
    minDb,
    maxDb,
    height,
    ticksDb,
    toY: (levelDb) => round2(((maxDb - levelDb) / (maxDb - minDb)) * height),
  };
}

const WALL_MIN_DB = 60;
const WALL_MAX_DB = 106;

/**
 * The wall's range: 60 to 106 dB, grown by tens until every value fits with a little air above;
 * never shrunk, so that walls can be compared by eye.
 * @param levelsDb every level that will be drawn, expected ones too.
 */
export function toWallRange(levelsDb: readonly number[]): { minDb: number; maxDb: number } {
  let minDb = WALL_MIN_DB;
  let maxDb = WALL_MAX_DB;
  const lowest = Math.min(...levelsDb);
  const highest = Math.max(...levelsDb);
  while (Number.isFinite(lowest) && lowest < minDb + 1) minDb -= 10;
  while (Number.isFinite(highest) && highest > maxDb - 1) maxDb += 10;
  return { minDb, maxDb };
}

/** A logarithmic scale that grows upwards on screen. */
export interface LogScale {
  toY(value: number): number;
}

export function toLogScale(min: number, max: number, height: number): LogScale {
  const decades = Math.log10(max / min);
  return { toY: (value) => round2((1 - Math.log10(value / min) / decades) * height) };
}
