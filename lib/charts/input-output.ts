/**
 * Input against output of one band: what each run should have given across, what it gave upwards;
 * the dashed line is a loudspeaker without loss, the smooth one the law that fits.
 */
import type { Band } from "../result/result-schema";
import { SHOWN_COMPRESSION_DB } from "./band-columns";
import { toPlotX, toPlotY, type Axis, type CurveFigure } from "./curve-figure";
import { round2, type Shape } from "./figure";
import { formatDb, formatPlain, formatSignedDb } from "./format";
import { COMPRESSION, toPatterns } from "./patterns";
import { isPlain, type SeriesLevel } from "./series-levels";
import { COLOURS } from "./tokens";

interface IoPoint {
  readonly expectedDb: number;
  readonly measuredDb: number;
  readonly compressionDb: number;
  readonly uncertaintyDb: number | null;
  readonly levelDb: number;
}

const PLOT = { x: 34, y: 8, width: 306, height: 190 };
const MARGIN_DB = 2;

interface InputOutputInput {
  band: Band;
  levels: readonly SeriesLevel[];
  /** Width of the whole figure, px. */
  width?: number;
}

/** @returns null where no run of the band was measured. */
export function toInputOutputFigure({
  band,
  levels,
  width = 352,
}: InputOutputInput): CurveFigure | null {
  const points = toPoints(band);
  if (points.length === 0) return null;
  const offsetDb = meanOffset(points);
  const axis = toAxis(points);
  const place = {
    plot: { ...PLOT, width: width - 46 },
    xAxis: axis,
    yAxis: axis,
  };
  const spl = band.levels.some((level) => level.spl_dB !== null);
  const law = band.evidence.law_curve;
  const { onset } = band;
  const onsetDb =
    onset.status === "found" && onset.nominal_dB !== null ? onset.nominal_dB + offsetDb : null;
  return {
    ...place,
    width,
    height: 236,
    xs: law?.expected_dB ?? [],
    curves:
      law === null
        ? []
        : [{ key: "law", values: law.measured_dB, paint: COLOURS.ink, width: 2, dash: [] }],
    patterns: toPatterns([]),
    under: [
      { kind: "rect", ...place.plot, fill: COLOURS.sheet },
      ...gridShapes(place, axis),
      ...intervalShapes(place, onset, offsetDb),
      {
        kind: "line",
        role: "identity",
        x1: toPlotX(place, axis.min),
        y1: toPlotY(place, axis.min),
        x2: toPlotX(place, axis.max),
        y2: toPlotY(place, axis.max),
        stroke: COLOURS.edge,
        strokeWidth: 1.2,
        dash: [4, 4],
      },
      ...lossShapes(place, points),
    ],
    over: [
      ...points.flatMap((point) => pointShapes(place, point, levels)),
      ...(onsetDb === null
        ? []
        : onsetShapes(place, onsetDb, onset.spl_dB ?? onsetDb, onset.nominal_dB)),
      ...lossWords(place, points),
      ...axisShapes(place, spl),
    ],
  };
}

function toPoints(band: Band): IoPoint[] {
  return band.levels.filter(isPlain).flatMap((level): IoPoint[] => {
    const measured =
      level.spl_dB ??
      (level.compression_dB === null ? null : level.level_dB - level.compression_dB);
    const expected = level.expected_dB ?? (level.spl_dB === null ? level.level_dB : null);
    if (measured === null || expected === null) return [];
    return [
      {
        expectedDb: expected,
        measuredDb: measured,
        compressionDb: level.compression_dB ?? 0,
        uncertaintyDb: level.uncertainty_dB,
        levelDb: level.level_dB,
      },
    ];
  });
}

/** From the scale of the run's level to the band's own expected level. */
const meanOffset = (points: readonly IoPoint[]): number =>
  points.reduce((sum, point) => sum + point.expectedDb - point.levelDb, 0) / points.length;

