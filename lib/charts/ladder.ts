/** The ladder of a plan as steps of water: planned levels in capture order, and how each one stands. */
import type { Figure, Shape } from "./figure";
import { COLOURS, levelRamp, type LevelPaint, type Paint } from "./tokens";

/**
 * full: planned on the plan page. in: a recording is in. due: its turn. locked: not open yet.
 * Recordings without a level (calibrator, room noise) have `levelDb` null.
 */
export interface LadderStep {
  levelDb: number | null;
  longTerm: boolean;
  state: "full" | "in" | "due" | "locked";
  mark: "ok" | "bad" | "going" | "locked" | null;
  /** Under the step, one or two lines. */
  label: readonly string[];
  /** Over the step: "−29 dBFS". */
  note: string | null;
}

export interface LadderLayout {
  stepWidth: number;
  gap: number;
  /** Heights of the lowest and of the loudest level, px. */
  lowHeight: number;
  highHeight: number;
  labelWeight: 400 | 600;
}

/** The picture on the runs page. */
export const RUNS_LADDER: LadderLayout = {
  stepWidth: 54,
  gap: 8,
  lowHeight: 34,
  highHeight: 89,
  labelWeight: 400,
};

/** The picture on the plan. */
export const PLAN_LADDER: LadderLayout = {
  stepWidth: 72,
  gap: 8,
  lowHeight: 26,
  highHeight: 91,
  labelWeight: 600,
};

const STILL_HEIGHT = 26;
const MARK_ROOM = 22;
const LINE = 2.5;
const LABEL_LINE = 13;

/** Steps stand on one ground line; heights follow the levels between the lowest and the loudest. */
export function toLadderFigure(steps: readonly LadderStep[], layout: LadderLayout): Figure {
  const levels = [
    ...new Set(steps.flatMap((step) => (step.levelDb === null ? [] : [step.levelDb]))),
  ].sort((a, b) => a - b);
  const ramp = levelRamp(levels.length);
  const ground = MARK_ROOM + layout.highHeight;
  const lines = Math.max(1, ...steps.map((step) => step.label.length));
  const shapes = steps.map((step, at): Shape => {
    const x = at * (layout.stepWidth + layout.gap);
    const height = toStepHeight(step.levelDb, levels, layout);
    const paint = step.levelDb === null ? undefined : ramp[levels.indexOf(step.levelDb)];
    return {
      kind: "group",
      role: "step",
      x,
      y: 0,
      shapes: toStepShapes(step, { height, ground, paint, layout }),
    };
  });
  const width = Math.max(0, steps.length * (layout.stepWidth + layout.gap) - layout.gap);
  if (steps.every((step) => step.state === "full")) {
    shapes.push({
      kind: "line",
      role: "ground",
      x1: 0,
      y1: ground,
      x2: width,
      y2: ground,
      stroke: COLOURS.ink,
      crisp: true,
    });
  }
  return { width, height: ground + 6 + lines * LABEL_LINE, patterns: [], shapes };
}

/** Equal levels, equal heights; one level alone stands at full height. */
export function toStepHeight(
  levelDb: number | null,
  levels: readonly number[],
  layout: LadderLayout,
): number {
  if (levelDb === null) return STILL_HEIGHT;
  const low = levels[0] ?? levelDb;
  const high = levels.at(-1) ?? levelDb;
  if (high === low) return layout.highHeight;
  const share = (levelDb - low) / (high - low);
  return layout.lowHeight + share * (layout.highHeight - layout.lowHeight);
}

interface StepPlace {
  height: number;
  ground: number;
  paint: LevelPaint | undefined;
  layout: LadderLayout;
}

function toStepShapes(step: LadderStep, place: StepPlace): Shape[] {
  const { ground, layout, height } = place;
  const top = ground - height;
  const middle = layout.stepWidth / 2;
  const shapes: Shape[] = [];
  if (step.state === "full" || step.state === "in") shapes.push(...toWater(step, place));
  if (step.state !== "full") {
    const solid = step.state === "in";
    shapes.push({
      kind: "path",
      role: solid ? "outline" : "dashes",
      d: `M0.5 ${top}V${ground}H${layout.stepWidth - 0.5}V${top}`,
      stroke: solid ? COLOURS.ink : COLOURS.edge,
      strokeWidth: 1.2,
      ...(solid ? {} : { dash: [3, 3] }),
    });
  }
  if (step.mark !== null) {
    shapes.push({
      kind: "group",
      role: `mark-${step.mark}`,
      x: middle - 7,
      y: top - 20,
      shapes: MARKS[step.mark],
    });
  }
  if (step.note !== null) {
    shapes.push(toText(step.note, middle, top - 7, COLOURS.ink2, 400, 11));
  }
  step.label.forEach((line, at) => {
    const paint = layout.labelWeight === 600 ? COLOURS.ink : COLOURS.ink2;
    const size = layout.labelWeight === 600 ? 12 : 11;
    shapes.push(
      toText(line, middle, ground + 16 + at * LABEL_LINE, paint, layout.labelWeight, size),
    );
  });
  return shapes;
}

/** A long-term run keeps the colour and is cut in two. */
function toWater(step: LadderStep, { height, ground, paint, layout }: StepPlace): Shape[] {
  const top = ground - height;
  const box = { kind: "rect", x: 0, width: layout.stepWidth } as const;
  if (paint === undefined) {
    return [{ ...box, role: "still", y: top, height, fill: COLOURS.wash }];
  }
  const shapes: Shape[] = [
    { ...box, role: "water", y: top, height, fill: paint.fill },
    { ...box, role: "tideline", y: top, height: LINE, fill: paint.line },
  ];
  if (step.longTerm) {
    shapes.push({ ...box, role: "cut", y: top + height / 2 - 4, height: 8, fill: COLOURS.page });
  }
  return shapes;
}

const toText = (
  text: string,
  x: number,
  y: number,
  fill: Paint,
  weight: 400 | 600,
  size: number,
): Shape => ({ kind: "text", text, x, y, fill, weight, size, anchor: "middle" });

/** The verdict marks, in a square of 14 px. */
const MARKS: Readonly<Record<NonNullable<LadderStep["mark"]>, readonly Shape[]>> = {
  ok: [{ kind: "path", d: "M2 7.5 5.6 11 12 3.5", stroke: COLOURS.ink, strokeWidth: 2.2 }],
  bad: [
    { kind: "rect", x: 1, y: 1, width: 12, height: 12, fill: COLOURS.fault },
    { kind: "path", d: "M4 4 10 10M10 4 4 10", stroke: COLOURS.sheet, strokeWidth: 1.8 },
  ],
  going: [
    {
      kind: "rect",
      x: 1.8,
      y: 1.8,
      width: 10.4,
      height: 10.4,
      stroke: COLOURS.ink2,
      strokeWidth: 1.5,
    },
    { kind: "rect", x: 1.8, y: 7, width: 10.4, height: 5.2, fill: COLOURS.ink2 },
  ],
  locked: [
    {
      kind: "path",
      d: "M2 6.5h10v6.7H2zM4.2 6.3V4.2a2.8 2.8 0 0 1 5.6 0v2.1",
      stroke: COLOURS.ink3,
      strokeWidth: 1.5,
    },
  ],
};
