/** Standard uncertainties of level differences (docs/domain.md section 10). */

/** A printed uncertainty is the standard one times this. */
export const COVERAGE_FACTOR = 2;

/** Repeats known from this many degrees of freedom elsewhere weigh beside a band's own scatter. */
const POOLED_FREEDOM = 3;

/** Gains of one group of repeats. */
export interface RepeatGroup {
  /** [repeats][bands] level minus drive, dB; NaN where there is no value. */
  gainDb: Float64Array[];
}

/**
 * Standard deviation of a single run as the repeats show it.
 *
 * Each band's own scatter is pulled towards that of all bands: two or three takes alone say little.
 *
 * @param groups groups of repeats of a series; those of one run say nothing.
 * @param bands number of bands.
 * @returns [bands] dB, or null where nothing was repeated.
 */
export function repeatSigmaDb(groups: readonly RepeatGroup[], bands: number): Float64Array | null {
  const squares = new Float64Array(bands);
  const freedom = new Float64Array(bands);
  for (const { gainDb } of groups) {
    for (let b = 0; b < bands; b++) {
      const values = gainDb
        .map((run) => run[b] ?? Number.NaN)
        .filter((value) => Number.isFinite(value));
      if (values.length < 2) continue;
      const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
      squares[b] = (squares[b] ?? 0) + values.reduce((sum, value) => sum + (value - mean) ** 2, 0);
      freedom[b] = (freedom[b] ?? 0) + values.length - 1;
    }
  }
  const allFreedom = freedom.reduce((a, b) => a + b, 0);
  if (allFreedom === 0) return null;
  const pooled = squares.reduce((a, b) => a + b, 0) / allFreedom;
  return Float64Array.from(squares, (square, b) =>
    Math.sqrt((square + POOLED_FREEDOM * pooled) / ((freedom[b] ?? 0) + POOLED_FREEDOM)),
  );
}

/**
 * Uncertainty of the mean of `noiseDb.length` takes: noise, or what the repeats show, whichever is more.
 *
 * @param noiseDb [takes] standard uncertainty of each take from noise, dB.
 * @param singleDb standard deviation of one take from repeats, dB; null where nothing was repeated.
 */
export function meanSigmaDb(noiseDb: readonly number[], singleDb: number | null): number {
  const noise = Math.hypot(...noiseDb) / noiseDb.length;
  return singleDb === null ? noise : Math.max(noise, singleDb / Math.sqrt(noiseDb.length));
}
