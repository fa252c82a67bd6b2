/** Hatches as plain lines, for what knows no patterns: print. */
import {
  round2,
  type Figure,
  type Pattern,
  type PathShape,
  type RectShape,
  type Shape,
} from "../charts/figure";

/**
 * The same figure without patterns: every rectangle that one fills becomes its ground and the
 * lines that fall into it. Tiles start at the origin of the group that holds the rectangle.
 * @throws RangeError where anything but a rectangle is filled with a pattern
 */
export function drawHatches({ patterns, ...figure }: Figure): Figure {
  const byName = new Map(patterns.map((pattern) => [pattern.name, pattern]));
  const draw = (shapes: readonly Shape[]): Shape[] =>
    shapes.flatMap((shape): Shape[] => {
      if (shape.kind === "group") return [{ ...shape, shapes: draw(shape.shapes) }];
      if (!("fill" in shape) || shape.fill === undefined || !("pattern" in shape.fill)) {
        return [shape];
      }
      const pattern = byName.get(shape.fill.pattern);
      if (shape.kind !== "rect" || pattern === undefined) {
        throw new RangeError(`a ${shape.kind} cannot be hatched with "${shape.fill.pattern}"`);
      }
      return hatchRect(shape, pattern);
    });
  return { ...figure, patterns: [], shapes: draw(figure.shapes) };
}

function hatchRect(rect: RectShape, pattern: Pattern): Shape[] {
  const { x, y, width, height, stroke, strokeWidth } = rect;
  const lines = hatchLines({ x, y, width, height }, pattern);
  const drawn: PathShape = {
    kind: "path",
    role: "hatch",
    d: lines.map(([from, to]) => `M${from[0]} ${from[1]}L${to[0]} ${to[1]}`).join(""),
    stroke: pattern.line,
    strokeWidth: pattern.width,
  };
  return [
    { kind: "rect", x, y, width, height, fill: pattern.ground },
    ...(lines.length === 0 ? [] : [drawn]),
    ...(stroke === undefined
      ? []
      : [
          {
            kind: "rect",
            x,
            y,
            width,
            height,
            stroke,
            ...(strokeWidth === undefined ? {} : { strokeWidth }),
          } satisfies Shape,
        ]),
  ];
}

type Point = readonly [x: number, y: number];
type Box = Pick<RectShape, "x" | "y" | "width" | "height">;

/** @returns both ends of every line of the pattern that crosses the box, kept within it. */
export function hatchLines(box: Box, pattern: Pattern): [Point, Point][] {
  const turn = (pattern.turn * Math.PI) / 180;
  // Across the lines, and along them.
  const across: Point = [Math.cos(turn), Math.sin(turn)];
  const along: Point = [-Math.sin(turn), Math.cos(turn)];
  const corners: Point[] = [
    [box.x, box.y],
    [box.x + box.width, box.y],
    [box.x, box.y + box.height],
    [box.x + box.width, box.y + box.height],
  ];
  const offsets = corners.map(([x, y]) => x * across[0] + y * across[1] - pattern.offset);
  const first = Math.ceil(Math.min(...offsets) / pattern.pitch);
  const last = Math.floor(Math.max(...offsets) / pattern.pitch);
  const lines: [Point, Point][] = [];
  for (let at = first; at <= last; at += 1) {
    const distance = pattern.offset + at * pattern.pitch;
    const through: Point = [distance * across[0], distance * across[1]];
    const cut = cutLine(through, along, box);
    if (cut !== null) lines.push(cut);
  }
  return lines;
}

/** The part of an endless line that lies in the box; null where it passes by. */
function cutLine(through: Point, along: Point, box: Box): [Point, Point] | null {
  let from = -Infinity;
  let to = Infinity;
  const sides: [number, number, number, number][] = [
    [through[0], along[0], box.x, box.x + box.width],
    [through[1], along[1], box.y, box.y + box.height],
  ];
  for (const [start, step, low, high] of sides) {
    if (Math.abs(step) < 1e-9) {
      if (start < low || start > high) return null;
      continue;
    }
    const ends = [(low - start) / step, (high - start) / step];
    from = Math.max(from, Math.min(...ends));
    to = Math.min(to, Math.max(...ends));
  }
  if (to - from < 1e-6) return null;
  const point = (t: number): Point => [
    round2(through[0] + t * along[0]),
    round2(through[1] + t * along[1]),
  ];
  return [point(from), point(to)];
}
