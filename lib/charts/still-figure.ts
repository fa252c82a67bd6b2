/** A figure with curves as plain shapes, for files and print: what the plotter draws, as paths. */
import { toPlotX, toPlotY, type Curve, type CurveFigure } from "./curve-figure";
import { round2, type Figure, type Shape } from "./figure";

type Point = readonly [x: number, y: number];

/** @returns the same figure without a plotter: frame, curves kept within the plot, marks and words. */
export const toStillFigure = (figure: CurveFigure): Figure => ({
  width: figure.width,
  height: figure.height,
  patterns: figure.patterns,
  shapes: [
    ...figure.under,
    ...figure.curves.flatMap((one) => curveShapes(figure, one)),
    ...figure.over,
  ],
});

function curveShapes(figure: CurveFigure, curve: Curve): Shape[] {
  const d = toClippedPath(figure, curve);
  return d === ""
    ? []
    : [
        {
          kind: "path",
          role: "curve",
          d,
          stroke: curve.paint,
          strokeWidth: curve.width,
          ...(curve.dash.length === 0 ? {} : { dash: curve.dash }),
        },
      ];
}

/** A path through the points; what lies outside the plot is cut off at its edge, as the plotter's canvas does. */
function toClippedPath(figure: CurveFigure, { values }: Curve): string {
  let path = "";
  let before: Point | null = null;
  let pen: Point | null = null;
  for (const [at, x] of figure.xs.entries()) {
    const value = values[at];
    const point: Point | null =
      value === null || value === undefined ? null : [toPlotX(figure, x), toPlotY(figure, value)];
    const cut = before === null || point === null ? null : cutToPlot(figure, before, point);
    if (cut !== null) {
      const [from, to] = cut;
      const goesOn = pen !== null && pen[0] === from[0] && pen[1] === from[1];
      path += `${goesOn ? "" : `M${from[0]} ${from[1]}`}L${to[0]} ${to[1]}`;
      pen = to;
    }
    before = point;
  }
  return path;
}

/** The part of a line that lies in the plot; null where none does. */
function cutToPlot(
  { plot }: Pick<CurveFigure, "plot">,
  from: Point,
  to: Point,
): [Point, Point] | null {
  let start = 0;
  let end = 1;
  const step: Point = [to[0] - from[0], to[1] - from[1]];
  const sides: [at: number, step: number, low: number, high: number][] = [
    [from[0], step[0], plot.x, plot.x + plot.width],
    [from[1], step[1], plot.y, plot.y + plot.height],
  ];
  for (const [at, along, low, high] of sides) {
    if (along === 0) {
      if (at < low || at > high) return null;
      continue;
    }
    const ends = [(low - at) / along, (high - at) / along];
    start = Math.max(start, Math.min(...ends));
    end = Math.min(end, Math.max(...ends));
  }
  if (start > end) return null;
  const point = (share: number): Point => [
    round2(from[0] + share * step[0]),
    round2(from[1] + share * step[1]),
  ];
  return [start === 0 ? from : point(start), end === 1 ? to : point(end)];
}
