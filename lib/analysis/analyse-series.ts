/** The whole engine: a series and its recordings in, the result out. No I/O of its own; the same input gives the same result. */
import type { Result } from "../result/result-schema";
import { toResult } from "../result/to-result";
import type { Series } from "../series/series-schema";
import { assessSeries } from "./assess-series";
import { Plans } from "./cell-power";
import { measureSeries, type MeasureOptions, type SeriesSource } from "./measure-series";

/**
 * @param source is asked for one file at a time, so that memory follows the longest recording.
 * @returns numbers rounded as they are printed; warnings in the tester's words.
 * @throws AnalysisError where nothing can be computed; FileError from the source.
 */
export async function analyseSeries(
  series: Series,
  source: SeriesSource,
  options: MeasureOptions = {},
): Promise<Result> {
  const plans = options.plans ?? new Plans();
  const { measured, warnings } = await measureSeries(series, source, { ...options, plans });
  options.onProgress?.({ file: null, stage: "onset", done: 0, total: 1 });
  const assessment = assessSeries(measured, series.settings, plans);
  options.onProgress?.({ file: null, stage: "onset", done: 1, total: 1 });
  return toResult(series, measured, assessment, warnings);
}
