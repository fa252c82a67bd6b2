"use client";

import dynamic from "next/dynamic";
import { useLayoutEffect, useRef, type KeyboardEvent, type ReactNode } from "react";
import type { CurveFigure } from "@/lib/charts/curve-figure";
import { FigureSvg } from "./figure-svg";

const CurveCanvas = dynamic(() => import("./curve-canvas").then((module) => module.CurveCanvas), {
  ssr: false,
});

interface CurvePlotProps {
  figure: CurveFigure;
  /** The finding in one sentence; the numbers stand in the table beside. */
  label: string;
  /** Over everything: crosshair and its tab. */
  children?: ReactNode;
  /** Pointer over the plot, px from the plot's left edge; null when it leaves. */
  onPoint?: (x: number | null) => void;
  onPick?: (x: number) => void;
  /** Makes the plot a tab stop: arrows move the crosshair. */
  onKeyDown?: (event: KeyboardEvent) => void;
}

/** Frame under, curves by the plotter, marks and words over: three layers of one geometry. */
export function CurvePlot({ figure, label, children, onPoint, onPick, onKeyDown }: CurvePlotProps) {
  const { width, height, plot, patterns } = figure;
  const canvas = useRef<HTMLDivElement>(null);

  // Placed by script: an inline style in the served page is against its policy.
  useLayoutEffect(() => {
    const layer = canvas.current;
    if (layer === null) return;
    layer.style.left = `${plot.x}px`;
    layer.style.top = `${plot.y}px`;
    layer.style.width = `${plot.width}px`;
    layer.style.height = `${plot.height}px`;
  }, [plot.x, plot.y, plot.width, plot.height]);

  return (
    <div
      // Three layers make one picture: no element of its own has them.
      // oxlint-disable-next-line jsx-a11y/prefer-tag-over-role
      role="img"
      aria-label={label}
      {...(onKeyDown === undefined ? {} : { tabIndex: 0, onKeyDown })}
      className="relative w-max"
    >
      <FigureSvg figure={{ width, height, patterns, shapes: figure.under }} />
      <div ref={canvas} className="pointer-events-none absolute overflow-hidden">
        <CurveCanvas figure={figure} />
      </div>
      <div className="absolute inset-0">
        <FigureSvg figure={{ width, height, patterns, shapes: figure.over }}>
          {children}
          {(onPoint !== undefined || onPick !== undefined) && (
            <rect
              {...plot}
              fill="transparent"
              className={onPick === undefined ? undefined : "cursor-pointer"}
              onPointerMove={(event) => onPoint?.(event.nativeEvent.offsetX - plot.x)}
              onPointerLeave={() => onPoint?.(null)}
              onClick={(event) => onPick?.(event.nativeEvent.offsetX - plot.x)}
            />
          )}
        </FigureSvg>
      </div>
    </div>
  );
}
