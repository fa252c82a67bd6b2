import { medianSorted } from "simple-statistics";

/** Middle of the values, as most of them have it; NaN of none. */
export function median(values: ArrayLike<number>): number {
  if (values.length === 0) return Number.NaN;
  return medianSorted([...Float64Array.from(values).sort()]);
}
