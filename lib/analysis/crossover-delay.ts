/**
 * Tells a clock difference from a crossover. Both delay low frequencies more than high ones: the
 * clock evenly over ln f, a crossover as the all-pass that its halves add up to, of which only the
 * frequency is unknown. Up to two crossovers are fitted beside the line.
 */

/** One reading of the excess delay. */
export interface DelayPoint {
  lnHz: number;
  delayS: number;
}

interface AllPass {
  hz: number;
  /** Second order for crossovers of 24 dB an octave, first for 12 dB. */
  order: 1 | 2;
}

interface Readings {
  /** [points] ln f from the middle of the range. */
  x: Float64Array;
  squareHz: Float64Array;
  /** By square of frequency: an error of delay counts by its phase. */
  weight: Float64Array;
  delayS: Float64Array;
}

interface Fit {
  /** Of the delay over ln f, s per e-fold. */
  slope: number;
  /** rms beside the line, s. */
  misfit: number;
}

const COARSE = { fromHz: 60, toHz: 9000, perOctave: 6 };
const FINE_PER_OCTAVE = [24, 96, 384];
const ROUNDS = 3;
/** A fit with fewer crossovers is taken where it is nearly as good. */
const NEARLY = 1.5;

/** Delay over ln f that is left when crossovers are taken off, s per e-fold. */
export function fitSlopeBesideCrossovers(points: readonly DelayPoint[]): number {
  const middle = points[points.length >> 1]?.lnHz ?? 0;
  const readings: Readings = {
    x: Float64Array.from(points, (p) => p.lnHz - middle),
    squareHz: Float64Array.from(points, (p) => Math.exp(2 * p.lnHz)),
    weight: Float64Array.from(points, (p) => Math.exp(2 * (p.lnHz - middle))),
    delayS: Float64Array.from(points, (p) => p.delayS),
  };
  const one = place(readings, 1);
  const two = place(readings, 2);
  const fits = [fit(readings), fit(withoutAll(readings, one)), fit(withoutAll(readings, two))];
  const least = Math.min(...fits.map((f) => f.misfit));
  return fits.find((f) => f.misfit <= NEARLY * least)?.slope ?? Number.NaN;
}

/** So many crossovers: the best of the coarse grid, then each moved in turn to where it fits best. */
function place(readings: Readings, count: 1 | 2): AllPass[] {
  const placed = count === 1 ? [pick(readings, COARSE_GRID)] : pickPair(readings);
  for (const perOctave of FINE_PER_OCTAVE) {
    for (let round = 0; round < ROUNDS; round += 1) {
      for (let i = 0; i < count; i += 1) {
        const others = placed.filter((_, j) => j !== i);
        placed[i] = pick(withoutAll(readings, others), around(placed[i]!, perOctave));
      }
    }
  }
  return placed;
}

/**
 * The best two of the coarse grid. Beside their lines all vectors add, so that every pair's misfit
 * follows from inner products.
 */
function pickPair(readings: Readings): AllPass[] {
  const own = (allPass: AllPass): Float64Array =>
    without({ ...readings, delayS: new Float64Array(readings.x.length) }, allPass).delayS;
  const residues = COARSE_GRID.map((c) => besideLine(readings, own(c)));
  const measured = besideLine(readings, readings.delayS);
  const single = residues.map((r) => dot(r, r) + 2 * dot(measured, r));
  let best: [number, number] = [0, 0];
  let least = Number.POSITIVE_INFINITY;
  for (let i = 0; i < residues.length; i += 1) {
    for (let j = 0; j <= i; j += 1) {
      const power = single[i]! + single[j]! + 2 * dot(residues[i]!, residues[j]!);
      if (power < least) [best, least] = [[i, j], power];
    }
  }
  return best.map((i) => COARSE_GRID[i]!);
}

/** What a line leaves, in units of phase, so that inner products weigh as the fit does. */
function besideLine({ x, weight }: Readings, y: Float64Array): Float64Array {
  const { slope, offset } = toLine(x, weight, y);
  return y.map((v, i) => Math.sqrt(weight[i]!) * (v - offset - slope * x[i]!));
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i += 1) sum += a[i]! * b[i]!;
  return sum;
}

const COARSE_GRID: readonly AllPass[] = Array.from(
  { length: Math.round(Math.log2(COARSE.toHz / COARSE.fromHz) * COARSE.perOctave) + 1 },
  (_, k) => COARSE.fromHz * 2 ** (k / COARSE.perOctave),
).flatMap((hz) => [
  { hz, order: 1 },
  { hz, order: 2 },
]);

const around = ({ hz, order }: AllPass, perOctave: number): AllPass[] =>
  [-3, -2, -1, 0, 1, 2, 3].map((k) => ({ order, hz: hz * 2 ** (k / perOctave) }));

function pick(readings: Readings, candidates: readonly AllPass[]): AllPass {
  let best: AllPass = { hz: COARSE.fromHz, order: 2 };
  let least = Number.POSITIVE_INFINITY;
  const left = new Float64Array(readings.x.length);
  for (const candidate of candidates) {
    takeOff(readings, candidate, left);
    const { misfit } = fitTo(readings, left);
    if (misfit < least) [best, least] = [candidate, misfit];
  }
  return best;
}

const withoutAll = (readings: Readings, allPasses: readonly AllPass[]): Readings =>
  allPasses.reduce(without, readings);

/** Takes off the group delay of an all-pass: first order, or second order with Q = 1/sqrt 2. */
function without(readings: Readings, allPass: AllPass): Readings {
  const delayS = new Float64Array(readings.delayS.length);
  takeOff(readings, allPass, delayS);
  return { ...readings, delayS };
}

/** @param into [points] receives the delay that is left. */
function takeOff(readings: Readings, { hz, order }: AllPass, into: Float64Array): void {
  const omega = 2 * Math.PI * hz;
  for (let n = 0; n < into.length; n += 1) {
    const ratio = readings.squareHz[n]! / (hz * hz);
    const own =
      order === 1
        ? 2 / (omega * (1 + ratio))
        : (2 * Math.SQRT2 * (1 + ratio)) / (omega * (1 + ratio * ratio));
    into[n] = readings.delayS[n]! - own;
  }
}

/** Least squares, each reading by its phase. */
const fit = (readings: Readings): Fit => fitTo(readings, readings.delayS);

function fitTo({ x, weight }: Readings, delayS: Float64Array): Fit {
  const { slope, offset } = toLine(x, weight, delayS);
  let residue = 0;
  let sum = 0;
  for (let i = 0; i < x.length; i += 1) {
    const miss = delayS[i]! - offset - slope * x[i]!;
    residue += weight[i]! * (miss * miss);
    sum += weight[i]!;
  }
  return { slope, misfit: Math.sqrt(residue / sum) };
}

function toLine(
  x: Float64Array,
  weight: Float64Array,
  y: Float64Array,
): { slope: number; offset: number } {
  let sum = 0;
  let sumX = 0;
  let sumY = 0;
  let sumXX = 0;
  let sumXY = 0;
  for (let i = 0; i < x.length; i += 1) {
    const w = weight[i]!;
    sum += w;
    sumX += w * x[i]!;
    sumY += w * y[i]!;
    sumXX += w * x[i]! * x[i]!;
    sumXY += w * x[i]! * y[i]!;
  }
  const slope = (sum * sumXY - sumX * sumY) / (sum * sumXX - sumX * sumX);
  return { slope, offset: (sumY - slope * sumX) / sum };
}