/** From 2 dB below the lowest to 2 dB above the highest expected level, the same on both axes. */
function toAxis(points: readonly IoPoint[]): Axis {
  const expected = points.map((point) => point.expectedDb);
  const lowest = Math.min(...expected, ...points.map((point) => point.measuredDb));
  return { min: lowest - MARGIN_DB, max: Math.max(...expected) + MARGIN_DB, log: false };
}

type Place = Pick<CurveFigure, "plot" | "xAxis" | "yAxis">;

function gridShapes(place: Place, axis: Axis): Shape[] {
  const { plot } = place;
  const shapes: Shape[] = [];
  const step = axis.max - axis.min > 16 ? 10 : 5;
  for (let tick = Math.ceil(axis.min / step) * step; tick <= axis.max; tick += step) {
    const x = toPlotX(place, tick);
    const y = toPlotY(place, tick);
    const text = formatPlain(tick);
    shapes.push(
      {
        kind: "line",
        x1: plot.x,
        y1: y,
        x2: plot.x + plot.width,
        y2: y,
        stroke: COLOURS.rule,
        crisp: true,
      },
      {
        kind: "line",
        x1: x,
        y1: plot.y,
        x2: x,
        y2: plot.y + plot.height,
        stroke: COLOURS.rule,
        crisp: true,
      },
      {
        kind: "text",
        role: "tick",
        x: plot.x - 7,
        y: y + 4,
        text,
        size: 12,
        fill: COLOURS.ink,
        anchor: "end",
      },
      {
        kind: "text",
        role: "tick",
        x,
        y: plot.y + plot.height + 16,
        text,
        size: 12,
        fill: COLOURS.ink,
        anchor: "middle",
      },
    );
  }
  return shapes;
}

/** The 90 % interval as a block of full height, named at its foot. */
function intervalShapes(place: Place, onset: Band["onset"], offsetDb: number): Shape[] {
  if (onset.status !== "found" || onset.low_dB === null || onset.high_dB === null) return [];
  const { plot } = place;
  const right = plot.x + plot.width;
  const from = Math.max(plot.x, toPlotX(place, onset.low_dB + offsetDb));
  const to = Math.min(right, toPlotX(place, onset.high_dB + offsetDb));
  const atLeft = from - plot.x > 100;
  return [
    {
      kind: "rect",
      role: "interval",
      x: from,
      y: plot.y,
      width: round2(to - from),
      height: plot.height,
      fill: COLOURS.wash,
    },
    {
      kind: "text",
      x: atLeft ? from - 6 : to + 6,
      y: plot.y + plot.height - 7,
      text: "90\u00a0% interval",
      size: 11,
      fill: COLOURS.ink2,
      anchor: atLeft ? "end" : "start",
    },
  ];
}

const loudestOf = (points: readonly IoPoint[]): IoPoint | undefined => {
  const last = points.at(-1);
  return last !== undefined && last.compressionDb >= SHOWN_COMPRESSION_DB ? last : undefined;
};

/** What the loudest run lost, as an upright bar. */
function lossShapes(place: Place, points: readonly IoPoint[]): Shape[] {
  const last = loudestOf(points);
  if (last === undefined) return [];
  const y = toPlotY(place, last.expectedDb);
  return [
    {
      kind: "rect",
      role: "compression",
      x: round2(toPlotX(place, last.expectedDb) - 4),
      y,
      width: 8,
      height: round2(toPlotY(place, last.measuredDb) - y),
      fill: { pattern: COMPRESSION },
      stroke: COLOURS.siltLine,
    },
  ];
}

function lossWords(place: Place, points: readonly IoPoint[]): Shape[] {
  const last = loudestOf(points);
  if (last === undefined) return [];
  return [
    {
      kind: "text",
      role: "loss",
      x: Math.min(toPlotX(place, last.expectedDb) + 5, place.plot.x + place.plot.width),
      y: lossWordsY(place, points, last),
      text: formatSignedDb(last.compressionDb),
      size: 12,
      weight: 600,
      fill: COLOURS.ink,
      anchor: "end",
      halo: COLOURS.sheet,
    },
  ];
}

