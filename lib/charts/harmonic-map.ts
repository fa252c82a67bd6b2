/** Harmonics by band of one run, in slate; in the noise is hatched, never a number. */
import type { Band, BandLevel } from "../result/result-schema";
import type { Figure, Shape } from "./figure";
import { round2 } from "./figure";
import { formatPercentCell } from "./format";
import { HARMONIC_ORDERS, harmonicSample } from "./harmonic-lines";
import { NOISE, toPatterns } from "./patterns";
import type { BandScale } from "./scales";
import { COLOURS, slateStep } from "./tokens";

/** value: in percent. noise: not resolvable. absent: the order does not exist in this band. */
export type HarmonicCell =
  | { readonly state: "value"; readonly percent: number; readonly uncertain: boolean }
  | { readonly state: "noise" }
  | { readonly state: "absent" };

function toCell(percent: number | null, quality: BandLevel["thd_quality"]): HarmonicCell {
  if (quality === null) return { state: "absent" };
  if (percent === null || quality === "noise") return { state: "noise" };
  return { state: "value", percent, uncertain: quality === "uncertain" };
}

const cellOf = (level: BandLevel | undefined, order: number): HarmonicCell => {
  const harmonic = level?.harmonics.find((h) => h.order === order);
  return harmonic === undefined ? { state: "absent" } : toCell(harmonic.percent, harmonic.quality);
};

export interface HarmonicRow {
  readonly order: number;
  readonly cells: readonly HarmonicCell[];
}

/** @param file the run. @returns a row per order from H2 to H9, a cell per band. */
export const toHarmonicRows = (bands: readonly Band[], file: string): HarmonicRow[] =>
  HARMONIC_ORDERS.map((order) => ({
    order,
    cells: bands.map((band) =>
      cellOf(
        band.levels.find((level) => level.file === file),
        order,
      ),
    ),
  }));

interface CellBox {
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly height: number;
}

function cellShapes(
  cell: HarmonicCell,
  box: CellBox,
  format: (percent: number) => string,
  bold = false,
): Shape[] {
  if (cell.state === "absent") return [];
  if (cell.state === "noise")
    return [{ kind: "rect", role: "cell-noise", ...box, fill: { pattern: NOISE } }];
  const step = slateStep(cell.percent);
  return [
    { kind: "rect", role: "cell", ...box, fill: step.fill },
    ...(cell.uncertain
      ? [
          {
            kind: "rect",
            role: "cell-uncertain",
            ...inset(box),
            stroke: COLOURS.noiseLine,
            dash: [2, 2],
          } as const,
        ]
      : []),
    {
      kind: "text",
      role: "cell-text",
      x: round2(box.x + box.width / 2),
      y: box.y + box.height / 2 + 4,
      text: format(cell.percent),
      size: 11,
      anchor: "middle",
      fill: step.text,
      ...(bold ? { weight: 600 as const } : {}),
    },
  ];
}

const inset = ({ x, y, width, height }: CellBox): CellBox => ({
  x: x + 0.5,
  y: y + 0.5,
  width: width - 1,
  height: height - 1,
});

const MAP_ROW = 21;

export interface HarmonicMapFigure {
  readonly staff: Figure;
  readonly plot: Figure;
}

/** @param bands the scale of the distortion figure above; the map shares its origin and pitch. */
export function toHarmonicMap(
  rows: readonly HarmonicRow[],
  bands: BandScale,
  staffWidth = 76,
): HarmonicMapFigure {
  const size = { height: rows.length * MAP_ROW, patterns: toPatterns([]) };
  const firstAbsent = rows.map(
    (row) => row.cells.findLastIndex((cell) => cell.state !== "absent") + 1,
  );
  const lowest = Math.max(...firstAbsent.slice(2, 5), 0);
  const roomForWords = lowest <= bands.count - 6;
  return {
    staff: {
      ...size,
      width: staffWidth,
      shapes: rows.flatMap((row, at): Shape[] => [
        ...harmonicSample(row.order, 4, at * MAP_ROW + 10),
        {
          kind: "text",
          x: staffWidth - 9,
          y: at * MAP_ROW + 14,
          text: `H${row.order}`,
          size: 12,
          fill: COLOURS.ink,
          anchor: "end",
        },
      ]),
    },
    plot: {
      ...size,
      width: bands.width,
      shapes: [
        ...rows.flatMap((row, at) =>
          row.cells.flatMap((cell, band) =>
            cellShapes(
              cell,
              {
                x: bands.left(band) + 1,
                y: at * MAP_ROW,
                width: bands.pitch - 2,
                height: MAP_ROW - 1,
              },
              formatPercentCell,
            ),
          ),
        ),
        ...(roomForWords
          ? [
              {
                kind: "text",
                role: "absent-words",
                x: bands.width - 6,
                y: 3.5 * MAP_ROW + 4,
                text: "out of range: not assessed",
                size: 11,
                fill: COLOURS.ink2,
                anchor: "end",
              } as const,
            ]
          : []),
      ],
    },
  };
}
