/** Everything of the distortion figure but its curves: grid, floor, criterion, marks, axes, end labels. */
import type { Result } from "../result/result-schema";
import { toCurvePath, toPlotX, toPlotY, type Axis, type CurveFigure } from "./curve-figure";
import type { DistortionLayout } from "./distortion-layout";
import { sayComponent, THD, toPercent, type Part } from "./distortion-parts";
import type { Shape } from "./figure";
import { formatCriterionPercent, formatFrequencyShort, formatNumber, formatPlain } from "./format";
import { neatlineShapes } from "./frame-shapes";
import { harmonicLine, harmonicMark, markShift } from "./harmonic-lines";
import { spreadLabels } from "./labels";
import { NOISE } from "./patterns";
import { isLabelledBand, type BandScale } from "./scales";
import { COLOURS } from "./tokens";

const DB_TICKS = [-80, -70, -60, -50, -40, -30, -20, -10, 0];
type Bands = Pick<Result, "bands">;

type Frame = Pick<CurveFigure, "plot" | "xAxis" | "yAxis">;

export function gridShapes(
  figure: Frame,
  layout: DistortionLayout,
  bands: BandScale,
  result: Bands,
): Shape[] {
  const { plot, yAxis } = figure;
  const right = plot.x + plot.width;
  const left = layout.unit === "percent" ? percentTicks(layout, yAxis) : dbTicks(yAxis);
  return [
    ...left.flatMap(({ percent, text }): Shape[] => {
      const y = toPlotY(figure, percent);
      return [
        {
          kind: "line",
          role: "grid",
          x1: plot.x,
          y1: y,
          x2: right,
          y2: y,
          stroke: COLOURS.rule,
          crisp: true,
        },
        {
          kind: "text",
          role: "tick",
          x: plot.x - 9,
          y: y + 4,
          text,
          size: 12,
          fill: COLOURS.ink,
          anchor: "end",
        },
      ];
    }),
    ...(layout.full
      ? result.bands.flatMap((band, at): Shape[] => {
          const x = plot.x + bands.centre(at);
          return isLabelledBand(band.nominal_Hz)
            ? [
                {
                  kind: "line",
                  x1: x,
                  y1: plot.y,
                  x2: x,
                  y2: plot.y + plot.height,
                  stroke: COLOURS.rule,
                  dash: [1, 3],
                  crisp: true,
                },
              ]
            : [];
        })
      : []),
    ...(layout.xLabels
      ? result.bands.flatMap((band, at): Shape[] =>
          isLabelledBand(band.nominal_Hz, !layout.full)
            ? [
                {
                  kind: "text",
                  role: "band-label",
                  x: plot.x + bands.centre(at),
                  y: plot.y + plot.height + 25,
                  text: formatFrequencyShort(band.nominal_Hz),
                  size: 12,
                  fill: COLOURS.ink,
                  anchor: "middle",
                },
              ]
            : [],
        )
      : []),
  ];
}

interface Tick {
  readonly percent: number;
  readonly text: string;
}

const percentTicks = (layout: DistortionLayout, axis: Axis): Tick[] =>
  layout.ticksPercent
    .filter((percent) => percent >= axis.min && percent <= axis.max)
    .map((percent) => ({ percent, text: formatPlain(percent) }));

const dbTicks = (axis: Axis): Tick[] =>
  DB_TICKS.map((db) => ({ percent: toPercent(db), text: formatNumber(db, 0) })).filter(
    ({ percent }) => percent >= axis.min && percent <= axis.max,
  );

export function floorShapes(
  figure: Frame,
  layout: DistortionLayout,
  xs: readonly number[],
  floor: readonly (number | null)[],
): Shape[] {
  const { plot, yAxis, xAxis } = figure;
  const inside = xs.flatMap((hz, at): [number, number][] => {
    const value = floor[at];
    return value === null || value === undefined || hz < xAxis.min || hz > xAxis.max
      ? []
      : [[hz, Math.min(Math.max(value, yAxis.min), yAxis.max)]];
  });
  const [first, last] = [inside[0], inside.at(-1)];
  if (first === undefined || last === undefined || inside.every(([, value]) => value <= yAxis.min))
    return [];
  const line = toCurvePath(
    figure,
    inside.map(([hz]) => hz),
    inside.map(([, value]) => value),
  );
  const foot = plot.y + plot.height;
  const shapes: Shape[] = [
    {
      kind: "path",
      role: "floor",
      d: `${line}L${toPlotX(figure, last[0])} ${foot}L${toPlotX(figure, first[0])} ${foot}z`,
      fill: { pattern: NOISE },
    },
    { kind: "path", role: "floor-line", d: line, stroke: COLOURS.noiseLine },
  ];
  if (!layout.full) return shapes;
  return [
    ...shapes,
    { kind: "rect", x: plot.x + 8, y: foot - 27, width: 214, height: 19, fill: COLOURS.sheet },
    {
      kind: "text",
      role: "floor-words",
      x: plot.x + 14,
      y: foot - 13,
      text: "not resolvable: below the noise",
      size: 11,
      fill: COLOURS.ink2,
    },
  ];
}

