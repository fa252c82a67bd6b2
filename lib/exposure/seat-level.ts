/** Level at a listener's seat, from the level at 1 m. */
import { AppError } from "../errors/app-error";

/**
 * Radius at which the room's own sound equals the direct sound, m (common practice, no source).
 * Outdoors there is no room sound.
 */
export const ROOM_RADIUS_M = { small: 0.6, live: 1, large: 2, outdoors: Infinity } as const;
export type RoomKind = keyof typeof ROOM_RADIUS_M;

const PAIR_DB = 3;

export interface Seat {
  /** A-weighted, of one loudspeaker at 1 m. */
  levelAt1mDbA: number;
  turnedDownDb: number;
  distanceM: number;
  room: RoomKind;
  pair: boolean;
}

/**
 * L = L_1m - turned down + 10 lg(1/d^2 + 1/r_c^2), and 3 dB for a pair; dB(A), not rounded.
 * @throws AppError "analysis.argument" for a distance that is not positive
 */
export function computeSeatLevelDbA(seat: Seat): number {
  if (!(seat.distanceM > 0 && seat.distanceM < Infinity)) {
    throw new AppError("analysis.argument", `listening distance ${seat.distanceM} m`);
  }
  const shareOfPower = seat.distanceM ** -2 + ROOM_RADIUS_M[seat.room] ** -2;
  return (
    seat.levelAt1mDbA -
    seat.turnedDownDb +
    10 * Math.log10(shareOfPower) +
    (seat.pair ? PAIR_DB : 0)
  );
}
