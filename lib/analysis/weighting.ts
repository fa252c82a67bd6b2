/** Frequency weighting A and C by the pole formula of IEC 61672-1:2013. */

const F1 = 20.598997057618316;
const F2 = 107.65264864304629;
const F3 = 737.8622307362901;
const F4 = 12194.217147998012;

const rawC = (f2: number): number => (F4 ** 2 * f2) / ((f2 + F1 ** 2) * (f2 + F4 ** 2));
const rawA = (f2: number): number => (rawC(f2) * f2) / Math.sqrt((f2 + F2 ** 2) * (f2 + F3 ** 2));
const A_AT_1000 = rawA(1e6);
const C_AT_1000 = rawC(1e6);

/**
 * A-weighting relative to 1 kHz, dB; minus infinity at 0 Hz. Use the exact mid-band frequency of a
 * band: nominal numbers are up to 0.28 dB off.
 */
export function aWeightingDb(frequencyHz: number): number {
  return 20 * Math.log10(rawA(frequencyHz ** 2) / A_AT_1000);
}

/** C-weighting relative to 1 kHz, dB; minus infinity at 0 Hz. */
export function cWeightingDb(frequencyHz: number): number {
  return 20 * Math.log10(rawC(frequencyHz ** 2) / C_AT_1000);
}
