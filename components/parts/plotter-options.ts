/** How the plotter is told to draw a figure's curves: on the figure's own scales, and nothing else. */
import type uPlot from "uplot";
import type { Axis, Curve, CurveFigure } from "@/lib/charts/curve-figure";

/** Only the curves: the frame, the marks and the words are shapes under and over them. */
const BARE = {
  pxAlign: 0,
  padding: [0, 0, 0, 0],
  legend: { show: false },
  cursor: { show: false },
  axes: [{ show: false }, { show: false }],
} satisfies Partial<uPlot.Options>;

const toScale = ({ min, max, log }: Axis, time: boolean): uPlot.Scale => ({
  ...(time ? { time: false } : {}),
  // The plotter types these two as an enum that exists in its types alone.
  // oxlint-disable-next-line typescript/no-unsafe-enum-assignment
  distr: log ? 3 : 1,
  log: 10,
  range: [min, max],
});

const toSeries = ({ key, paint, width, dash }: Curve, scheme: "light" | "dark"): uPlot.Series => ({
  label: key,
  stroke: paint[scheme],
  width,
  dash: [...dash],
  spanGaps: false,
  points: { show: false },
});

/** The canvas covers the plot exactly. */
export const toPlotterOptions = (figure: CurveFigure, scheme: "light" | "dark"): uPlot.Options => ({
  ...BARE,
  width: figure.plot.width,
  height: figure.plot.height,
  scales: { x: toScale(figure.xAxis, true), y: toScale(figure.yAxis, false) },
  series: [{}, ...figure.curves.map((curve) => toSeries(curve, scheme))],
});

export const toPlotterData = (figure: CurveFigure): uPlot.AlignedData => [
  [...figure.xs],
  ...figure.curves.map((curve) => [...curve.values]),
];
