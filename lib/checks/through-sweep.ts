/** A memoryless device played and measured as any loudspeaker: our sweep, the whole engine, no noise. */
import { measureSeries } from "../analysis/measure-series";
import { synthesiseStimulus } from "../analysis/sweep";
import type { BandMeasure } from "../analysis/types";
import { seriesSchema } from "../series/series-schema";

const RATE_HZ = 96_000;
const LENGTH_S = 4;
const SILENCE_S = 0.3;

export interface SweptBand {
  /** Amplitude of the fundamental. */
  first: number;
  /** Amplitude of an order; NaN where it is not measured. */
  harmonic: (order: number) => number;
}

/** @param bandHz nominal. Low against the sample rate, so that what folds back is far away. */
export async function measureThroughSweep(
  law: (x: number) => number,
  bandHz: number,
): Promise<SweptBand> {
  const shape = {
    startHz: 20,
    stopHz: 20_000,
    lengthS: LENGTH_S,
    rateHz: RATE_HZ,
    leadInS: SILENCE_S,
    leadOutS: SILENCE_S,
  };
  const samples = synthesiseStimulus(shape).map(law);
  const series = seriesSchema.parse({
    loudspeaker: "Check",
    environment: "anechoic",
    distance_m: 1,
    stimulus: {
      start_Hz: shape.startHz,
      stop_Hz: shape.stopHz,
      length_s: shape.lengthS,
      rate_Hz: RATE_HZ,
      lead_in_s: SILENCE_S,
      lead_out_s: SILENCE_S,
    },
    calibration: { full_scale_dB: 0 },
    runs: [{ file: "run.wav", level_dB: 90 }],
  });
  const { measured } = await measureSeries(series, {
    readRecording: (file) => Promise.resolve({ file, rateHz: RATE_HZ, samples, fullScale: 1 }),
    readTable: (file) => Promise.reject(new Error(`no table ${file}`)),
  });
  const at = measured.bands.findIndex((band) => band.nominalHz === bandHz);
  const band: BandMeasure | undefined = measured.runs[0]?.bands[at];
  const first = 10 ** ((band?.levelDb ?? Number.NaN) / 20);
  return {
    first,
    harmonic: (order) =>
      first * Math.sqrt(band?.harmonics.find((h) => h.order === order)?.ratio ?? Number.NaN),
  };
}
