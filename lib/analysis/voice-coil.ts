/** A voice coil that heats: its resistance rises and, on a voltage, the level falls. */

/** Copper, 1/K. */
export const COPPER_PER_K = 0.00393;

/**
 * Loss of a coil that is hotter by so much, dB: 20 lg of its resistance re cold. An upper bound where
 * the coil's resistance is not all of the impedance.
 * @see docs/check-values.md section 11, voltage drive
 */
export const toHeatLossDb = (riseK: number): number => 20 * Math.log10(1 + COPPER_PER_K * riseK);

/** One body between coil and air. */
export interface ThermalBranch {
  kelvinPerWatt: number;
  timeConstantS: number;
}

/** Rise over the surroundings after a steady power from cold, K. */
export function toRiseK(powerW: number, branches: readonly ThermalBranch[], timeS: number): number {
  return branches.reduce(
    (sum, { kelvinPerWatt, timeConstantS }) =>
      sum + powerW * kelvinPerWatt * (1 - Math.exp(-timeS / timeConstantS)),
    0,
  );
}
