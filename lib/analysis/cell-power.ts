/** Power of one order of the response in the cells of the grid. */
import { planComplexFft, type ComplexFft } from "./fft/complex-fft";
import { planRealFft, toFftSize, type RealFft } from "./fft/real-fft";
import { LogTable, meanUniformInLog } from "./log-means";
import { planOnset, type OnsetPlan } from "./onset/onset-plan";
import type { OrderWindow } from "./order-windows";

/** Labs keep to a few sets of levels; each set of tables takes some megabytes. */
const MOST_ONSET_PLANS = 4;

/** FFT plans and tables shared by every run of a series, and by the series of a process that analyses many. */
export class Plans {
  readonly logs = new LogTable();
  readonly #fft = new Map<number, RealFft>();
  readonly #complex = new Map<number, ComplexFft>();
  readonly #hann = new Map<number, Float64Array>();
  readonly #onset = new Map<string, OnsetPlan>();

  /** Points of all real plans together: some 26 bytes each are held. */
  get points(): number {
    return [...this.#fft.keys()].reduce((sum, size) => sum + size, 0);
  }

  /** The plan of a size, made once. */
  fft(size: number): RealFft {
    const plan = this.#fft.get(size) ?? planRealFft(size);
    this.#fft.set(size, plan);
    return plan;
  }

  /** The complex plan of a size, made once. */
  complex(size: number): ComplexFft {
    const plan = this.#complex.get(size) ?? planComplexFft(size);
    this.#complex.set(size, plan);
    return plan;
  }

  /** [size] periodic Hann window, sampled between its points so that it is symmetric. */
  hann(size: number): Float64Array {
    const known = this.#hann.get(size);
    if (known !== undefined) return known;
    const window = new Float64Array(size);
    for (let n = 0; n < size; n += 1) {
      window[n] = 0.5 - 0.5 * Math.cos((2 * Math.PI * (n + 0.5)) / size);
    }
    this.#hann.set(size, window);
    return window;
  }

  /** Tables of the onset for a set of drives; the sets used last are kept. */
  onset(drivesDb: readonly number[]): OnsetPlan {
    const key = drivesDb.join(" ");
    const plan = this.#onset.get(key) ?? planOnset(drivesDb);
    this.#onset.delete(key);
    this.#onset.set(key, plan);
    const [oldest] = this.#onset.keys();
    if (this.#onset.size > MOST_ONSET_PLANS && oldest !== undefined) this.#onset.delete(oldest);
    return plan;
  }
}

/** |H|^2 is sampled without folding at twice the window, and in the narrow cells of the bass not coarser than this times the order. */
const COARSEST_BIN_HZ = 1.5;

/**
 * Mean |H_n|^2 at n f over each cell of excitation frequency f, uniform in lg f.
 *
 * @param response [size] over circular lag. Not modified.
 * @param arrivalLag lag of the linear response, samples.
 * @param edgeHz [cells + 1] edges of excitation frequency.
 * @returns [cells] recorded peak^2 re full scale; NaN where n f passes half the rate.
 */
export function measureCellPower(
  response: Float64Array,
  arrivalLag: number,
  window: OrderWindow,
  edgeHz: Float64Array,
  rateHz: number,
  plans: Plans,
): Float64Array {
  const { weights, before, lead, order } = window;
  const fft = plans.fft(
    toFftSize(Math.max(2 * weights.length, rateHz / (COARSEST_BIN_HZ * order))),
  );
  const size = response.length;
  let from = Math.round(arrivalLag - lead) - before;
  from = ((from % size) + size) % size;
  const { data } = fft;
  // Up to the end of the circle, and on from its beginning.
  for (let n = 0; n < weights.length; from = 0) {
    const shift = from - n;
    const end = Math.min(weights.length, size - shift);
    for (; n < end; n += 1) data[n] = weights[n]! * response[n + shift]!;
  }
  data.fill(0, weights.length);
  const cells = new Float64Array(edgeHz.length - 1);
  meanUniformInLog(fft.power(), rateHz / fft.size, edgeHz, order, plans.logs, cells);
  return cells;
}
