/** Harmonics of a periodic wave by the engine's own FFT. */
import { toThd } from "../analysis/assemble-run";
import { planRealFft } from "../analysis/fft/real-fft";

export interface Harmonics {
  dc: number;
  /** [orders + 1] amplitudes; index 0 is not used. */
  amplitudes: Float64Array;
}

const POINTS = 16_384;

/** @param wave one period over 0 to 2 pi; read between its corners, at half steps. */
export function toHarmonics(wave: (phase: number) => number): Harmonics {
  const fft = planRealFft(POINTS);
  for (let n = 0; n < POINTS; n += 1) fft.data[n] = wave((2 * Math.PI * (n + 0.5)) / POINTS);
  const bins = fft.forward();
  const at = (k: number): number =>
    (2 * Math.hypot(bins[2 * k] ?? 0, bins[2 * k + 1] ?? 0)) / POINTS;
  return {
    dc: (bins[0] ?? 0) / POINTS,
    amplitudes: Float64Array.from({ length: POINTS / 2 }, (_, k) => at(k)),
  };
}

/** Amplitude of an order re that of the fundamental, %. */
export const toPercent = ({ amplitudes }: Harmonics, order: number, base = 1): number =>
  (100 * (amplitudes[order] ?? Number.NaN)) / (amplitudes[base] ?? Number.NaN);

/** THD_F of orders up to the last, %, summed as the engine sums it. */
export function toThdPercent({ amplitudes }: Harmonics, last = amplitudes.length - 1): number {
  const parts = Array.from({ length: last - 1 }, (_, i) => ({
    order: i + 2,
    clean: (amplitudes[i + 2] ?? 0) ** 2,
    floor: 0,
  }));
  return toThd(parts, (amplitudes[1] ?? 0) ** 2).percent;
}

/** A cosine through a memoryless law. */
export const toShaped =
  (law: (x: number) => number, amplitude = 1) =>
  (phase: number): number =>
    law(amplitude * Math.cos(phase));
