/**
 * Distortion over frequency of one run: THD in the level's line, harmonics in ink, the floor as a
 * hatched ground. Values under the floor are not drawn; uncertain ones are thin and dotted.
 */
import type { Result, ResultRun } from "../result/result-schema";
import type { Axis, CurveFigure } from "./curve-figure";
import {
  criterionShapes,
  endLabelShapes,
  floorShapes,
  frameShapes,
  gridShapes,
  markShapes,
} from "./distortion-frame";
import { DISTORTION_LAYOUT, type DistortionLayout } from "./distortion-layout";
import { toFloorPercent, toPart, type Component } from "./distortion-parts";
import { toPatterns } from "./patterns";
import { toBandScale, type BandScale } from "./scales";
import { COLOURS, type Paint } from "./tokens";

interface DistortionInput {
  result: Pick<Result, "bands" | "grid_Hz">;
  run: ResultRun;
  /** Line colour of the run's level. */
  level: Paint;
  shown: readonly Component[];
  criterionPercent: number | null;
  layout?: Partial<DistortionLayout>;
}

export interface DistortionFigure extends CurveFigure {
  readonly bands: BandScale;
}

export function toDistortionFigure(input: DistortionInput): DistortionFigure {
  const layout = { ...DISTORTION_LAYOUT, ...input.layout };
  const bands = toBandScale(
    input.result.bands.map((band) => band.exact_Hz),
    layout.pitch,
  );
  const xs = input.result.grid_Hz;
  const parts = input.shown.flatMap((component) => toPart(component, input));
  const loudest = Math.max(
    ...parts.flatMap((part) => part.curves.flatMap((c) => c.values.map((v) => v ?? 0))),
  );
  const yAxis: Axis = { min: layout.minPercent, max: loudest > 28 ? 100 : 30, log: true };
  const figure = {
    width: layout.left + bands.width + layout.right,
    height: layout.top + layout.plotHeight + (layout.xLabels ? 32 : 8),
    plot: { x: layout.left, y: layout.top, width: bands.width, height: layout.plotHeight },
    xAxis: { min: bands.toHz(0), max: bands.toHz(bands.width), log: true },
    yAxis,
  };
  return {
    ...figure,
    bands,
    xs,
    curves: parts.flatMap((part) => part.curves),
    patterns: toPatterns([]),
    under: [
      { kind: "rect", ...figure.plot, fill: COLOURS.sheet },
      ...gridShapes(figure, layout, bands, input.result),
      ...floorShapes(figure, layout, xs, toFloorPercent(input.run, input.shown)),
      ...criterionShapes(figure, layout, input.criterionPercent),
    ],
    over: [
      ...(layout.full
        ? parts.flatMap((part) => markShapes(figure, part, xs, bands, input.result))
        : []),
      ...frameShapes(figure, layout, bands),
      ...(layout.full ? endLabelShapes(figure, parts, xs) : []),
    ],
  };
}
