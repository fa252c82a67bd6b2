/** The map of differences: one row per test under the reference, on the plot's pitch; and its key. */
import { toDifferenceCell, toUncertaintyWords } from "../compare/compare-words";
import type { Comparison, Difference } from "../compare/comparison-schema";
import { differencePaint, letterShapes, LOUDER_STEPS, QUIETER_STEPS } from "./compare-paints";
import { round2, type Figure, type Shape } from "./figure";
import type { BandScale } from "./scales";
import { COLOURS } from "./tokens";

export const MAP_ROW = 30;
const CELL = 28;
const TIGHT_PITCH = 36;

/** "B re A" at the left of a row. */
export const differenceRowShapes = (at: number, y: number, staffWidth: number): Shape[] => [
  ...letterShapes(at, staffWidth - 58, y + CELL / 2),
  {
    kind: "text",
    x: staffWidth - 9,
    y: y + CELL / 2 + 4,
    text: "re A",
    size: 11,
    anchor: "end",
    fill: COLOURS.ink2,
  },
];

/** @param differences [bands] */
export const differenceMapShapes = (
  differences: readonly Difference[],
  bands: BandScale,
  y: number,
): Shape[] =>
  differences.flatMap((difference, at) =>
    cellShapes(difference, { x: bands.left(at) + 1, y, width: bands.pitch - 2 }),
  );

interface CellPlace {
  x: number;
  y: number;
  width: number;
  height?: number;
}

function cellShapes(difference: Difference, { x, y, width, height = CELL }: CellPlace): Shape[] {
  const { shown, difference_dB: db } = difference;
  const text = toDifferenceCell(difference);
  const known = shown === "value" && db !== null;
  const paint = known ? differencePaint(db) : { text: COLOURS.ink3 };
  return [
    known
      ? {
          kind: "rect",
          role: "cell",
          x,
          y,
          width,
          height,
          fill: differencePaint(db).fill,
        }
      : {
          kind: "rect",
          role: shown === "none" ? "cell-none" : "cell-unknown",
          x: x + 0.5,
          y: y + 0.5,
          width: width - 1,
          height: height - 1,
          stroke: COLOURS.edge,
          dash: [2, 2],
        },
    {
      kind: "text",
      role: "cell-text",
      x: round2(x + width / 2),
      y: round2(y + height / 2 + 4),
      text,
      size: 11,
      anchor: "middle",
      fill: paint.text,
      ...(width < TIGHT_PITCH ? { tighten: 0.7 } : {}),
    },
  ];
}

export interface MapKeyItem {
  before?: string;
  /** What is drawn; the words stand beside it. */
  figure: Figure;
  words: string;
}

const SWATCH = 33;
const KEY_HEIGHT = 34;

/** The key of the map, item by item, so that it wraps where room is short. */
export function toMapKey(comparison: Comparison): MapKeyItem[] {
  const box = (shown: Difference["shown"]): Figure => ({
    width: SWATCH,
    height: KEY_HEIGHT,
    patterns: [],
    shapes: cellShapes(
      { shown, difference_dB: null, or_more: false, uncertainty_dB: null },
      { x: 0, y: 4, width: SWATCH, height: 16 },
    ),
  });
  const orMore: Difference = {
    shown: "value",
    difference_dB: -8.4,
    or_more: true,
    uncertainty_dB: null,
  };
  return [
    { before: "quieter than A", figure: toStepsFigure(), words: "louder than A, dB" },
    {
      figure: {
        width: 44,
        height: KEY_HEIGHT,
        patterns: [],
        shapes: cellShapes(orMore, { x: 0, y: 4, width: 44, height: 16 }),
      },
      words: "8.4 dB or more quieter",
    },
    { figure: box("none"), words: `no difference shown: ${toUncertaintyWords(comparison)}` },
    { figure: box("unknown"), words: "not known" },
  ];
}

function toStepsFigure(): Figure {
  const quieter = [...QUIETER_STEPS].reverse();
  const paints = [...quieter, ...LOUDER_STEPS].map((step) => step.paint);
  const edges = [
    ...quieter.slice(0, -1).map((step) => step.fromDb),
    null,
    ...LOUDER_STEPS.slice(1).map((step) => step.fromDb),
  ];
  return {
    width: paints.length * (SWATCH + 1),
    height: KEY_HEIGHT,
    patterns: [],
    shapes: [
      ...paints.map((paint, at): Shape => ({
        kind: "rect",
        role: "key-step",
        x: at * (SWATCH + 1),
        y: 4,
        width: SWATCH,
        height: 16,
        fill: paint.fill,
      })),
      ...edges.flatMap((edge, at): Shape[] =>
        edge === null
          ? []
          : [
              {
                kind: "text",
                x: (at + 1) * (SWATCH + 1) - 0.5,
                y: 33,
                text: String(edge),
                size: 11,
                anchor: "middle",
                fill: COLOURS.ink2,
              },
            ],
      ),
    ],
  };
}
