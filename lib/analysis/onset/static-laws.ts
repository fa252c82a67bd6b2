/**
 * Static laws of a device that stops following its drive: loss in dB of the fundamental against
 * drive in dB re the law's own threshold. Every law is non-decreasing and zero far below it.
 */

/**
 * Loss of a gain-riding device (limiter, compressor) with a quadratic knee.
 *
 * @param excessDb drive over the threshold theta, dB; may be negative.
 * @param kneeDb knee width W, dB; 0 is a hard knee.
 * @param slope residual slope s d(out)/d(in) above the knee, 0 to under 1; a ratio R is s = 1/R.
 * @returns loss, dB, >= 0.
 * @see docs/check-values.md section 10 (Giannoulis, Massberg, Reiss, JAES 60(6), 2012)
 */
export function gainRidingLossDb(excessDb: number, kneeDb: number, slope: number): number {
  if (2 * excessDb <= -kneeDb) return 0;
  if (2 * excessDb >= kneeDb) return (1 - slope) * excessDb;
  return ((1 - slope) * (excessDb + kneeDb / 2) ** 2) / (2 * kneeDb);
}

/** Drive over theta, dB, at which {@link gainRidingLossDb} reaches `lossDb` > 0. */
export function gainRidingExcessDb(lossDb: number, kneeDb: number, slope: number): number {
  const knee = ((1 - slope) * kneeDb) / 2;
  if (lossDb >= knee) return lossDb / (1 - slope);
  return -kneeDb / 2 + Math.sqrt((2 * kneeDb * lossDb) / (1 - slope));
}

/**
 * Loss where two in-phase paths add up and only one of them is held at a ceiling: a crossover region.
 *
 * @param excessDb drive over the limited path's threshold, dB.
 * @param share share rho of the limited path in the linear sum, 0 to 1.
 * @returns loss, dB; levels off at -20 lg(1 - rho).
 */
export function twoPathLossDb(excessDb: number, share: number): number {
  return excessDb <= 0 ? 0 : -20 * Math.log10(1 - share + share * 10 ** (-excessDb / 20));
}

/** Drive over the threshold, dB, at which {@link twoPathLossDb} reaches `lossDb`; Infinity where it never does. */
export function twoPathExcessDb(lossDb: number, share: number): number {
  const rest = (10 ** (-lossDb / 20) - 1 + share) / share;
  return rest > 0 ? -20 * Math.log10(rest) : Infinity;
}

/**
 * Loss of a port whose air turns turbulent: its resistance grows with its own velocity, so that the output r
 * re the linear one follows r (1 + d r) = 1 at a drive d, and half of every further step is lost. `share` of the
 * sound comes from the port, in phase with the rest.
 *
 * @param driveDb drive over the one at which the added resistance would equal the linear one, dB.
 */
export function turbulentPortLossDb(driveDb: number, share: number): number {
  const drive = 10 ** (driveDb / 20);
  // (sqrt(1 + 4 d) - 1) / (2 d), without the difference of near numbers.
  const rest = 2 / (1 + Math.sqrt(1 + 4 * drive));
  return -20 * Math.log10(1 - share + share * rest);
}

/** Memoryless odd non-linearities, unit slope at the origin, output at most 1 in size. */
export const OVERLOAD_LAWS = [
  "hard clip",
  "tanh",
  "cubic",
  "arctangent",
  "algebraic",
  "sine",
] as const;
export type OverloadLaw = (typeof OVERLOAD_LAWS)[number];

const TRANSFER: Record<OverloadLaw, (x: number) => number> = {
  "hard clip": (x) => Math.min(x, 1),
  tanh: Math.tanh,
  // x - (4/27) x^3 peaks at 1 for x = 1.5 and stays there.
  cubic: (x) => (x >= 1.5 ? 1 : x - (4 / 27) * x ** 3),
  arctangent: (x) => (2 / Math.PI) * Math.atan((Math.PI / 2) * x),
  algebraic: (x) => x / Math.sqrt(1 + x * x),
  sine: (x) => (x >= Math.PI / 2 ? 1 : Math.sin(x)),
};

/**
 * Harmonic amplitude of a cosine of amplitude `amplitude` through an odd memoryless law.
 *
 * @param order 1, 3, 5, ...: even ones are zero by symmetry.
 * @param points points of the midpoint rule over a quarter period.
 * @returns signed amplitude of cos(order t).
 */
export function overloadHarmonic(
  law: OverloadLaw,
  amplitude: number,
  order: number,
  points = 256,
): number {
  const transfer = TRANSFER[law];
  let sum = 0;
  for (let i = 0; i < points; i++) {
    const t = ((i + 0.5) * Math.PI) / (2 * points);
    sum += transfer(amplitude * Math.cos(t)) * Math.cos(order * t);
  }
  return (2 * sum) / points;
}

/**
 * Loss of the fundamental through a memoryless overload.
 *
 * @param excessDb amplitude, dB re the law's limit (input 1).
 * @see docs/check-values.md section 5 for the hard clipper's closed form
 */
export function overloadLossDb(law: OverloadLaw, excessDb: number, points = 256): number {
  const amplitude = 10 ** (excessDb / 20);
  if (law === "hard clip") {
    if (amplitude <= 1) return 0;
    const angle = Math.acos(1 / amplitude);
    return -20 * Math.log10(1 - (2 / Math.PI) * (angle - Math.sin(angle) * Math.cos(angle)));
  }
  return -20 * Math.log10(overloadHarmonic(law, amplitude, 1, points) / amplitude);
}
