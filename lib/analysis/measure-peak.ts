import type { Recording } from "./types";

/** So many successive samples at full scale are no music: the input clipped. */
const CLIPPED_SAMPLES = 3;

/** Peak and mean re full scale, and whether the recording clipped or, as float, went beyond. */
export function measurePeak({ samples, fullScale }: Recording): {
  peakDbfs: number;
  mean: number;
  clipped: boolean;
} {
  let high = 0;
  let low = 0;
  let sum = 0;
  for (let n = 0; n < samples.length; n += 1) {
    const value = samples[n]!;
    sum += value;
    if (value > high) high = value;
    else if (value < low) low = value;
  }
  const peak = Math.max(high, -low);
  return {
    peakDbfs: 20 * Math.log10(peak),
    mean: samples.length === 0 ? 0 : sum / samples.length,
    clipped: peak > 1 || (peak >= fullScale && staysAt(samples, fullScale, CLIPPED_SAMPLES)),
  };
}

/** Whether so many successive samples are at least of this size. */
function staysAt(samples: Recording["samples"], size: number, times: number): boolean {
  let run = 0;
  for (let n = 0; n < samples.length; n += 1) {
    run = Math.abs(samples[n]!) < size ? 0 : run + 1;
    if (run >= times) return true;
  }
  return false;
}
