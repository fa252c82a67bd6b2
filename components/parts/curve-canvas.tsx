"use client";

import "uplot/dist/uPlot.min.css";
import { useMemo } from "react";
import type uPlot from "uplot";
import UplotReact from "uplot-react";
import type { Axis, Curve, CurveFigure } from "@/lib/charts/curve-figure";
import { useColourScheme, type ColourScheme } from "./use-colour-scheme";

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

const toSeries = ({ key, paint, width, dash }: Curve, scheme: ColourScheme): uPlot.Series => ({
  label: key,
  stroke: paint[scheme],
  width,
  dash: [...dash],
  spanGaps: false,
  points: { show: false },
});

interface CurveCanvasProps {
  figure: CurveFigure;
}

/** The curves of a figure on a canvas that covers its plot exactly. */
export function CurveCanvas({ figure }: CurveCanvasProps) {
  const scheme = useColourScheme();
  const options = useMemo(
    (): uPlot.Options => ({
      ...BARE,
      width: figure.plot.width,
      height: figure.plot.height,
      scales: { x: toScale(figure.xAxis, true), y: toScale(figure.yAxis, false) },
      series: [{}, ...figure.curves.map((curve) => toSeries(curve, scheme))],
    }),
    [figure, scheme],
  );
  const data = useMemo(
    (): uPlot.AlignedData => [[...figure.xs], ...figure.curves.map((curve) => [...curve.values])],
    [figure],
  );
  return <UplotReact options={options} data={data} />;
}
