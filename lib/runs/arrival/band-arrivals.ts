/**
 * When each part of the sweep arrived. Samples that were dropped or inserted on the way shift all that
 * the sweep plays after them: a step over frequency. Another clock, or another sweep, makes a slope.
 */
import type { Plans } from "../../analysis/cell-power";
import type { SweepInUse } from "../../analysis/deconvolution";
import { toFftSize } from "../../analysis/fft/real-fft";
import type { FoundSweep } from "../../analysis/sweep-in-recording";
import { median } from "./median";

export interface BandArrival {
  hz: number;
  /** After the arrival of the mid band, s. */
  delayS: number;
}

export interface DelayStep {
  /** The sweep lost or won time somewhere between these. */
  fromHz: number;
  toHz: number;
  /** Positive where something was inserted, s. */
  delayS: number;
}

const REACH_S = 0.5;
const BANDS_PER_OCTAVE = 6;
const FROM_HZ = 80;
/** A third of an octave. */
const HALF_WIDTH = 2 ** (1 / 6);
/** What is no clearer than this over the rest has no arrival. */
const LEAST_CLEARNESS = 30;

/** @returns third octaves, six to an octave, where the recording holds enough of them. */
export function measureBandArrivals(
  { deconvolved: { response }, lag }: FoundSweep,
  sweep: SweepInUse,
  plans: Plans,
): BandArrival[] {
  const { rateHz } = sweep;
  const reach = Math.min(Math.round(REACH_S * rateHz), Math.floor(response.length / 2) - 1);
  const fft = plans.fft(toFftSize(2 * reach));
  const from = Math.round(lag) - reach;
  for (let n = 0; n < 2 * reach; n += 1) {
    fft.data[n] =
      response[(((from + n) % response.length) + response.length) % response.length] ?? 0;
  }
  fft.data.fill(0, 2 * reach);
  const spectrum = fft.forward();
  const binHz = rateHz / fft.size;
  const arrivals: BandArrival[] = [];
  const step = 2 ** (1 / BANDS_PER_OCTAVE);
  for (
    let hz = Math.max(FROM_HZ, 3 * sweep.startHz);
    hz * HALF_WIDTH < Math.min(0.95 * sweep.stopHz, 0.45 * rateHz);
    hz *= step
  ) {
    const range = [hz / HALF_WIDTH / binHz, (hz * HALF_WIDTH) / binHz] as const;
    const peak = toPeakS(spectrum, range, fft.size, plans);
    if (peak === null) continue;
    arrivals.push({ hz, delayS: (peak * fft.size - (lag - from)) / rateHz });
  }
  return arrivals;
}

/** Where the envelope of bins low to high is largest, as a share of the whole; null where nothing stands out. */
function toPeakS(
  spectrum: Float64Array,
  [low, high]: readonly [number, number],
  size: number,
  plans: Plans,
): number | null {
  const first = Math.ceil(low);
  const count = Math.floor(high) - first + 1;
  if (count < 8 || first + count > size / 2) return null;
  const zoom = plans.complex(toFftSize(2 * count));
  for (let k = 0; k < count; k += 1) {
    // Conjugated, so that the forward transform goes back to lag.
    const weight = 1 - Math.cos((2 * Math.PI * (k + 0.5)) / count);
    zoom.data[2 * k] = weight * (spectrum[2 * (first + k)] ?? 0);
    zoom.data[2 * k + 1] = -weight * (spectrum[2 * (first + k) + 1] ?? 0);
  }
  zoom.data.fill(0, 2 * count);
  const lag = zoom.transform();
  const power = Float64Array.from(
    { length: zoom.size },
    (_, m) => (lag[2 * m] ?? 0) ** 2 + (lag[2 * m + 1] ?? 0) ** 2,
  );
  let peak = 0;
  for (let m = 1; m < power.length; m += 1) if (at(power, m) > at(power, peak)) peak = m;
  if (!(at(power, peak) > LEAST_CLEARNESS * median(power))) return null;
  const [left, middle, right] = [-1, 0, 1].map((d) =>
    Math.log(at(power, (peak + d + power.length) % power.length) + Number.MIN_VALUE),
  ) as [number, number, number];
  const bend = left - 2 * middle + right;
  return (peak + (bend < 0 ? (left - right) / (2 * bend) : 0)) / zoom.size;
}

const at = (x: Float64Array, n: number): number => x[n] ?? 0;

/** Bands on either side of a split whose middle counts; the nearest hold a part of both. */
const SIDE = 5;
const NEAREST = 1;
/** Least step in seconds and in periods: loudspeakers delay the bass by some of its periods, and so does a crossover. */
const LEAST_ALONE = { s: 0.5e-3, periods: 1 };
/** Between two takes of one loudspeaker its own delay is gone. */
const LEAST_BETWEEN = { s: 0.08e-3, periods: 0.15 };
/** A step stands out from what the bands differ by. */
const OVER_SCATTER = 4;

/**
 * @param sibling the same bands of a good take of the same loudspeaker, if there is one.
 * @returns the clearest step; null where there is none.
 */
export function findDelayStep(
  arrivals: readonly BandArrival[],
  sibling: readonly BandArrival[] | null = null,
): DelayStep | null {
  return sibling === null
    ? findStep(arrivals, LEAST_ALONE)
    : findStep(subtract(arrivals, sibling), LEAST_BETWEEN);
}

function subtract(
  arrivals: readonly BandArrival[],
  sibling: readonly BandArrival[],
): BandArrival[] {
  return arrivals.flatMap(({ hz, delayS }) => {
    const same = sibling.find((other) => Math.abs(other.hz / hz - 1) < 1e-3);
    return same === undefined ? [] : [{ hz, delayS: delayS - same.delayS }];
  });
}

function findStep(
  arrivals: readonly BandArrival[],
  limit: { s: number; periods: number },
): DelayStep | null {
  const slope = toSlope(arrivals);
  const level = arrivals.map(({ hz, delayS }) => delayS - slope * Math.log(hz));
  let best: { ratio: number; step: DelayStep } | null = null;
  for (let i = SIDE; i + SIDE <= arrivals.length; i += 1) {
    const [below, above] = [arrivals[i - 1], arrivals[i]];
    if (below === undefined || above === undefined) continue;
    const under = level.slice(i - SIDE, i - NEAREST);
    const over = level.slice(i + NEAREST, i + SIDE);
    const delayS = median(over) - median(under);
    const least = Math.max(
      limit.s,
      limit.periods / below.hz,
      OVER_SCATTER * Math.max(toScatter(under), toScatter(over)),
    );
    const ratio = Math.abs(delayS) / least;
    if (ratio > Math.max(1, best?.ratio ?? 0)) {
      best = { ratio, step: { fromHz: below.hz, toHz: above.hz, delayS } };
    }
  }
  return best?.step ?? null;
}

/** Delay over ln f as most of the bands have it, s. */
export function toSlope(arrivals: readonly BandArrival[]): number {
  const slopes = arrivals.slice(1).map((band, i) => {
    const before = arrivals[i] ?? band;
    return (band.delayS - before.delayS) / Math.log(band.hz / before.hz);
  });
  return slopes.length === 0 ? 0 : median(slopes);
}

function toScatter(values: readonly number[]): number {
  const middle = median(values);
  return median(values.map((x) => Math.abs(x - middle)));
}
