"use client";

import { useMemo } from "react";
import { toDistortionFigure } from "@/lib/charts/distortion";
import { MULTIPLE_LAYOUT, toMultiplePitch } from "@/lib/charts/distortion-layout";
import { sayDistortion, sayRun, sayThdBeside } from "@/lib/charts/distortion-words";
import { listPlainLevels } from "@/lib/charts/series-levels";
import { COLOURS } from "@/lib/charts/tokens";
import type { Result, ResultRun } from "@/lib/result/result-schema";
import { useCrosshair } from "../parts/crosshair";
import { CurvePlot } from "../parts/curve-plot";
import { joinClasses } from "../parts/join-classes";
import { LevelSwatch } from "../parts/level-swatch";
import { useWidth } from "../parts/use-width";

interface RunMultiplesProps {
  result: Result;
  runs: readonly ResultRun[];
  run: ResultRun;
  onPick: (file: string) => void;
  criterionPercent: number | null;
  selectedHz: number | null;
}

/** All runs on the same axes, small; one click makes one the large figure. */
export function RunMultiples({
  result,
  runs,
  run,
  onPick,
  criterionPercent,
  selectedHz,
}: RunMultiplesProps) {
  return (
    <section aria-label="All runs">
      <div className="flex items-baseline justify-between gap-4 pb-1">
        <h2>All runs</h2>
        <span className="figures text-label text-ink-2">THD_F, H2, H3 · %</span>
      </div>
      <ul className="max-lg:grid max-lg:gap-x-6 max-sm:grid-cols-1 sm:max-lg:grid-cols-2">
        {runs.map((one, at) => (
          <li key={one.file} className="border-b border-rule">
            <button
              type="button"
              aria-pressed={one.file === run.file}
              onClick={() => onPick(one.file)}
              className={joinClasses(
                "w-full border-l-4 py-2 pl-3 text-left hover:bg-wash",
                one.file === run.file ? "border-ink" : "border-transparent",
              )}
            >
              <Multiple
                result={result}
                run={one}
                criterionPercent={criterionPercent}
                selectedHz={selectedHz}
                xLabels={at === runs.length - 1}
              />
            </button>
          </li>
        ))}
      </ul>
    </section>
  );
}

interface MultipleProps extends Pick<
  RunMultiplesProps,
  "result" | "run" | "criterionPercent" | "selectedHz"
> {
  xLabels: boolean;
}

const SHOWN = [0, 2, 3];
/** Beside the large figure, px. */
const MULTIPLE_WIDTH = 388;

function Multiple({ result, run, criterionPercent, selectedHz, xLabels }: MultipleProps) {
  const { hoveredHz } = useCrosshair();
  const [ref, width] = useWidth<HTMLSpanElement>(MULTIPLE_WIDTH);
  const pitch = toMultiplePitch(width, result.bands.length);
  const level = useMemo(
    () => listPlainLevels(result.runs).find((one) => one.levelDb >= run.level_dB),
    [result.runs, run.level_dB],
  );
  const figure = useMemo(
    () =>
      toDistortionFigure({
        result,
        run,
        level: level?.paint.line ?? COLOURS.ink,
        shown: SHOWN,
        criterionPercent,
        layout: { ...MULTIPLE_LAYOUT, pitch, xLabels },
      }),
    [result, run, level, criterionPercent, pitch, xLabels],
  );
  const at = result.bands.findIndex((band) => band.nominal_Hz === (hoveredHz ?? selectedHz));
  const x = figure.plot.x + figure.bands.centre(Math.max(at, 0));
  return (
    <>
      <span className="flex items-center gap-2 pr-3 pl-10">
        {level !== undefined && (
          <LevelSwatch paint={level.paint} longTerm={run.kind === "long-term"} />
        )}
        <b className="figures text-[14px]/[18px] font-semibold">{sayRun(run)}</b>
        <span className="figures ml-auto text-label text-ink-2">
          {sayThdBeside(result.bands, run, hoveredHz ?? selectedHz)}
        </span>
      </span>
      <span ref={ref} className="block overflow-hidden">
        <CurvePlot figure={figure} label={sayDistortion(result.bands, run)}>
          {at >= 0 && (
            <line
              className="stroke-overprint"
              strokeWidth="1.2"
              x1={x}
              x2={x}
              y1={figure.plot.y}
              y2={figure.plot.y + figure.plot.height}
            />
          )}
        </CurvePlot>
      </span>
    </>
  );
}
