/** How harmonics are told apart: even orders round, odd square, the higher the shorter the dash. */
import { round2, type Shape } from "./figure";
import { COLOURS } from "./tokens";

export const HARMONIC_ORDERS = [2, 3, 4, 5, 6, 7, 8, 9] as const;

export interface HarmonicLine {
  readonly order: number;
  readonly width: number;
  readonly dash: readonly number[];
  readonly filled: boolean;
  /** Edge or diameter of the mark, px. */
  readonly size: number;
}

const line = (
  order: number,
  width: number,
  dash: readonly number[],
  filled: boolean,
  size: number,
): HarmonicLine => ({ order, width, dash, filled, size });

const LINES: readonly HarmonicLine[] = [
  line(2, 1.9, [], true, 8),
  line(3, 1.9, [11, 4], true, 7.2),
  line(4, 1.5, [7, 3.5], false, 8),
  line(5, 1.5, [7, 3.5], false, 7.2),
  line(6, 1.2, [4, 3], false, 6),
  line(7, 1.2, [4, 3], false, 5.4),
  line(8, 1.2, [1.6, 3], false, 6),
  line(9, 1.2, [8, 3, 1.6, 3], false, 5.4),
];

/** @throws RangeError outside the orders 2 to 9. */
export function harmonicLine(order: number): HarmonicLine {
  const found = LINES.find((l) => l.order === order);
  if (found === undefined) throw new RangeError(`no line for harmonic ${order}`);
  return found;
}

export function harmonicMark({ order, filled, size }: HarmonicLine, x: number, y: number): Shape {
  const look = filled
    ? { fill: COLOURS.ink, stroke: COLOURS.sheet, strokeWidth: 1 }
    : { fill: COLOURS.sheet, stroke: COLOURS.ink, strokeWidth: 1.5 };
  return order % 2 === 0
    ? { kind: "circle", role: `mark-${order}`, cx: x, cy: y, r: size / 2, ...look }
    : {
        kind: "rect",
        role: `mark-${order}`,
        x: round2(x - size / 2),
        y: round2(y - size / 2),
        width: size,
        height: size,
        ...look,
      };
}

/** A sample of the line with its mark, for keys. @param x, y left end; 32 px long. */
export function harmonicSample(order: number, x: number, y: number): Shape[] {
  const look = harmonicLine(order);
  return [
    {
      kind: "line",
      x1: x,
      y1: y,
      x2: x + 32,
      y2: y,
      stroke: COLOURS.ink,
      strokeWidth: look.width,
      ...(look.dash.length > 0 ? { dash: look.dash } : {}),
    },
    harmonicMark(look, x + 16, y),
  ];
}

/** Bands by which an order's marks are shifted, so that marks of different orders do not stack. */
export const markShift = (order: number): number => ((2 * order) % 3) - 1;
