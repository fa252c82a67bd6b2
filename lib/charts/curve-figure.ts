/**
 * A figure with curves: shapes under and over them, and the curves as numbers on two scales, so
 * that an interactive plotter can draw them and print can make paths of them, by the same rule.
 */
import type { Pattern, Shape } from "./figure";
import { round2 } from "./figure";
import type { Paint } from "./tokens";

export interface Axis {
  readonly min: number;
  readonly max: number;
  readonly log: boolean;
}

export interface Curve {
  readonly key: string;
  /** [points] on `xs`; null where there is no value: the line breaks. */
  readonly values: readonly (number | null)[];
  readonly paint: Paint;
  readonly width: number;
  readonly dash: readonly number[];
}

export interface CurveFigure {
  readonly width: number;
  readonly height: number;
  /** Where the curves are drawn. */
  readonly plot: {
    readonly x: number;
    readonly y: number;
    readonly width: number;
    readonly height: number;
  };
  readonly xAxis: Axis;
  readonly yAxis: Axis;
  readonly xs: readonly number[];
  readonly curves: readonly Curve[];
  readonly patterns: readonly Pattern[];
  readonly under: readonly Shape[];
  readonly over: readonly Shape[];
}

/** @returns 0 at the axis' minimum, 1 at its maximum. */
export function toShare({ min, max, log }: Axis, value: number): number {
  return log ? Math.log(value / min) / Math.log(max / min) : (value - min) / (max - min);
}

type Place = Pick<CurveFigure, "plot" | "xAxis" | "yAxis">;

export const toPlotX = ({ plot, xAxis }: Pick<Place, "plot" | "xAxis">, value: number): number =>
  round2(plot.x + toShare(xAxis, value) * plot.width);

export const toPlotY = ({ plot, yAxis }: Pick<Place, "plot" | "yAxis">, value: number): number =>
  round2(plot.y + (1 - toShare(yAxis, value)) * plot.height);

/** @returns an SVG path through the points, broken where a value is missing; "" where none is there. */
export function toCurvePath(
  figure: Place,
  xs: readonly number[],
  values: readonly (number | null)[],
): string {
  let path = "";
  let broken = true;
  for (const [at, x] of xs.entries()) {
    const value = values[at];
    if (value === null || value === undefined) {
      broken = true;
      continue;
    }
    path += `${broken ? "M" : "L"}${toPlotX(figure, x)} ${toPlotY(figure, value)}`;
    broken = false;
  }
  return path;
}
