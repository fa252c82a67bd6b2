/** How wide a band of the wall is, given the place it has. */
import { WALL_LAYOUT } from "./wall";
import { WALL_KEY_WIDTH } from "./wall-key";

const KEY_FROM_PX = 980;
/** A map cell needs so much for "+0.0"; where even this does not fit, the figure scrolls in its frame. */
const LEAST_PITCH = 28.4;
const MOST_PITCH = 44;
const RIGHT_MARGIN = 18;

/** @param width px of the whole figure. @returns px from band to band, and whether the key column stands beside. */
export function toWallPitch(
  width: number,
  bands: number,
  keyWidth = WALL_KEY_WIDTH,
): { pitch: number; keyed: boolean } {
  const keyed = width >= KEY_FROM_PX;
  const room = width - WALL_LAYOUT.staffWidth - (keyed ? keyWidth : RIGHT_MARGIN);
  const pitch = Math.floor((room / Math.max(bands, 1)) * 10) / 10;
  return { pitch: Math.min(MOST_PITCH, Math.max(LEAST_PITCH, pitch)), keyed };
}
