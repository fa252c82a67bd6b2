/**
 * The compression map: decibels lost by every run above the reference, on the wall's pitch, then
 * the long-term runs. Cells keep their sign and a decimal; under their uncertainty they are grey.
 */
import { meanOf, listPlainLevels } from "./series-levels";
import type { Figure, Shape } from "./figure";
import { round2 } from "./figure";
import { formatFrequency, formatLevel, formatSigned } from "./format";
import { NOISE, toPatterns } from "./patterns";
import type { BandScale } from "./scales";
import { COLOURS, siltStep, type LevelPaint } from "./tokens";
import type { Band, BandLevel } from "../result/result-schema";

export interface MapCell {
  readonly nominalHz: number;
  /** null: in the noise. */
  readonly compressionDb: number | null;
  /** Smaller than its uncertainty. */
  readonly uncertain: boolean;
  /** The coil cooled before this band was measured: at least so much. */
  readonly lowerBound: boolean;
  /** "+7.7", as printed. */
  readonly text: string;
}

export interface MapRow {
  readonly kind: "short-term" | "long-term";
  readonly levelDb: number;
  /** "102 dB", "102 dB long-term". */
  readonly label: string;
  readonly paint: LevelPaint;
  readonly cells: readonly MapCell[];
}

type MapRun = Pick<BandLevel, "level_dB" | "kind" | "variant">;

/** The part of a band that the map is drawn from. */
interface MapBand extends Pick<Band, "nominal_Hz" | "long_term"> {
  readonly levels: readonly (MapRun & Pick<BandLevel, "compression_dB" | "uncertainty_dB">)[];
}

interface MapInput {
  readonly bands: readonly MapBand[];
  /** Every run, once or repeated. */
  readonly runs: readonly MapRun[];
}

/** @returns short-term rows above the reference from quiet to loud, then long-term rows. */
export function toMapRows(result: MapInput): MapRow[] {
  const levels = listPlainLevels(result.runs);
  const row = (kind: MapRow["kind"], levelDb: number, paint: LevelPaint): MapRow => ({
    kind,
    levelDb,
    paint,
    label: kind === "long-term" ? `${formatLevel(levelDb)} long-term` : formatLevel(levelDb),
    cells: result.bands.map((band) => toCell(band, kind, levelDb)),
  });
  const longTerm = [
    ...new Set(
      result.runs
        .filter((run) => run.kind === "long-term" && run.variant === undefined)
        .map((run) => run.level_dB),
    ),
  ].sort((a, b) => a - b);
  const paintOf = (levelDb: number): LevelPaint =>
    levels.find((level) => level.levelDb >= levelDb)?.paint ??
    levels.at(-1)?.paint ?? { fill: COLOURS.wash, line: COLOURS.edge };
  return [
    ...levels.slice(1).map((level) => row("short-term", level.levelDb, level.paint)),
    ...longTerm.map((levelDb) => row("long-term", levelDb, paintOf(levelDb))),
  ];
}

function toCell(band: MapBand, kind: MapRow["kind"], levelDb: number): MapCell {
  const runs = band.levels.filter(
    (run) => run.kind === kind && run.variant === undefined && run.level_dB === levelDb,
  );
  const compressionDb = meanOf(runs.map((run) => run.compression_dB));
  const uncertaintyDb = meanOf(runs.map((run) => run.uncertainty_dB));
  return {
    nominalHz: band.nominal_Hz,
    compressionDb,
    uncertain:
      compressionDb !== null && uncertaintyDb !== null && Math.abs(compressionDb) < uncertaintyDb,
    lowerBound:
      kind === "long-term" &&
      band.long_term.some((run) => run.level_dB === levelDb && run.lower_bound),
    text: compressionDb === null ? "in the noise" : formatSigned(compressionDb),
  };
}

export const MAP_ROW = 25;
const CELL_HEIGHT = 24;
const LONG_TERM_GAP = 5;
const TIGHT_PITCH = 30;
/** In print alone: a screen scrolls before its cells are as narrow. */
const PRINT_PITCH = 26;
const BRACKET_ROOM = 26;

export interface MapFigure {
  readonly staff: Figure;
  readonly plot: Figure;
  /** y of the last row's foot; the bracket lies below. */
  readonly mapFoot: number;
}

