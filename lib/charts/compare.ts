/**
 * Output limits side by side: the reference as a pale wall, every test as a step line with its
 * letter; solid where the limit was reached, thin and hollow where it was not. Under the plot, on
 * the same pitch, the map of differences. Staff and plot apart: the staff stays in place while a
 * narrow screen scrolls.
 */
import type { ComparedBand, Comparison, ComparisonTest } from "../compare/comparison-schema";
import { keyShapes, nameShapes } from "./compare-key";
import { differenceMapShapes, differenceRowShapes, MAP_ROW } from "./compare-map";
import { comparePaint, COMPARE_DASHES, letterShapes } from "./compare-paints";
import type { Figure, Shape } from "./figure";
import { round2 } from "./figure";
import { bandLabelShapes, gridShapes, neatlineShapes, staffShapes } from "./frame-shapes";
import { spreadLabels } from "./labels";
import { toBandScale, toDbScale, toWallRange, type BandScale, type DbScale } from "./scales";
import { COLOURS, levelRamp } from "./tokens";

export interface CompareFigure {
  readonly staff: Figure;
  readonly plot: Figure;
  /** Names at the line ends, and what the lines mean. */
  readonly key: Figure;
  readonly bands: BandScale;
  readonly bandsHz: readonly number[];
  readonly top: number;
  readonly foot: number;
}

interface CompareLayout {
  pitch: number;
  plotHeight?: number;
  head?: number;
  staffWidth?: number;
}

export const COMPARE_STAFF = 76;
export const COMPARE_KEY_WIDTH = 190;
const NEATLINE = 6;
const LABELS = 26;
/** Two lines at the top of the test keep so far apart. */
const LANE = 4.6;

export interface ComparePlace {
  bands: BandScale;
  scale: DbScale;
  top: number;
  foot: number;
}

/** One test's line: where it lies in each band of the comparison. */
export interface CompareLine {
  at: number;
  test: ComparisonTest;
  /** [bands] null: nothing to draw there. */
  points: readonly (Point | null)[];
}
interface Point {
  y: number;
  band: ComparedBand;
}

/** @param layout lengths in px; the plot's width is the bands' pitch. */
export function toCompareFigure(
  comparison: Comparison,
  { pitch, plotHeight = 301, head = 32, staffWidth = COMPARE_STAFF }: CompareLayout,
): CompareFigure {
  const { bands_Hz: bandsHz, tests } = comparison;
  const levels = tests.flatMap((test) => test.bands.flatMap((band) => band.spl_dB ?? []));
  const { minDb, maxDb } = toWallRange(levels);
  const scale = toDbScale(minDb, maxDb, plotHeight);
  const bands = toBandScale(bandsHz.map(toExact(tests)), pitch);
  const place: ComparePlace = { bands, scale, top: head, foot: head + plotHeight };
  const lines = toLines(comparison, place);
  const mapTop = place.foot + NEATLINE + LABELS + 8;
  const others = tests.slice(1);
  const height = others.length === 0 ? mapTop : mapTop + others.length * MAP_ROW;
  const size = { height, patterns: [] };
  const labelY = place.foot + NEATLINE + 17;
  return {
    staff: {
      ...size,
      width: staffWidth,
      shapes: [
        ...staffShapes(scale, staffWidth, head),
        small("dB SPL", 6, 12, "start"),
        small("at 1 m", 6, 25, "start"),
        small("band, Hz", staffWidth - 9, labelY, "end"),
        ...others.flatMap((_, at) =>
          differenceRowShapes(at + 1, mapTop + at * MAP_ROW, staffWidth),
        ),
      ],
    },
    plot: {
      ...size,
      width: bands.width,
      shapes: [
        {
          kind: "rect",
          x: 0,
          y: head,
          width: bands.width,
          height: plotHeight,
          fill: COLOURS.sheet,
        },
        ...gridShapes(bands, scale, head),
        ...referenceShapes(lines[0], place),
        ...[...lines].reverse().flatMap((line) => lineShapes(line, place)),
        ...lines.flatMap((line) => tagShapes(line, lines, place)),
        ...neatlineShapes(bands, place.foot, NEATLINE),
        {
          kind: "line",
          x1: bands.width,
          y1: head,
          x2: bands.width,
          y2: place.foot,
          stroke: COLOURS.ink,
          crisp: true,
        },
        ...bandLabelShapes(bands, bandsHz, labelY),
        ...others.flatMap((test, at) =>
          differenceMapShapes(test.differences, bands, mapTop + at * MAP_ROW),
        ),
      ],
    },
    key: {
      ...size,
      width: COMPARE_KEY_WIDTH,
      shapes: [...nameShapes(lines, place), ...keyShapes(comparison, place)],
    },
    bands,
    bandsHz,
    top: head,
    foot: place.foot,
  };
}

const toExact =
  (tests: readonly ComparisonTest[]) =>
  (hz: number): number =>
    tests.flatMap((test) => test.bands).find((band) => band.nominal_Hz === hz)?.exact_Hz ?? hz;

