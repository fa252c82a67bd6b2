/** Which runs of a band lose level, before any law is thought of. */
import type { BandGains } from "./likelihood";

/** A loss is one from here, dB, and from three standard uncertainties. */
const ACTIVE_LOSS_DB = 0.12;
const ACTIVE_SIGMAS = 3;
/** Keeps a loud, quiet-noised run with a small loss of its own from outweighing the runs below it, dB. */
const EVEN_SIGMA_DB = 0.02;

export interface Detection {
  /** Mean gain of the lowest runs that agree, dB, and its standard uncertainty. */
  gainDb: number;
  gainSigmaDb: number;
  /** [levels] gainDb minus the run's gain, dB; NaN where the band has no value. */
  lossDb: Float64Array;
  /** [levels] standard uncertainty of the loss, step left out. */
  lossSigmaDb: Float64Array;
  /** Index of the first run from which on every run is active; the number of levels where none is. */
  firstActive: number;
  /** Index of the last run with a value. */
  top: number;
}

/**
 * Finds the runs that lose level against the lower ones.
 *
 * @param gains one band, levels ascending; not modified.
 * @returns null where fewer than two runs have a value.
 * @see docs/onset-notes.md section 3
 */
export function detectLoss(gains: BandGains): Detection | null {
  const valid = [...gains.gainDb.keys()].filter((k) =>
    Number.isFinite(gains.gainDb[k] ?? Number.NaN),
  );
  const top = valid.at(-1);
  if (top === undefined || valid.length < 2) return null;
  const linear: number[] = [];
  const active = new Set<number>();
  for (const k of valid) {
    const mean = weightedMean(gains, linear);
    if (
      mean !== null &&
      isActive(mean.value - at(gains.gainDb, k), Math.hypot(mean.sigma, at(gains.sigmaDb, k)))
    ) {
      active.add(k);
    } else linear.push(k);
  }
  let firstActive = gains.gainDb.length;
  for (const k of valid.toReversed()) {
    if (!active.has(k)) break;
    firstActive = k;
  }
  const below = weightedMean(
    gains,
    valid.filter((k) => k < firstActive && !active.has(k)),
  );
  const mean = below ?? {
    value: at(gains.gainDb, valid[0] ?? 0),
    sigma: at(gains.sigmaDb, valid[0] ?? 0),
  };
  return {
    gainDb: mean.value,
    gainSigmaDb: mean.sigma,
    lossDb: Float64Array.from(gains.gainDb, (gain) => mean.value - gain),
    lossSigmaDb: Float64Array.from(gains.sigmaDb, (sigma) => Math.hypot(mean.sigma, sigma)),
    firstActive,
    top,
  };
}

export function isActive(lossDb: number, sigmaDb: number): boolean {
  return lossDb > Math.max(ACTIVE_LOSS_DB, ACTIVE_SIGMAS * sigmaDb);
}

const at = (values: Float64Array, k: number): number => values[k] ?? Number.NaN;

function weightedMean(gains: BandGains, levels: number[]): { value: number; sigma: number } | null {
  if (levels.length === 0) return null;
  let weightSum = 0;
  let sum = 0;
  for (const k of levels) {
    const weight = 1 / (at(gains.sigmaDb, k) ** 2 + EVEN_SIGMA_DB ** 2);
    weightSum += weight;
    sum += weight * at(gains.gainDb, k);
  }
  return { value: sum / weightSum, sigma: Math.sqrt(1 / weightSum) };
}
