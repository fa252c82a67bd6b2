/** Bands in which what limits and what stays free add up. */
import type { Detection } from "./detect";

/** Loss that falls by this much from band to band over two bands on end marks an edge, dB. */
const STEEP_DB = 1.5;

/**
 * Whether a band lies where the reach of a gain control ends. The limited and the free path add up there in
 * another share in each band, so the bands follow no common knee and slope: what others show of the shape may not
 * narrow what this band's own runs leave open.
 *
 * @param detections [bands] null where a band has too few runs.
 */
export function isEdgeOfWay(detections: readonly (Detection | null)[], b: number): boolean {
  const lossAt = (i: number): number => {
    const detection = detections[i];
    return detection == null ? Number.NaN : (detection.lossDb[detection.top] ?? Number.NaN);
  };
  const falls = (from: number, to: number): boolean => lossAt(from) - lossAt(to) >= STEEP_DB;
  return [1, -1].some(
    (side) => falls(b, b + side) && (falls(b + side, b + 2 * side) || falls(b - side, b)),
  );
}
