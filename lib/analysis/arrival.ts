/** When the sweep arrived: found in the mid band, refined on the full response. */
import { AnalysisError } from "../errors/app-error";
import { toPeak, type ArrivalEnvelope, type Deconvolved, type SweepInUse } from "./deconvolution";
import { sayNumber } from "./say";

export interface Arrival {
  /** Circular lag of the linear response, samples with fraction. */
  lag: number;
  /** Share of the mid-band energy from 50 ms before to 300 ms after the peak: under one half there is no sweep. */
  compactness: number;
  /** By how much the upper part of the mid band arrives after the lower one, s: a room makes some milliseconds of it, another sweep far more. */
  spreadS: number;
}

const BEFORE_S = 0.05;
const AFTER_S = 0.3;
const REFINE_S = 0.02;
/** Less than this share of the mid-band energy around the peak is no sweep (docs/domain.md section 9). */
export const LEAST_COMPACTNESS = 0.5;
/** A sweep of another rate of change arrives later, or earlier, the higher it gets: over this nothing can be computed. */
const LARGEST_SPREAD_S = 0.1;

/**
 * @throws AnalysisError "run.silent" where nothing at all was recorded.
 */
export function findArrival(
  { response, envelope }: Deconvolved,
  rateHz: number,
  file: string,
): Arrival {
  const peak = toPeak(envelope.power);
  if (!(envelope.power[peak]! > 0))
    throw new AnalysisError(
      "run.silent",
      `${file} is silent: every sample is zero. Check the channel and the input.`,
      { file },
    );
  const coarse = peak * envelope.samplesPerPoint;
  const reach = Math.ceil(REFINE_S * rateHz);
  let best = Math.round(coarse);
  for (let n = Math.round(coarse) - reach; n <= coarse + reach; n += 1) {
    if (Math.abs(at(response, n)) > Math.abs(at(response, best))) best = n;
  }
  return {
    lag: best + toVertex(response, best),
    compactness: toCompactness(envelope, peak, rateHz),
    spreadS: toSpread(envelope, response.length) / rateHz,
  };
}

/** @throws AnalysisError "run.no-sweep" */
export function requireSweep(arrival: Arrival, sweep: SweepInUse, file: string): void {
  if (arrival.compactness >= LEAST_COMPACTNESS && Math.abs(arrival.spreadS) > LARGEST_SPREAD_S) {
    throw new AnalysisError(
      "run.no-sweep",
      `${file} holds another sweep than the stimulus: what it plays about 2 kHz arrives ${sayNumber(1000 * arrival.spreadS, 0)} ms after what it plays about 500 Hz. Check the stimulus that was played, its length and its frequencies.`,
      { file, details: { spreadS: arrival.spreadS } },
    );
  }
  if (arrival.compactness >= LEAST_COMPACTNESS) return;
  throw new AnalysisError(
    "run.no-sweep",
    `${file} holds no sweep from ${sweep.startHz} to ${sweep.stopHz} Hz of ${sweep.lengthS.toFixed(3)} s: only ${(100 * arrival.compactness).toFixed(0)} % of the response lies around its peak (half is needed). Check that the right stimulus was played and recorded.`,
    { file, details: { compactness: arrival.compactness } },
  );
}

/** The shorter way round from the lower to the upper part's arrival, samples. */
function toSpread({ lowLag, highLag }: ArrivalEnvelope, size: number): number {
  const ahead = (((highLag - lowLag) % size) + size) % size;
  return ahead > size / 2 ? ahead - size : ahead;
}

function toCompactness(
  { power, samplesPerPoint }: ArrivalEnvelope,
  peak: number,
  rateHz: number,
): number {
  const pointHz = rateHz / samplesPerPoint;
  let near = 0;
  for (
    let m = peak - Math.round(BEFORE_S * pointHz);
    m <= peak + Math.round(AFTER_S * pointHz);
    m += 1
  )
    near += at(power, m);
  let all = 0;
  for (let m = 0; m < power.length; m += 1) all += power[m]!;
  return near / all;
}

/** Vertex of the parabola through three samples, -0.5 to 0.5. */
function toVertex(response: Float64Array, n: number): number {
  const [left, middle, right] = [at(response, n - 1), at(response, n), at(response, n + 1)];
  const bend = left - 2 * middle + right;
  return bend === 0 ? 0 : Math.max(-0.5, Math.min(0.5, (left - right) / (2 * bend)));
}

/** Circular index. */
const at = (x: Float64Array, n: number): number => x[((n % x.length) + x.length) % x.length]!;
