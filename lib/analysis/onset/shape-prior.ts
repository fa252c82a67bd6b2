/** Weights of the shapes before a band's own gains are seen: by family, and by what other bands of the device show. */
import type { OverloadVerdict } from "../distortion-evidence";
import type { OnsetLikelihood } from "./likelihood";
import type { OnsetPlan } from "./onset-plan";
import type { Family } from "./shapes";

/** Weight of each family by what the distortion said. */
const FAMILY_PRIOR: Record<OverloadVerdict, Record<Family, number>> = {
  overload: { "gain riding": 0.05, "two paths": 0.02, overload: 0.93 },
  "no overload": { "gain riding": 0.9, "two paths": 0.1, overload: 0 },
  "no verdict": { "gain riding": 0.6, "two paths": 0.1, overload: 0.3 },
};

/** Prior of a band without regard to others. */
export function priorOf(
  plan: OnsetPlan,
  overload: OverloadVerdict,
  pooled: Float64Array | null,
): Float64Array {
  const family = FAMILY_PRIOR[overload];
  const prior = Float64Array.from(plan.shapes, (shape) => family[shape.family] * shape.prior);
  if (!pooled) return prior;
  const [from, to] = plan.range["gain riding"];
  for (let j = from; j < to; j++) prior[j] = family["gain riding"] * (pooled[j - from] ?? 0);
  return prior;
}

/** Bands speak for each other over about an octave: weight exp(-(d/REACH)^2 / 2) at d bands. */
const REACH_BANDS = 4;
/** Together they count as no more than this many independent bands: step errors are common to them. */
const MOST_VOICES = 2;
/** The band keeps this share of its own prior, whatever others say. */
const OWN_SHARE = 0.15;
/** One band rules a shape out by this much log evidence at most: a crossover band may follow no such law at all. */
const LOUDEST_VOICE = 6;

/**
 * What the other bands say of the shape of the gain riding: knee and slope belong to the device, the onset to the
 * band. Each band's response moves its drive along the same knee, so that together they show a knee which none shows alone.
 *
 * @param likelihoods [bands] null for bands that do not speak: no loss, or an overload.
 * @returns [bands] weights of the gain-riding shapes, summing to 1; null where no other band speaks.
 */
export function poolShapes(
  plan: OnsetPlan,
  likelihoods: readonly (OnsetLikelihood | null)[],
): (Float64Array | null)[] {
  const [from, to] = plan.range["gain riding"];
  const prior = Float64Array.from(plan.shapes.slice(from, to), (shape) => shape.prior);
  const voices = likelihoods.map((likelihood) =>
    likelihood ? voiceOf(likelihood, from, to) : null,
  );
  return likelihoods.map((own, b) => {
    if (!own) return null;
    const log = new Float64Array(to - from);
    let weights = 0;
    voices.forEach((voice, other) => {
      if (!voice || other === b) return;
      const weight = Math.exp(-0.5 * ((other - b) / REACH_BANDS) ** 2);
      weights += weight;
      for (let j = 0; j < log.length; j++) log[j] = (log[j] ?? 0) + weight * (voice[j] ?? 0);
    });
    if (weights < 0.05) return null;
    const temper = Math.min(1, MOST_VOICES / weights);
    const best = log.reduce((a, value) => Math.max(a, value), -Infinity);
    const pooled = log.map((value, j) => (prior[j] ?? 0) * Math.exp(temper * (value - best)));
    const total = pooled.reduce((a, value) => a + value, 0);
    return pooled.map(
      (value, j) => OWN_SHARE * (prior[j] ?? 0) + ((1 - OWN_SHARE) * value) / total,
    );
  });
}

/**
 * How well each gain-riding shape can fit, at its best onset: a mean over onsets would favour flat shapes, which many
 * onsets fit. Never further below the best than a band may know by itself.
 */
function voiceOf({ shapeBest }: OnsetLikelihood, from: number, to: number): Float64Array {
  const own = shapeBest.subarray(from, to);
  const best = own.reduce((a, value) => Math.max(a, value), -Infinity);
  return own.map((value) => Math.max(value - best, -LOUDEST_VOICE));
}