const small = (text: string, x: number, y: number, anchor: "start" | "end"): Shape => ({
  kind: "text",
  x,
  y,
  text,
  size: 11,
  fill: COLOURS.ink2,
  anchor,
});

function toLines(
  { tests, bands_Hz: bandsHz }: Comparison,
  { scale, top }: ComparePlace,
): CompareLine[] {
  const plain = tests.map((test, at): CompareLine => ({
    at,
    test,
    points: bandsHz.map((hz) => {
      const band = test.bands.find((one) => one.nominal_Hz === hz);
      return band === undefined || band.spl_dB === null || band.status === "not assessed"
        ? null
        : { y: round2(top + scale.toY(band.spl_dB)), band };
    }),
  }));
  // Where nothing was reached the lines lie within a fraction of a decibel: each keeps its own lane.
  const middles = plain.flatMap(({ at, points }) => {
    const open = points.filter((point) => point !== null && isOpen(point.band));
    return open.length === 0 ? [] : [{ at, y: meanOf(open.map((point) => point?.y ?? 0)) }];
  });
  const lanes = spreadLabels(
    middles.map(({ y }) => y),
    LANE,
    top + 4,
  );
  const shift = new Map(middles.map(({ at, y }, nth) => [at, round2((lanes[nth] ?? y) - y)]));
  return plain.map((line) => ({
    ...line,
    points: line.points.map((point) =>
      point !== null && isOpen(point.band)
        ? { ...point, y: round2(point.y + (shift.get(line.at) ?? 0)) }
        : point,
    ),
  }));
}

const isOpen = (band: ComparedBand): boolean => band.status === "not reached";
const meanOf = (values: readonly number[]): number =>
  values.reduce((sum, one) => sum + one, 0) / values.length;

/** The pale wall under the reference's line. */
function referenceShapes(line: CompareLine | undefined, { bands, foot }: ComparePlace): Shape[] {
  const water = levelRamp(4)[0]?.fill ?? COLOURS.wash;
  return (line?.points ?? []).flatMap((point, at): Shape[] =>
    point === null || point.band.status === "below lowest"
      ? []
      : [
          {
            kind: "rect",
            role: "reference",
            x: bands.left(at) + 1,
            y: point.y,
            width: bands.pitch - 2,
            height: round2(foot - point.y),
            fill: water,
          },
        ],
  );
}

/** Steps in the test's own colour and dash; hollow where the limit was not reached. */
function lineShapes({ at, points }: CompareLine, { bands }: ComparePlace): Shape[] {
  const stroke = comparePaint(at);
  const dash = COMPARE_DASHES[at];
  const solid: string[] = [];
  const hollow: string[] = [];
  const below: string[] = [];
  const risers: string[] = [];
  points.forEach((point, nth) => {
    if (point === null) return;
    const [x1, x2] = [bands.left(nth), round2(bands.left(nth) + bands.pitch)];
    const { y } = point;
    if (point.band.status === "found") solid.push(`M${x1} ${y}H${x2}`);
    else if (isOpen(point.band)) hollow.push(`M${x1} ${y}H${x2}`);
    else below.push(`M${x1 + 2} ${y - 5}V${y}H${x2 - 2}V${y - 5}`);
    const next = points[nth + 1];
    if (next == null || next.y === y) return;
    if (next.band.status !== "below lowest" && point.band.status !== "below lowest") {
      risers.push(`M${x2} ${y}V${next.y}`);
    }
  });
  const path = (role: string, parts: readonly string[], pen: object): Shape[] =>
    parts.length === 0 ? [] : [{ kind: "path", role, d: parts.join(""), stroke, ...pen }];
  return [
    ...path("riser", risers, { strokeWidth: 1.2 }),
    ...path("not-reached", hollow, { strokeWidth: 3.2 }),
    ...path("hollow", hollow, { stroke: COLOURS.sheet, strokeWidth: 1.2 }),
    ...path("below-lowest", below, { strokeWidth: 1.6 }),
    ...path("reached", solid, { strokeWidth: 4, ...(dash === undefined ? {} : { dash }) }),
  ];
}

/** The letter on the line, once, where it is furthest from the others. */
function tagShapes(
  line: CompareLine,
  lines: readonly CompareLine[],
  { bands }: ComparePlace,
): Shape[] {
  let best: { nth: number; y: number; free: number } | null = null;
  line.points.forEach((point, nth) => {
    if (point === null || point.band.status !== "found") return;
    const others = lines.flatMap((one) => (one === line ? [] : (one.points[nth]?.y ?? [])));
    const free = Math.min(40, ...others.map((y) => Math.abs(y - point.y)));
    if (best === null || free > best.free) best = { nth, y: point.y, free };
  });
  const place = best as { nth: number; y: number } | null;
  if (place === null) return [];
  return letterShapes(line.at, bands.centre(place.nth), place.y);
}
