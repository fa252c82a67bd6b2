/** Metres and feet: both are always said, the reader's own first. */
import { formatPlain, NBSP } from "../charts/format";

export type Units = "m" | "ft";

/** Of an address: feet where it asks for them. */
export const readUnits = (text: string | null | undefined): Units => (text === "ft" ? "ft" : "m");

export const FEET_PER_M = 1 / 0.3048;

/** "1 m (3.3 ft)", and the other way round "3.3 ft (1 m)". @param format of the metres */
export function sayDistance(
  distanceM: number,
  units: Units,
  format: (distanceM: number) => string = formatPlain,
): string {
  const metres = `${format(distanceM)}${NBSP}m`;
  const feet = `${(distanceM * FEET_PER_M).toFixed(1)}${NBSP}ft`;
  return units === "ft" ? `${feet} (${metres})` : `${metres} (${feet})`;
}