/** @param bands the wall's scale; the map lies under it on the same origin and pitch. */
export function toCompressionMap(
  rows: readonly MapRow[],
  bands: BandScale,
  staffWidth = 76,
): MapFigure {
  const firstLong = rows.findIndex((row) => row.kind === "long-term");
  const top = (at: number): number =>
    at * MAP_ROW + (firstLong >= 0 && at >= firstLong ? LONG_TERM_GAP : 0);
  const gap = bands.pitch < 16 ? 1 : 2;
  const plot: Shape[] = rows.flatMap((row, at) =>
    row.cells.flatMap((cell, band): Shape[] =>
      cellShapes(cell, {
        x: bands.left(band) + gap / 2,
        y: top(at),
        width: bands.pitch - gap,
        pitch: bands.pitch,
      }),
    ),
  );
  const foot = top(rows.length - 1) + CELL_HEIGHT;
  const bracket = rows.at(-1)?.kind === "long-term" ? bracketShapes(rows.at(-1), bands, foot) : [];
  const size = {
    height: Math.max(foot, 0) + (firstLong >= 0 ? BRACKET_ROOM : 4),
    patterns: toPatterns([]),
  };
  return {
    staff: {
      ...size,
      width: staffWidth,
      shapes: rows.flatMap((row, at) => rowLabelShapes(row, top(at), staffWidth)),
    },
    plot: { ...size, width: bands.width, shapes: [...plot, ...bracket] },
    mapFoot: Math.max(foot, 0),
  };
}

interface CellPlace {
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly pitch: number;
}

function cellShapes(cell: MapCell, place: CellPlace): Shape[] {
  const box = {
    kind: "rect",
    x: place.x,
    y: place.y,
    width: place.width,
    height: CELL_HEIGHT,
  } as const;
  if (cell.compressionDb === null)
    return [{ ...box, role: "cell-noise", fill: { pattern: NOISE } }];
  const step = siltStep(cell.uncertain ? 0 : cell.compressionDb);
  return [
    { ...box, role: "cell", fill: step.fill },
    {
      kind: "text",
      role: cell.uncertain ? "cell-uncertain" : "cell-text",
      x: round2(place.x + place.width / 2),
      y: place.y + 16,
      text: cell.text,
      size: place.pitch < PRINT_PITCH ? 9 : 11,
      anchor: "middle",
      fill: cell.uncertain ? COLOURS.ink3 : step.text,
      ...(place.pitch < TIGHT_PITCH ? { tighten: place.pitch < PRINT_PITCH ? 0.3 : 0.6 } : {}),
    },
  ];
}

function rowLabelShapes(row: MapRow, y: number, width: number): Shape[] {
  const swatch = { kind: "rect", x: width - 6, width: 4, fill: row.paint.fill } as const;
  const label = { kind: "text", x: width - 12, fill: COLOURS.ink2, anchor: "end" } as const;
  const text = formatLevel(row.levelDb);
  if (row.kind === "short-term") {
    return [
      { ...label, y: y + 16.5, text, size: 12 },
      { ...swatch, y: y + 4, height: 16 },
    ];
  }
  // Two lines within the row: what hangs below would lie on the next one.
  return [
    { ...label, y: y + 10.5, text, size: 11 },
    { ...label, y: y + 21.5, text: "long-term", size: 11 },
    { ...swatch, y: y + 4, height: 7 },
    { ...swatch, y: y + 13, height: 7 },
  ];
}

/** Under the last long-term row, over the bands whose loss is at least so much, with the reason. */
function bracketShapes(row: MapRow | undefined, bands: BandScale, foot: number): Shape[] {
  const bound = row?.cells.flatMap((cell, at) => (cell.lowerBound ? [at] : [])) ?? [];
  const [first, last] = [bound[0], bound.at(-1)];
  if (row === undefined || first === undefined || last === undefined) return [];
  const from = bands.left(first) + 1;
  const to = bands.left(last) + bands.pitch - 1;
  const above = row.cells[first - 1]?.nominalHz;
  const where = above === undefined ? "" : ` above ${formatFrequency(above)}`;
  return [
    {
      kind: "path",
      role: "lower-bound",
      d: `M${from} ${foot + 2}v4H${to}v-4`,
      stroke: COLOURS.ink,
    },
    {
      kind: "text",
      role: "lower-bound-words",
      x: to,
      y: foot + 18,
      text: `lower bound${where}: the coil cools during the sweep`,
      size: 11,
      fill: COLOURS.ink2,
      anchor: "end",
    },
  ];
}
