"use client";

import type { MapFigure, MapRow } from "@/lib/charts/compression-map";
import { formatFrequency } from "@/lib/charts/format";
import { selectionShapes } from "@/lib/charts/selection";
import type { BandScale } from "@/lib/charts/scales";
import { useCrosshair } from "../parts/crosshair";
import { FigureSvg } from "../parts/figure-svg";
import { Shapes } from "../parts/shapes";

interface CompressionMapProps {
  figure: MapFigure;
  rows: readonly MapRow[];
  /** The wall's. */
  bands: BandScale;
  bandsHz: readonly number[];
  selectedHz: number | null;
  onSelect: (nominalHz: number) => void;
}

const sayCell = (cell: MapRow["cells"][number]): string => {
  if (cell.compressionDb === null) return "in the noise";
  const bound = cell.lowerBound ? "at least " : "";
  return `${bound}${cell.text}${cell.uncertain ? ", under its uncertainty" : ""}`;
};

/** The map as SVG over a real table: readers get the table, eyes the figure. Keyboard: the wall's. */
export function CompressionMap({
  figure,
  rows,
  bands,
  bandsHz,
  selectedHz,
  onSelect,
}: CompressionMapProps) {
  const { hover } = useCrosshair();
  const selected = bandsHz.indexOf(selectedHz ?? Number.NaN);
  const hzAt = (x: number): number | null => bandsHz[bands.indexAt(x)] ?? null;
  const { plot } = figure;
  if (rows.length === 0) return null;
  return (
    <>
      <div className="sr-only">
        <table>
          <caption>Compression in decibels, by run and band</caption>
          <thead>
            <tr>
              <th scope="col">run</th>
              {bandsHz.map((hz) => (
                <th key={hz} scope="col">
                  {formatFrequency(hz)}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {rows.map((row) => (
              <tr key={row.label}>
                <th scope="row">{row.label}</th>
                {row.cells.map((cell) => (
                  <td key={cell.nominalHz}>{sayCell(cell)}</td>
                ))}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      <FigureSvg figure={plot}>
        <rect
          aria-hidden="true"
          className="cursor-pointer"
          width={plot.width}
          height={plot.height}
          fill="transparent"
          onPointerMove={(event) => hover(hzAt(event.nativeEvent.offsetX))}
          onPointerLeave={() => hover(null)}
          onClick={(event) => {
            const hz = hzAt(event.nativeEvent.offsetX);
            if (hz !== null) onSelect(hz);
          }}
        />
        {selected >= 0 && (
          <g aria-hidden="true" pointerEvents="none">
            <Shapes
              shapes={selectionShapes(selected, {
                bands,
                top: 0,
                foot: figure.mapFoot + 1,
                open: "top",
              })}
            />
          </g>
        )}
      </FigureSvg>
    </>
  );
}
