/** The small marks: causes, verdicts and decisions, each in a 16 x 16 box about 0,0. */
import type { Shape } from "./figure";
import type { Paint } from "./tokens";
import { DECIDABLE_CAUSES, type DecidableCause } from "../series/vocabulary";

/** What may stand as a band's cause: a decision, "distortion only" (computed), or nothing yet. */
export type CauseName = DecidableCause | "distortion only" | "open";

export const CAUSE_NAMES: readonly CauseName[] = [...DECIDABLE_CAUSES, "distortion only", "open"];

/** The words beside a mark. */
export const CAUSE_WORDS: Readonly<Record<CauseName, string>> = {
  limiter: "limiter",
  compressor: "compressor",
  equaliser: "equaliser",
  overload: "overload",
  port: "port",
  thermal: "thermal",
  none: "none",
  unresolved: "unresolved",
  "distortion only": "distortion only",
  open: "no cause yet",
};

/** The key that decides a cause, 1 to 8. */
export const causeKey = (cause: DecidableCause): number => DECIDABLE_CAUSES.indexOf(cause) + 1;

const solid = (d: string, ink: Paint): Shape => ({ kind: "path", d, fill: ink });
const drawn = (d: string, ink: Paint, strokeWidth: number): Shape => ({
  kind: "path",
  d,
  stroke: ink,
  strokeWidth,
});

const CAUSES: Readonly<Record<CauseName, (ink: Paint) => Shape[]>> = {
  limiter: (ink) => [solid("M-6-5h12v3.4h-2.2V5h-2.2V-1.6h-3.2V5h-2.2V-1.6H-6z", ink)],
  compressor: (ink) => [
    solid("M-6.4-1.6 6.4-6.2v3.5L4.6-2V5.4H2.4V-1.2L-1.7.3v5.1h-2.2V1L-6.4 1.9z", ink),
  ],
  equaliser: (ink) => [
    drawn("M-3.4-6V6M3.4-6V6", ink, 1.6),
    solid("M-6.4 1h6v3.2h-6zM.4-4.2h6V-1h-6z", ink),
  ],
  overload: (ink) => [solid("M-6 5V0l3-5 3 5 3-5 3 5v5z", ink)],
  port: (ink) => [
    drawn("M-6.3-4.6H6.3V4.6H-6.3z", ink, 1.6),
    drawn("M-4.2 1.1C-2.9-2.7-1.4-2.7 0 0s2.9 2.7 4.2-1.1", ink, 1.6),
  ],
  thermal: (ink) => [
    { kind: "circle", cx: 0, cy: 0, r: 2.5, fill: ink },
    drawn("M-5.6 0a5.6 5.6 0 0 1 11.2 0M-5.6 4.6h11.2", ink, 2),
  ],
  none: (ink) => [drawn("M-4.5 0h9", ink, 2)],
  unresolved: (ink) => [
    drawn("M-3.1-2.6a3.2 3.2 0 1 1 4.6 2.8C.4.8 0 1.4 0 2.4", ink, 2),
    solid("M-1.2 4h2.4v2.4h-2.4z", ink),
  ],
  "distortion only": (ink) => [
    solid("M-6-5.4h3.2V5.2H-6zM-1.6-.4h3.2v5.6h-3.2zM2.8 2.2H6v3H2.8z", ink),
  ],
  open: (ink) => [
    {
      kind: "rect",
      x: -4.5,
      y: -4.5,
      width: 9,
      height: 9,
      stroke: ink,
      strokeWidth: 1.3,
      dash: [2, 2],
    },
  ],
};

/** @returns the shapes of a cause in one ink. */
export const causeShapes = (cause: CauseName, ink: Paint): Shape[] => CAUSES[cause](ink);

/** A band's decision: none yet, the computed cause confirmed, or another chosen. */
export type DecisionState = "open" | "confirmed" | "changed";

interface DecisionPaints {
  mark: Paint;
  onMark: Paint;
  edge: Paint;
}

const DECISIONS: Readonly<Record<DecisionState, (paints: DecisionPaints) => Shape[]>> = {
  confirmed: ({ mark }) => [drawn("M-4.5.5-1.5 3.5 4.5-4", mark, 2.2)],
  changed: ({ mark, onMark }) => [
    { kind: "rect", x: -5, y: -5, width: 10, height: 10, fill: mark },
    drawn("M-3.2.3-1 2.5 3.2-2.6", onMark, 1.8),
  ],
  open: ({ edge }) => [
    { kind: "rect", x: -4, y: -4, width: 8, height: 8, stroke: edge, strokeWidth: 1.3 },
  ],
};

/** @returns tick, boxed tick or empty square. */
export const decisionShapes = (state: DecisionState, paints: DecisionPaints): Shape[] =>
  DECISIONS[state](paints);
