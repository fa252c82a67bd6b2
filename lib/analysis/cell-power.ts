/** Power of one order of the response in the cells of the grid. */
import { planComplexFft, type ComplexFft } from "./fft/complex-fft";
import { planRealFft, toFftSize, type RealFft } from "./fft/real-fft";
import { LogTable, meanUniformInLog } from "./log-means";
import type { OrderWindow } from "./order-windows";

/** FFT plans and tables shared by every run of a series. */
export class Plans {
  readonly logs = new LogTable();
  readonly #fft = new Map<number, RealFft>();
  readonly #complex = new Map<number, ComplexFft>();
  readonly #power = new Map<number, Float64Array>();

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

  /** Power spectrum of what lies in the plan's data; valid until the next call of this size. */
  power(plan: RealFft): Float64Array {
    const into = this.#power.get(plan.size) ?? new Float64Array(plan.size / 2 + 1);
    this.#power.set(plan.size, into);
    return plan.power(into);
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
  for (let n = 0, i = from; n < weights.length; n += 1, i += 1) {
    if (i === size) i = 0;
    data[n] = weights[n]! * response[i]!;
  }
  data.fill(0, weights.length);
  const cells = new Float64Array(edgeHz.length - 1);
  meanUniformInLog(plans.power(fft), rateHz / fft.size, edgeHz, order, plans.logs, cells);
  return cells;
}
