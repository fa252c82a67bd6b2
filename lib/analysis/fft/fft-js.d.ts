/** fft.js brings no types; it serves as the check of our own kernel. */
declare module "fft.js" {
  export default class FFT {
    constructor(size: number);
    createComplexArray(): number[];
    transform(out: number[], data: ArrayLike<number>): void;
    inverseTransform(out: number[], data: ArrayLike<number>): void;
    /** Fills the lower half of `out`; completeSpectrum mirrors it. */
    realTransform(out: number[], data: ArrayLike<number>): void;
    completeSpectrum(spectrum: number[]): void;
  }
}
