import type { Recording } from "./types";

/** So many successive samples at full scale are no music: the input clipped. */
const CLIPPED_SAMPLES = 3;

/** Peak re full scale, and whether the recording clipped or, as float, went beyond. */
export function measurePeak({ samples, fullScale }: Recording): {
  peakDbfs: number;
  clipped: boolean;
} {
  let peak = 0;
  let run = 0;
  let longest = 0;
  for (let n = 0; n < samples.length; n += 1) {
    const size = Math.abs(samples[n]!);
    if (size > peak) peak = size;
    if (size < fullScale) {
      run = 0;
      continue;
    }
    run += 1;
    if (run > longest) longest = run;
  }
  return { peakDbfs: 20 * Math.log10(peak), clipped: longest >= CLIPPED_SAMPLES || peak > 1 };
}
