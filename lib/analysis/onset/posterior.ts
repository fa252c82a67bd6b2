/** Posterior of the onset and of any other loss level, from a likelihood and the weights of the shapes. */
import { getAt } from "../get-at";
import { ONSET_STEP_DB, type OnsetPlan } from "./onset-plan";
import { NEGLIGIBLE_LOG, type OnsetLikelihood } from "./likelihood";
import type { Shape } from "./shapes";

/** One law of the posterior: a shape with its onset. */
export interface LawSample {
  onsetDb: number;
  shape: Shape;
}

export interface Quantiles {
  lowDb: number;
  medianDb: number;
  highDb: number;
}

export interface OnsetPosterior {
  /** Median and 90 % credible interval of the drive at which `lossDb` is lost; never above `ceilingDb`. */
  quantiles: (lossDb: number, ceilingDb: number) => Quantiles;
  /** Equally likely laws, in order of their onset. */
  samples: LawSample[];
  /** Linear gain of the band, dB, posterior mean. */
  gainDb: number;
  gainSigmaDb: number;
  /** chi^2 of the best law among those with weight. */
  chiSquare: number;
  /** Name of the law with the most weight. */
  law: string;
  /** Probability that the slope just above the top drive's loss is at most `limit`. */
  probabilitySlopeUpTo: (limit: number) => number;
}

/** What the grid cannot resolve is added to both ends of an interval, dB. */
const INTERVAL_MARGIN_DB = 0.1;
const SAMPLES = 192;

/**
 * @param shapePrior [shapes] weights, summing to 1; a shape of weight 0 is left out.
 */
export function computePosterior(
  likelihood: OnsetLikelihood,
  shapePrior: Float64Array,
): OnsetPosterior {
  const { plan, columns, logLikelihood } = likelihood;
  const allowed = plan.shapes.flatMap((_, j) => ((shapePrior[j] ?? 0) > 0 ? [j] : []));
  const logPrior = Float64Array.from(shapePrior, Math.log);
  const bestOf = (j: number): number => (likelihood.shapeBest[j] ?? 0) + (logPrior[j] ?? 0);
  const best = allowed.reduce((most, j) => Math.max(most, bestOf(j)), -Infinity);
  const bestFit = allowed.reduce(
    (most, j) => Math.max(most, likelihood.shapeBest[j] ?? 0),
    -Infinity,
  );
  const used = allowed.filter((j) => bestOf(j) - best >= NEGLIGIBLE_LOG);
  const mass = new Float64Array(used.length * columns);
  const byColumn = new Float64Array(columns);
  const byShape = new Float64Array(plan.shapes.length);
  let total = 0;
  used.forEach((j, row) => {
    const offset = (logPrior[j] ?? 0) - best;
    for (let i = 0; i < columns; i++) {
      const log = logLikelihood[j * columns + i]! + offset;
      if (log < NEGLIGIBLE_LOG) continue;
      const value = Math.exp(log);
      mass[row * columns + i] = value;
      byColumn[i]! += value;
      byShape[j]! += value;
      total += value;
    }
  });
  const grid = {
    firstDb: plan.firstOnsetDb + likelihood.firstColumn * ONSET_STEP_DB,
    mass,
    columns,
    used,
    total,
  };
  const samples = drawSamples(plan, grid, byColumn);
  const known = new Map<number, Quantiles>();
  return {
    quantiles: (lossDb, ceilingDb) => {
      const free = known.get(lossDb) ?? quantilesOf(plan, grid, lossDb);
      known.set(lossDb, free);
      return {
        lowDb: Math.min(free.lowDb, ceilingDb),
        medianDb: Math.min(free.medianDb, ceilingDb),
        highDb: Math.min(free.highDb, ceilingDb),
      };
    },
    samples,
    gainDb: meanGain(likelihood, samples),
    gainSigmaDb: likelihood.gainSigmaDb,
    chiSquare: -2 * bestFit,
    law: heaviestLaw(plan, byShape),
    probabilitySlopeUpTo: (limit) => {
      const top = plan.drivesDb.at(-1) ?? 0;
      const flat = samples.filter(
        ({ shape, onsetDb }) => slopeAt(shape, top - onsetDb) <= limit + 1e-9,
      );
      return flat.length / samples.length;
    },
  };
}

