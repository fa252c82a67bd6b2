"use client";

import { useMemo } from "react";
import {
  formatDb,
  formatFrequency,
  formatLevel,
  formatNumber,
  formatSigned,
} from "@/lib/charts/format";
import { toInputOutputFigure } from "@/lib/charts/input-output";
import type { CurveFigure } from "@/lib/charts/curve-figure";
import { findHighest, isPlain, listPlainLevels } from "@/lib/charts/series-levels";
import type { Band, Result } from "@/lib/result/result-schema";
import type { FigureFile } from "../parts/figure-file";
import { CurvePlot } from "../parts/curve-plot";
import { useWidth } from "../parts/use-width";
import { ValuesTable } from "../parts/values-table";
import { NoValue } from "../parts/table";

interface InputOutputProps {
  result: Pick<Result, "runs">;
  band: Band;
}

const MOST_PX = 460;

/** Expected against measured level of one band: the evidence for its onset and its law, with its table. */
export function InputOutput({ result, band }: InputOutputProps) {
  const [ref, width] = useWidth<HTMLDivElement>(352);
  const figure = useMemo(
    () =>
      toInputOutputFigure({
        band,
        levels: listPlainLevels(result.runs),
        width: Math.min(MOST_PX, Math.max(280, Math.floor(width))),
      }),
    [band, result, width],
  );
  return (
    <div ref={ref} className="min-w-0">
      {figure === null ? (
        <p className="text-small text-ink-2">
          Every run of this band is in the noise: there is nothing to draw.
        </p>
      ) : (
        <div className="overflow-x-auto overflow-y-hidden">
          <CurvePlot figure={figure} label={sayInputOutput(band)} />
        </div>
      )}
      <ValuesTable
        caption={`Expected and measured level, ${formatFrequency(band.nominal_Hz)} band`}
        {...(figure === null ? {} : { file: toFile(band, figure) })}
        columns={[
          { key: "run", head: "run" },
          { key: "expected", head: "expected, dB" },
          { key: "measured", head: "measured, dB" },
          { key: "compression", head: "compression, dB" },
          { key: "uncertainty", head: "uncertainty, dB" },
        ]}
        rows={band.levels.filter(isPlain).map((level) => ({
          id: level.file,
          cells: {
            run: formatLevel(level.level_dB),
            expected: toCell(level.expected_dB, formatNumber),
            measured: toCell(level.spl_dB, formatNumber),
            compression: toCell(level.compression_dB, formatSigned),
            uncertainty: toCell(level.uncertainty_dB, (value) => formatNumber(value, 2)),
          },
        }))}
      />
    </div>
  );
}

const toFile = (band: Band, figure: CurveFigure): FigureFile => ({
  stem: `input-output-${band.nominal_Hz}-hz`,
  title: `measured over expected level, ${formatFrequency(band.nominal_Hz)} band`,
  parts: [{ figure, x: 0, y: 0 }],
  levelDb: findHighest(band.levels.flatMap((level) => [level.spl_dB, level.expected_dB])),
});

const toCell = (value: number | null, format: (value: number) => string) =>
  value === null ? <NoValue say="in the noise" /> : format(value);

function sayInputOutput(band: Band): string {
  const name = `Expected against measured level in the ${formatFrequency(band.nominal_Hz)} band`;
  const { onset } = band;
  if (onset.status === "found" && onset.spl_dB !== null) {
    return `${name}: compression reaches one third of a decibel at ${formatDb(onset.spl_dB)}`;
  }
  return `${name}: onset ${onset.status}`;
}
