/** Colours, dashes and letters of compared tests, and the steps of the difference map. */
import { letterOf } from "../compare/compare-words";
import type { Shape } from "./figure";
import { COLOURS, levelRamp, SILT, type Paint, type StepPaint } from "./tokens";

const PAINTS: readonly Paint[] = [
  COLOURS.ink,
  levelRamp(4)[2]?.line ?? COLOURS.ink2,
  SILT[4]?.fill ?? COLOURS.siltLine,
  COLOURS.ink3,
];

/** @param at 0 is the reference, A. */
export const comparePaint = (at: number): Paint => PAINTS[at] ?? COLOURS.ink;

/** Told apart without colour: A thick and plain, B plain, C long dashes, D short ones. */
export const COMPARE_DASHES: readonly (readonly number[] | undefined)[] = [
  undefined,
  undefined,
  [13, 4],
  [4, 3],
];

/** @returns a letter in its box about x, y. */
export const letterShapes = (at: number, x: number, y: number): Shape[] => [
  {
    kind: "rect",
    role: "letter-box",
    x: x - 8,
    y: y - 8,
    width: 16,
    height: 16,
    fill: comparePaint(at),
  },
  {
    kind: "text",
    role: "letter",
    x,
    y: y + 4.5,
    text: letterOf(at),
    size: 12,
    weight: 600,
    anchor: "middle",
    fill: COLOURS.sheet,
  },
];

const water = (row: number, text: Paint): StepPaint => ({
  fill: levelRamp(6)[row]?.fill ?? COLOURS.wash,
  text,
});
const silt = (at: number): StepPaint => SILT[at] ?? { fill: COLOURS.wash, text: COLOURS.ink };

interface DifferenceStep {
  /** Smallest difference of the step, dB; its size without the sign. */
  fromDb: number;
  paint: StepPaint;
}

/** Silt is quieter than the reference. */
export const QUIETER_STEPS: readonly DifferenceStep[] = [
  { fromDb: 0, paint: silt(1) },
  { fromDb: 3, paint: silt(2) },
  { fromDb: 6, paint: silt(3) },
  { fromDb: 12, paint: silt(4) },
];
/** Water is louder. */
export const LOUDER_STEPS: readonly DifferenceStep[] = [
  { fromDb: 0, paint: water(0, COLOURS.ink) },
  { fromDb: 3, paint: water(2, { light: "#0E272E", dark: "#FFFFFF" }) },
  { fromDb: 6, paint: water(4, { light: "#FFFFFF", dark: "#0A171C" }) },
];

/** @param differenceDb rounded to 0.1 dB first, so that colour and number agree. */
export function differencePaint(differenceDb: number): StepPaint {
  const size = Math.round(Math.abs(differenceDb) * 10) / 10;
  const steps = differenceDb < 0 ? QUIETER_STEPS : LOUDER_STEPS;
  return (
    steps.findLast((step) => size >= step.fromDb)?.paint ?? {
      fill: COLOURS.sheet,
      text: COLOURS.ink,
    }
  );
}
