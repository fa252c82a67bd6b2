import { describe, expect, it } from "vitest";
import type { CurveFigure } from "./curve-figure";
import { toStillFigure } from "./still-figure";
import { COLOURS } from "./tokens";

const PLOT = { x: 10, y: 20, width: 100, height: 50 };
const figureOf = (values: (number | null)[]): CurveFigure => ({
  width: 120,
  height: 80,
  plot: PLOT,
  xAxis: { min: 0, max: values.length - 1, log: false },
  yAxis: { min: 0, max: 10, log: false },
  xs: values.map((_, at) => at),
  curves: [{ key: "c", values, paint: COLOURS.ink, width: 2, dash: [3, 1] }],
  patterns: [],
  under: [{ kind: "rect", ...PLOT }],
  over: [{ kind: "circle", cx: 1, cy: 1, r: 1 }],
});
const pathOf = (values: (number | null)[]): string => {
  const curve = toStillFigure(figureOf(values)).shapes.find((shape) => shape.role === "curve");
  return curve?.kind === "path" ? curve.d : "";
};

describe("toStillFigure", () => {
  it.each([
    ["goes through its points", [0, 5, 10], "M10 70L60 45L110 20"],
    ["breaks where a value is missing", [0, 5, null, 5, 0], "M10 70L35 45M85 45L110 70"],
    ["is cut at the edge, on the way out and in", [5, 15, 5], "M10 45L35 20M85 20L110 45"],
    ["crosses the whole plot", [-10, 20], "M43.33 70L76.67 20"],
    ["leaves out what lies outside", [15, 15, 15], ""],
    ["needs two points", [null, 5, null], ""],
  ])("%s", (_, values, d) => {
    expect(pathOf(values)).toBe(d);
  });

  it("keeps what lies under and over the curves, in order", () => {
    const { shapes } = toStillFigure(figureOf([0, 10]));
    expect(shapes.map((shape) => shape.kind)).toEqual(["rect", "path", "circle"]);
    expect(shapes[1]).toMatchObject({ strokeWidth: 2, dash: [3, 1], stroke: COLOURS.ink });
  });
});