export function criterionShapes(
  figure: Frame,
  layout: DistortionLayout,
  percent: number | null,
): Shape[] {
  if (percent === null || percent < figure.yAxis.min || percent > figure.yAxis.max) return [];
  const y = toPlotY(figure, percent);
  const right = figure.plot.x + figure.plot.width;
  const rule: Shape = {
    kind: "line",
    role: "criterion",
    x1: figure.plot.x,
    y1: y,
    x2: right,
    y2: y,
    stroke: COLOURS.ink3,
    strokeWidth: 1.5,
    dash: [2, 3],
  };
  if (!layout.full) return [rule];
  return [
    rule,
    {
      kind: "text",
      x: right - 6,
      y: y - 6,
      text: `criterion ${formatCriterionPercent(percent)}`,
      size: 11,
      fill: COLOURS.ink2,
      anchor: "end",
      halo: COLOURS.sheet,
    },
  ];
}

/** Nearest grid point that holds a value within a twelfth of an octave. */
function valueNear(
  values: readonly (number | null)[],
  xs: readonly number[],
  hz: number,
): number | null {
  let best: number | null = null;
  let nearest = 1 / 12;
  for (const [at, x] of xs.entries()) {
    const away = Math.abs(Math.log2(x / hz));
    const value = values[at];
    if (away < nearest && value !== null && value !== undefined) {
      nearest = away;
      best = value;
    }
  }
  return best;
}

export function markShapes(
  figure: Frame,
  { component, curves }: Part,
  xs: readonly number[],
  bands: BandScale,
  result: Bands,
): Shape[] {
  if (component === THD) return [];
  const look = harmonicLine(component);
  return result.bands.flatMap((band, at): Shape[] => {
    if (!isLabelledBand(band.nominal_Hz)) return [];
    const shifted = result.bands[at + markShift(component)];
    if (shifted === undefined) return [];
    const value = valueNear(curves[0].values, xs, shifted.exact_Hz);
    if (value === null || value < figure.yAxis.min) return [];
    return [
      harmonicMark(
        look,
        figure.plot.x + bands.centre(at + markShift(component)),
        toPlotY(figure, value),
      ),
    ];
  });
}

export function frameShapes(figure: Frame, layout: DistortionLayout, bands: BandScale): Shape[] {
  const { plot, yAxis } = figure;
  const foot = plot.y + plot.height;
  const right = plot.x + plot.width;
  if (!layout.full) return [{ kind: "rect", ...plot, stroke: COLOURS.ink }];
  const other = layout.unit === "percent" ? dbTicks(yAxis) : percentTicks(layout, yAxis);
  const names = layout.unit === "percent" ? ["% of fundamental", "dB"] : ["dB re fundamental", "%"];
  return [
    {
      kind: "path",
      d: `M${plot.x} ${plot.y}V${foot}M${right} ${plot.y}V${foot}`,
      stroke: COLOURS.ink,
    },
    ...other.flatMap(({ percent, text }): Shape[] => {
      const y = toPlotY(figure, percent);
      return [
        { kind: "line", x1: right, y1: y, x2: right + 5, y2: y, stroke: COLOURS.ink, crisp: true },
        {
          kind: "text",
          role: "tick-right",
          x: right + 9,
          y: y + 4,
          text,
          size: 12,
          fill: COLOURS.ink2,
        },
      ];
    }),
    { kind: "text", x: 20, y: plot.y - 10, text: names[0] ?? "", size: 11, fill: COLOURS.ink2 },
    {
      kind: "text",
      x: right + 9,
      y: plot.y - 10,
      text: names[1] ?? "",
      size: 11,
      fill: COLOURS.ink2,
    },
    { kind: "group", role: "neatline", x: plot.x, y: 0, shapes: neatlineShapes(bands, foot) },
    {
      kind: "text",
      x: plot.x - 9,
      y: foot + 25,
      text: "Hz",
      size: 11,
      fill: COLOURS.ink2,
      anchor: "end",
    },
  ];
}

const END_LABEL_GAP = 14;

/** Names at the ends of the lines, pushed apart where they would touch. */
export function endLabelShapes(
  figure: Frame,
  parts: readonly Part[],
  xs: readonly number[],
): Shape[] {
  const ends = parts.flatMap(({ component, curves: [certain, uncertain] }) => {
    const at = xs.findLastIndex(
      (hz, i) =>
        hz <= figure.xAxis.max && (certain.values[i] ?? uncertain.values[i] ?? null) !== null,
    );
    const value = certain.values[at] ?? uncertain.values[at];
    const hz = xs[at];
    return value === null || value === undefined || hz === undefined || value < figure.yAxis.min
      ? []
      : [{ text: sayComponent(component), x: toPlotX(figure, hz), y: toPlotY(figure, value) }];
  });
  const at = spreadLabels(
    ends.map((end) => end.y),
    END_LABEL_GAP,
    figure.plot.y + 6,
    figure.plot.y + figure.plot.height - 6,
  );
  return ends.map(({ text, x, y }, index) => ({
    kind: "text",
    role: "end-label",
    x: Math.min(x + 7, figure.plot.x + figure.plot.width - 26),
    y: (at[index] ?? y) + 4.5,
    text,
    size: 13,
    weight: 600,
    fill: COLOURS.ink,
    halo: COLOURS.sheet,
  }));
}