const LOSS_WORDS_PX = 58;

/** Under the last point, and under the line to the point before it. */
function lossWordsY(place: Place, points: readonly IoPoint[], last: IoPoint): number {
  const y = toPlotY(place, last.measuredDb);
  const before = points.at(-2);
  if (before === undefined) return y + 20;
  const slope =
    (toPlotY(place, before.measuredDb) - y) /
    Math.max(1, toPlotX(place, last.expectedDb) - toPlotX(place, before.expectedDb));
  return round2(Math.max(y + 20, y + slope * LOSS_WORDS_PX + 16));
}

/** A square of the level's colour with its whiskers. */
function pointShapes(place: Place, point: IoPoint, levels: readonly SeriesLevel[]): Shape[] {
  const paint = levels.find((level) => level.levelDb === point.levelDb)?.paint;
  const x = toPlotX(place, point.expectedDb);
  const y = toPlotY(place, point.measuredDb);
  const reach = point.uncertaintyDb ?? 0;
  const high = toPlotY(place, point.measuredDb + reach);
  const low = toPlotY(place, point.measuredDb - reach);
  const whisker = (d: string): Shape => ({ kind: "path", role: "whisker", d, stroke: COLOURS.ink });
  return [
    {
      kind: "rect",
      role: "point",
      x: round2(x - 4.5),
      y: round2(y - 4.5),
      width: 9,
      height: 9,
      fill: paint?.fill ?? COLOURS.wash,
      stroke: paint?.line ?? COLOURS.edge,
      strokeWidth: 2,
    },
    whisker(`M${x} ${high}V${low}M${round2(x - 2.5)} ${high}h5M${round2(x - 2.5)} ${low}h5`),
  ];
}

/** An open triangle that stands with its point on the law, and its words. */
function onsetShapes(
  place: Place,
  expectedDb: number,
  measuredDb: number,
  saidDb: number | null,
): Shape[] {
  const x = toPlotX(place, expectedDb);
  const y = toPlotY(place, measuredDb);
  const atLeft = x - place.plot.x > 150;
  return [
    {
      kind: "path",
      role: "onset",
      d: `M${round2(x - 6)} ${round2(y - 12)}h12l-6 11z`,
      fill: COLOURS.sheet,
      stroke: COLOURS.ink,
      strokeWidth: 1.4,
    },
    ...(saidDb === null
      ? []
      : [
          {
            kind: "text",
            role: "onset-words",
            x: atLeft ? x - 12 : x + 12,
            y: round2(Math.max(y - 15, place.plot.y + 30)),
            text: `1/3\u00a0dB point: ${formatDb(measuredDb)}`,
            size: 12,
            weight: 600,
            fill: COLOURS.ink,
            anchor: atLeft ? "end" : "start",
            halo: COLOURS.sheet,
          } as const,
        ]),
  ];
}

function axisShapes({ plot }: Place, spl: boolean): Shape[] {
  const unit = spl ? "dB SPL at 1\u00a0m" : "dB, run level";
  const foot = plot.y + plot.height;
  return [
    { kind: "path", d: `M${plot.x} ${plot.y}V${foot}H${plot.x + plot.width}`, stroke: COLOURS.ink },
    {
      kind: "text",
      x: plot.x + 7,
      y: plot.y + 14,
      text: `measured, ${unit}`,
      size: 11,
      fill: COLOURS.ink2,
      halo: COLOURS.sheet,
    },
    {
      kind: "text",
      x: plot.x + plot.width,
      y: foot + 32,
      text: `expected, ${unit}`,
      size: 11,
      fill: COLOURS.ink2,
      anchor: "end",
    },
  ];
}
