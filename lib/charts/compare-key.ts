/** Beside the compared lines: the names at their ends, and what the lines mean. */
import { letterOf, toOpenWords } from "../compare/compare-words";
import type { Comparison } from "../compare/comparison-schema";
import type { CompareLine, ComparePlace } from "./compare";
import { letterShapes } from "./compare-paints";
import { round2, type Shape } from "./figure";
import { spreadLabels } from "./labels";
import { COLOURS, levelRamp } from "./tokens";

/** The names at the line ends, with leaders; a test that ends in a hole has its name without one. */
export function nameShapes(lines: readonly CompareLine[], { top, foot }: ComparePlace): Shape[] {
  const named = lines.map((line) => ({
    line,
    end: line.points.at(-1)?.y ?? null,
    wish: line.points.findLast((point) => point !== null)?.y ?? foot - 40,
  }));
  const spread = spreadLabels(
    named.map(({ wish }) => wish),
    22,
    top + 10,
    foot - 120,
  );
  return named.flatMap(({ line, end, wish }, nth): Shape[] => {
    const y = round2(spread[nth] ?? wish);
    return [
      ...(end === null
        ? []
        : [
            {
              kind: "path",
              role: "leader",
              d: `M4 ${end}H10L18 ${y}H22`,
              stroke: COLOURS.ink3,
            } as const,
          ]),
      ...letterShapes(line.at, 32, y),
      {
        kind: "text",
        role: "name",
        x: 46,
        y: y + 5,
        text: line.test.model,
        size: 15,
        weight: 600,
        family: "prose",
        fill: COLOURS.ink,
      },
    ];
  });
}

/** What the lines mean, at the key's foot. */
export function keyShapes(comparison: Comparison, { foot }: ComparePlace): Shape[] {
  const { tests } = comparison;
  if (tests.length === 0) return [];
  const line = { x1: 24, x2: 50, stroke: COLOURS.ink } as const;
  const words = (text: string, y: number): Shape => ({
    kind: "text",
    x: 58,
    y: y + 4,
    text,
    size: 11,
    fill: COLOURS.ink2,
  });
  const [y1, y2, y3] = [foot - 86, foot - 62, foot - 24];
  const [open, ...rest] = splitWords(toOpenWords(tests));
  return [
    { kind: "line", ...line, y1, y2: y1, strokeWidth: 4 },
    words("limit reached", y1),
    { kind: "line", ...line, y1: y2, y2, strokeWidth: 3.2 },
    { kind: "line", ...line, y1: y2, y2, stroke: COLOURS.sheet, strokeWidth: 1.2 },
    words(open ?? "", y2),
    ...rest.map((part, nth) => words(part, y2 + 14 * (nth + 1))),
    {
      kind: "rect",
      x: 24,
      y: y3 - 7,
      width: 26,
      height: 14,
      fill: levelRamp(4)[0]?.fill ?? COLOURS.wash,
    },
    words(`${letterOf(0)}, reference`, y3),
  ];
}

/** Two lines of what fits the key. */
function splitWords(text: string): string[] {
  const at = text.indexOf(" to ") + 3;
  return at < 3 ? [text] : [text.slice(0, at), text.slice(at + 1)];
}
