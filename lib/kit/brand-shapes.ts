/** The mark and the sign of a hearing notice as shapes, for pictures and print. */
import type { Shape } from "../charts/figure";
import { COLOURS, levelRamp, SAFETY_COLOURS, type Paint } from "../charts/tokens";
import type { NoticeSignal } from "../exposure/notices";

/** A colour that no theme changes. */
const fixed = (colour: string): Paint => ({ light: colour, dark: colour });

export const SAFETY = {
  text: fixed(SAFETY_COLOURS.text),
  ground: fixed(SAFETY_COLOURS.ground),
  CAUTION: fixed(SAFETY_COLOURS.caution),
  WARNING: fixed(SAFETY_COLOURS.warning),
} as const;

/** The mark in a square of 32. */
export function brandShapes(): Shape[] {
  const [, low, middle, high] = levelRamp(4);
  const part = (d: string, fill: Paint | undefined): Shape => ({
    kind: "path",
    d,
    fill: fill ?? COLOURS.ink,
  });
  return [
    part("M2 4h28v5H2z", COLOURS.ink),
    part("M9 9h14v6h-8.5L9 11.4z", high?.fill),
    part("M14.5 15H23v6H9v-2.4z", middle?.fill),
    part("M9 21h14v7H9z", low?.fill),
  ];
}

/** The alert triangle, 24 wide and 22 high: black, its mark in the colour behind it. */
export const alertShapes = (signal: NoticeSignal): Shape[] => [
  { kind: "path", d: "M12 1 23.2 21H.8z", fill: SAFETY.text },
  { kind: "path", d: "M10.7 7.5l.5 7h1.6l.5-7z", fill: SAFETY[signal] },
  { kind: "circle", cx: 12, cy: 17.2, r: 1.5, fill: SAFETY[signal] },
];
