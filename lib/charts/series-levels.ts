/** The levels of a series, ranked: what gives every run its colour. */
import type { BandLevel } from "../result/result-schema";
import { levelRamp, type LevelPaint } from "./tokens";

export interface SeriesLevel {
  readonly levelDb: number;
  /** From the quietest, 0. */
  readonly rank: number;
  readonly paint: LevelPaint;
}

/** @param levelsDb levels of any runs, in any order, repeated or not. @returns each once, quietest first. */
export function toSeriesLevels(levelsDb: readonly number[]): SeriesLevel[] {
  const distinct = [...new Set(levelsDb)].sort((a, b) => a - b);
  const ramp = levelRamp(distinct.length);
  return distinct.flatMap((levelDb, rank) => {
    const paint = ramp[rank];
    return paint === undefined ? [] : [{ levelDb, rank, paint }];
  });
}

type RunLike = Pick<BandLevel, "level_dB" | "kind" | "variant">;

/** Runs that the wall and the limits are drawn from: short-term, without a variant. */
export const isPlain = (run: RunLike): boolean =>
  run.kind === "short-term" && run.variant === undefined;

/** @returns the levels of the plain short-term runs. */
export const listPlainLevels = (runs: readonly RunLike[]): SeriesLevel[] =>
  toSeriesLevels(runs.filter(isPlain).map((run) => run.level_dB));

/** Mean of the values that are there; null where none is. */
export function meanOf(values: readonly (number | null | undefined)[]): number | null {
  const there = values.filter((value) => value !== null && value !== undefined);
  return there.length === 0 ? null : there.reduce((sum, value) => sum + value, 0) / there.length;
}

/** The highest of the values that are there; null where none is. */
export function findHighest(values: readonly (number | null | undefined)[]): number | null {
  const there = values.filter((value) => value !== null && value !== undefined);
  return there.length === 0 ? null : Math.max(...there);
}
