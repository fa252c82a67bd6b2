"use client";

import "uplot/dist/uPlot.min.css";
import { useMemo } from "react";
import UplotReact from "uplot-react";
import type { CurveFigure } from "@/lib/charts/curve-figure";
import { toPlotterData, toPlotterOptions } from "./plotter-options";
import { useColourScheme } from "./use-colour-scheme";

interface CurveCanvasProps {
  figure: CurveFigure;
}

/** The curves of a figure on a canvas that covers its plot exactly. */
export function CurveCanvas({ figure }: CurveCanvasProps) {
  const scheme = useColourScheme();
  const options = useMemo(() => toPlotterOptions(figure, scheme), [figure, scheme]);
  const data = useMemo(() => toPlotterData(figure), [figure]);
  return <UplotReact options={options} data={data} />;
}
