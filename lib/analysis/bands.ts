/**
 * Third-octave bands and the 1/24-octave grid, base ten (IEC 61260-1:2014). Eight grid cells tile
 * one band edge to edge, so the log-uniform mean of a band is the plain mean of its cells.
 */
import type { ThirdOctave } from "./types";

/** Grid cells in a third-octave band. */
export const CELLS_PER_BAND = 8;
const CELLS_PER_DECADE = 80;
/** ISO 266 nominal numbers of one decade. */
const NOMINAL = [1, 1.25, 1.6, 2, 2.5, 3.15, 4, 5, 6.3, 8];

/** Cell m reaches from its lower edge 1000 * 10^(m/80) Hz to that of m + 1. */
export interface Grid {
  /** Index m of the first cell. */
  firstCell: number;
  /** [cells] mid-band frequencies 1000 G^((2m+1)/48), Hz. */
  centreHz: Float64Array;
  /** [cells + 1] edges, Hz. */
  edgeHz: Float64Array;
}

const cellEdgeHz = (m: number): number => 1000 * 10 ** (m / CELLS_PER_DECADE);

/** Third-octave band n: 1000 * 10^(n/10) Hz, edges a factor of 10^0.05 away. */
export function thirdOctave(n: number): ThirdOctave {
  const decade = Math.floor(n / 10);
  const nominal = NOMINAL[n - 10 * decade] ?? Number.NaN;
  return {
    nominalHz: Number((nominal * 10 ** (3 + decade)).toPrecision(3)),
    exactHz: 1000 * 10 ** (n / 10),
    lowHz: cellEdgeHz(CELLS_PER_BAND * n - CELLS_PER_BAND / 2),
    highHz: cellEdgeHz(CELLS_PER_BAND * n + CELLS_PER_BAND / 2),
  };
}

/**
 * The bands that a sweep from startHz to stopHz measures: nominal at least an octave over the start
 * (the first octave is not measured well), upper edge not past the stop.
 */
export function thirdOctaves(startHz: number, stopHz: number): ThirdOctave[] {
  const bands: ThirdOctave[] = [];
  for (let n = Math.floor(10 * Math.log10(startHz / 1000)); ; n += 1) {
    const band = thirdOctave(n);
    if (band.highHz > stopHz * (1 + 1e-9)) return bands;
    if (band.nominalHz >= 2 * startHz * (1 - 1e-9)) bands.push(band);
  }
}

/** The 1/24-octave cells that lie wholly within startHz to stopHz. */
export function twentyFourthOctaves(startHz: number, stopHz: number): Grid {
  const firstCell = Math.ceil(CELLS_PER_DECADE * Math.log10(startHz / 1000) - 1e-9);
  const lastEdge = Math.floor(CELLS_PER_DECADE * Math.log10(stopHz / 1000) + 1e-9);
  const cells = Math.max(0, lastEdge - firstCell);
  return {
    firstCell,
    centreHz: Float64Array.from(
      { length: cells },
      (_, i) => 1000 * 10 ** ((2 * (firstCell + i) + 1) / (2 * CELLS_PER_DECADE)),
    ),
    edgeHz: Float64Array.from({ length: cells + 1 }, (_, i) => cellEdgeHz(firstCell + i)),
  };
}

/** Position in the grid of a band's first cell; its eight cells follow. Negative or too high where the grid does not hold it. */
export function toFirstCellOf(band: ThirdOctave, grid: Grid): number {
  return Math.round(CELLS_PER_DECADE * Math.log10(band.lowHz / 1000)) - grid.firstCell;
}