/** d(out)/d(in) of a law just below a drive, from a chord of 0.5 dB. */
export function slopeAt(shape: Shape, offsetDb: number): number {
  return 1 - (shape.lossDb(offsetDb) - shape.lossDb(offsetDb - 0.5)) / 0.5;
}

interface MassGrid {
  firstDb: number;
  /** [used * columns] */
  mass: Float64Array;
  columns: number;
  /** Shapes with a weight: those of the rows of mass. */
  used: number[];
  total: number;
}

function quantilesOf(plan: OnsetPlan, grid: MassGrid, lossDb: number): Quantiles {
  const { columns, mass, firstDb } = grid;
  // Drives of the loss lie on the onset's own lattice moved by each shape's offset: spread linearly.
  const bins = columns + Math.ceil(60 / ONSET_STEP_DB);
  const histogram = new Float64Array(bins + 1);
  const offsets = grid.used.map((j) => getAt(plan.shapes, j).offsetDb(lossDb));
  const lowestOffset = Math.min(0, ...offsets);
  grid.used.forEach((_, row) => {
    const offset = offsets[row] ?? Infinity;
    const moved = Math.min((offset - lowestOffset) / ONSET_STEP_DB, bins);
    const whole = Math.floor(moved);
    const part = moved - whole;
    for (let i = 0; i < columns; i++) {
      const value = mass[row * columns + i]!;
      if (value === 0) continue;
      const bin = Math.min(i + whole, bins);
      histogram[bin]! += value * (1 - part);
      if (part > 0) histogram[Math.min(bin + 1, bins)]! += value * part;
    }
  });
  const origin = firstDb + lowestOffset - ONSET_STEP_DB / 2;
  const at = (share: number): number => {
    let sum = 0;
    for (let bin = 0; bin <= bins; bin++) {
      const here = histogram[bin] ?? 0;
      if (sum + here >= share * grid.total && here > 0) {
        return bin === bins
          ? Infinity
          : origin + (bin + (share * grid.total - sum) / here) * ONSET_STEP_DB;
      }
      sum += here;
    }
    return Infinity;
  };
  return {
    lowDb: at(0.05) - INTERVAL_MARGIN_DB,
    medianDb: at(0.5),
    highDb: at(0.95) + INTERVAL_MARGIN_DB,
  };
}

/** Systematic draw: equal steps through the cumulated mass, column by column; nothing random. */
function drawSamples(plan: OnsetPlan, grid: MassGrid, byColumn: Float64Array): LawSample[] {
  const samples: LawSample[] = [];
  let before = 0;
  for (let i = 0; i < grid.columns; i++) {
    const here = byColumn[i] ?? 0;
    if (here === 0) continue;
    const onsetDb = grid.firstDb + i * ONSET_STEP_DB;
    let sum = before;
    for (let row = 0; row < grid.used.length; row++) {
      const value = grid.mass[row * grid.columns + i]!;
      if (value === 0) continue;
      sum += value;
      while (samples.length < SAMPLES && (samples.length + 0.5) * grid.total <= sum * SAMPLES) {
        samples.push({ onsetDb, shape: getAt(plan.shapes, getAt(grid.used, row)) });
      }
    }
    before += here;
  }
  return samples;
}

function meanGain(likelihood: OnsetLikelihood, samples: LawSample[]): number {
  const { plan, weights, gainDb } = likelihood;
  let weightSum = 0;
  let sum = 0;
  plan.drivesDb.forEach((drive, k) => {
    const weight = weights[k] ?? 0;
    if (weight === 0) return;
    const loss =
      samples.reduce((all, { shape, onsetDb }) => all + shape.lossDb(drive - onsetDb), 0) /
      samples.length;
    weightSum += weight;
    sum += weight * ((gainDb[k] ?? 0) + loss);
  });
  return sum / weightSum;
}

function heaviestLaw(plan: OnsetPlan, byShape: Float64Array): string {
  const weights = new Map<string, number>();
  plan.shapes.forEach((shape, j) =>
    weights.set(shape.law, (weights.get(shape.law) ?? 0) + (byShape[j] ?? 0)),
  );
  return [...weights].reduce((a, b) => (b[1] > a[1] ? b : a))[0];
}
