/**
 * The wall: every run leaves its high-water line, a band is a column, the limit is the highest
 * line reached under the criterion. Three figures of one height: the staff (which stays in place
 * while a narrow screen scrolls), the plot, and the key.
 */
import type { BandColumn, BandColumns } from "./band-columns";
import type { Figure, Shape } from "./figure";
import { bandLabelShapes, gridShapes, neatlineShapes, staffShapes } from "./frame-shapes";
import { causeShapes, decisionShapes } from "./marks";
import { toPatterns } from "./patterns";
import { toBandScale, toDbScale, toWallRange, type BandScale, type DbScale } from "./scales";
import { COLOURS } from "./tokens";
import { columnShapes } from "./wall-column";
import { toWallKey } from "./wall-key";

export interface WallLayout {
  /** px from band to band; under `gapFrom` the gap between columns is 1 px. */
  readonly pitch: number;
  readonly plotHeight: number;
  /** Room above the plot for the selection's tab and the readout. */
  readonly head: number;
  readonly staffWidth: number;
  /** The decision row stands under the cause row. */
  readonly decisions: boolean;
  readonly causes: boolean;
  /** Labels only every other octave. */
  readonly sparseLabels: boolean;
}

export const WALL_LAYOUT: WallLayout = {
  pitch: 30,
  plotHeight: 468,
  head: 32,
  staffWidth: 76,
  decisions: true,
  causes: true,
  sparseLabels: false,
};

const NEATLINE = 6;
/** A staff narrower than this has no room for words beside its figures. */
const WORDS_FROM = 70;
const ROW = 21;
const LABEL_ROW = 26;

export interface WallFigure {
  readonly staff: Figure;
  readonly plot: Figure;
  readonly key: Figure;
  readonly bands: BandScale;
  readonly scale: DbScale;
  /** y of the plot's top and foot. */
  readonly top: number;
  readonly foot: number;
}

/** @param layout starts from WALL_LAYOUT; lengths in px. */
export function toWall(
  { levels, columns, spl }: BandColumns,
  layout: Partial<WallLayout> = {},
): WallFigure {
  const place = { ...WALL_LAYOUT, ...layout };
  const scale = toWallScale(
    columns,
    levels.map((level) => level.levelDb),
    place.plotHeight,
  );
  const bands = toBandScale(
    columns.map((column) => column.exactHz),
    place.pitch,
  );
  const top = place.head;
  const foot = top + place.plotHeight;
  const rows = toRows(place, foot + NEATLINE);
  const size = { height: rows.height, patterns: toPatterns(levels.map((level) => level.paint)) };
  const gap = place.pitch < 16 ? 1 : 2;
  const plot: Shape[] = [
    {
      kind: "rect",
      x: 0,
      y: top,
      width: bands.width,
      height: place.plotHeight,
      fill: COLOURS.sheet,
    },
    ...gridShapes(bands, scale, top),
    ...columns.map((column, at): Shape => ({
      kind: "group",
      role: "column",
      band: column.nominalHz,
      shapes: columnShapes(column, levels, {
        x: bands.left(at) + gap / 2,
        width: place.pitch - gap,
        top,
        scale,
      }),
    })),
    ...neatlineShapes(bands, foot, NEATLINE),
    {
      kind: "line",
      x1: bands.width,
      y1: top,
      x2: bands.width,
      y2: foot,
      stroke: COLOURS.ink,
      crisp: true,
    },
    ...columns.flatMap((column, at) => rowShapes(column, bands.centre(at), rows, place.pitch)),
    ...bandLabelShapes(
      bands,
      columns.map((column) => column.nominalHz),
      rows.labels,
      place.sparseLabels,
    ),
  ];
  const staff: Shape[] = [
    ...staffShapes(scale, place.staffWidth, top),
    // On two lines: the tab of the first band stands beside it.
    ...(spl ? ["dB SPL", "at 1 m"] : ["dB,", "run level"]).map((line, at) =>
      rowLabel(line, 6, 12 + 13 * at, "start"),
    ),
    ...(rows.cause === null ? [] : [rowLabel("cause", place.staffWidth - 9, rows.cause + 4)]),
    ...(rows.decision === null
      ? []
      : [rowLabel("decision", place.staffWidth - 9, rows.decision + 4)]),
    rowLabel(place.staffWidth < WORDS_FROM ? "Hz" : "band, Hz", place.staffWidth - 9, rows.labels),
  ];
  return {
    staff: { ...size, width: place.staffWidth, shapes: staff },
    plot: { ...size, width: bands.width, shapes: plot },
    key: toWallKey(levels, scale, top),
    bands,
    scale,
    top,
    foot,
  };
}

/** Every level that will be drawn fits: expected ones and limits too. */
function toWallScale(
  columns: readonly BandColumn[],
  levelsDb: readonly number[],
  height: number,
): DbScale {
  const drawn = columns.flatMap((column) => [
    ...column.measuredDb,
    column.expectedDb,
    column.limitDb,
  ]);
  const { minDb, maxDb } = toWallRange([...levelsDb, ...drawn.filter((value) => value !== null)]);
  return toDbScale(minDb, maxDb, height);
}

interface Rows {
  readonly cause: number | null;
  readonly decision: number | null;
  /** Base line of the band labels. */
  readonly labels: number;
  readonly height: number;
}

function toRows(place: WallLayout, from: number): Rows {
  const cause = place.causes ? from + 15 : null;
  const decision = place.decisions ? (cause ?? from - 6) + ROW : null;
  const labels = (decision ?? cause ?? from - 10) + LABEL_ROW;
  return { cause, decision, labels, height: labels + 8 };
}

/** px from band to band from which two marks have their full size. */
const TWO_MARKS = 28;

const PAINTS = { mark: COLOURS.overprint, onMark: COLOURS.onOverprint, edge: COLOURS.edge };

/** The marks under a column: cause, with the smaller long-term cause beside it, and the decision. */
function rowShapes(column: BandColumn, x: number, rows: Rows, pitch: number): Shape[] {
  const ink = column.causeChanged
    ? COLOURS.overprint
    : column.cause === "open"
      ? COLOURS.ink3
      : COLOURS.ink;
  const marks: Shape[] = [];
  // Two marks side by side keep out of their neighbours' places.
  const share = Math.min(1, pitch / TWO_MARKS);
  if (rows.cause !== null) {
    const beside = column.longTermCause !== null;
    marks.push({
      kind: "group",
      role: "cause",
      band: column.nominalHz,
      x: beside ? x - 7 * share : x,
      y: rows.cause,
      scale: beside ? 0.78 * share : 0.92,
      shapes: causeShapes(column.cause, ink),
    });
    if (column.longTermCause !== null) {
      marks.push({
        kind: "group",
        role: "long-term-cause",
        band: column.nominalHz,
        x: x + 7.5 * share,
        y: rows.cause,
        scale: 0.72 * share,
        shapes: causeShapes(column.longTermCause, COLOURS.ink),
      });
    }
  }
  if (rows.decision !== null) {
    marks.push({
      kind: "group",
      role: `decision-${column.decision}`,
      band: column.nominalHz,
      x,
      y: rows.decision,
      shapes: decisionShapes(column.decision, PAINTS),
    });
  }
  return marks;
}

const rowLabel = (text: string, x: number, y: number, anchor: "start" | "end" = "end"): Shape => ({
  kind: "text",
  x,
  y,
  text,
  size: 11,
  fill: COLOURS.ink2,
  anchor,
});
