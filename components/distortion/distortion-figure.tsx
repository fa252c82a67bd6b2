"use client";

import { useMemo, type KeyboardEvent } from "react";
import { toDistortionFigure } from "@/lib/charts/distortion";
import { DISTORTION_LAYOUT, type DistortionLayout } from "@/lib/charts/distortion-layout";
import { sayComponent, THD, type Component } from "@/lib/charts/distortion-parts";
import { sayDistortion, sayRun, toDistortionReadout } from "@/lib/charts/distortion-words";
import { formatFrequency } from "@/lib/charts/format";
import { toHarmonicMap, toHarmonicRows } from "@/lib/charts/harmonic-map";
import { selectionShapes, tabShapes } from "@/lib/charts/selection";
import { findHighest, listPlainLevels } from "@/lib/charts/series-levels";
import { COLOURS } from "@/lib/charts/tokens";
import type { Result, ResultRun } from "@/lib/result/result-schema";
import { useCrosshair } from "../parts/crosshair";
import { CurvePlot } from "../parts/curve-plot";
import { FigureSvg } from "../parts/figure-svg";
import { Readout } from "../parts/readout";
import { Shapes } from "../parts/shapes";
import { useWidth } from "../parts/use-width";
import { ValuesTable } from "../parts/values-table";
import { ComponentPicker } from "./component-picker";

interface DistortionFigureProps {
  result: Result;
  run: ResultRun;
  shown: readonly Component[];
  onShown: (shown: Component[]) => void;
  unit: DistortionLayout["unit"];
  criterionPercent: number | null;
  selectedHz: number | null;
  onSelect: (nominalHz: number) => void;
}

/** Between the curves and the map, px. */
const MAP_GAP = 8;
const LEAST_PITCH = 27;
const MOST_PITCH = 42;

/** Distortion of one run: curves, the harmonic map on the same pitch, the readout and the table. Put it in a CrosshairProvider. */
export function DistortionFigure({
  result,
  run,
  shown,
  onShown,
  unit,
  criterionPercent,
  selectedHz,
  onSelect,
}: DistortionFigureProps) {
  const [ref, width] = useWidth<HTMLDivElement>(938);
  const { hoveredHz, hover } = useCrosshair();
  const { bands } = result;
  const room =
    (width - DISTORTION_LAYOUT.left - DISTORTION_LAYOUT.right) / Math.max(1, bands.length);
  const pitch = Math.min(MOST_PITCH, Math.max(LEAST_PITCH, Math.floor(room * 10) / 10));
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
        shown,
        criterionPercent,
        layout: { pitch, unit, top: 34 },
      }),
    [result, run, level, shown, criterionPercent, pitch, unit],
  );
  const rows = useMemo(() => toHarmonicRows(bands, run.file), [bands, run.file]);
  const map = useMemo(
    () => toHarmonicMap(rows, figure.bands, DISTORTION_LAYOUT.left),
    [rows, figure.bands],
  );
  const selected = bands.findIndex((band) => band.nominal_Hz === selectedHz);
  const pointed = bands.findIndex((band) => band.nominal_Hz === (hoveredHz ?? selectedHz));
  const band = bands[pointed];
  const hzAt = (x: number): number | null => bands[figure.bands.indexAt(x)]?.nominal_Hz ?? null;
  const readout =
    band === undefined
      ? null
      : toDistortionReadout(
          band,
          run,
          shown.filter((component) => component !== THD),
        );

  const onKeyDown = (event: KeyboardEvent): void => {
    const at = Math.max(selected, 0);
    const to = { ArrowLeft: at - 1, ArrowRight: at + 1, Home: 0, End: bands.length - 1 }[event.key];
    const next = to === undefined ? undefined : bands[to];
    if (next === undefined) return;
    event.preventDefault();
    onSelect(next.nominal_Hz);
  };

  return (
    <div>
      <div ref={ref} className="border border-rule bg-sheet pt-2.5 pb-2">
        <div className="px-4 pb-2 lg:pl-[76px]">
          <ComponentPicker shown={shown} onChange={onShown} />
        </div>
        <div className="overflow-x-auto overflow-y-hidden">
          <div className="relative w-max">
            <CurvePlot
              figure={figure}
              label={`${sayDistortion(bands, run)}. Arrow keys move between bands.`}
              onPoint={(x) => hover(x === null ? null : hzAt(x))}
              onPick={(x) => {
                const hz = hzAt(x);
                if (hz !== null) onSelect(hz);
              }}
              onKeyDown={onKeyDown}
            >
              {band !== undefined && (
                <g pointerEvents="none" transform={`translate(${figure.plot.x} 0)`}>
                  <line
                    className="stroke-overprint"
                    strokeWidth="1.2"
                    x1={figure.bands.centre(pointed)}
                    x2={figure.bands.centre(pointed)}
                    y1={figure.plot.y}
                    y2={figure.plot.y + figure.plot.height}
                  />
                  <Shapes
                    shapes={tabShapes(pointed, band.nominal_Hz, figure.bands, figure.plot.y)}
                  />
                </g>
              )}
            </CurvePlot>
            <div className="mt-2 flex" aria-hidden="true">
              <FigureSvg figure={map.staff} />
              <FigureSvg figure={map.plot}>
                {pointed >= 0 && (
                  <Shapes
                    shapes={selectionShapes(pointed, {
                      bands: figure.bands,
                      top: 0,
                      foot: map.plot.height,
                    })}
                  />
                )}
              </FigureSvg>
            </div>
          </div>
        </div>
      </div>
      {readout === null ? (
        <p className="figures py-2.5 text-[13px]/5 text-ink-2">
          Pick a band: its figures stand here.
        </p>
      ) : (
        <Readout subject={readout.subject} items={readout.items} />
      )}
      <ValuesTable
        caption="Distortion by band, percent of the fundamental"
        file={{
          stem: `distortion-${run.file.replace(/\.[^.]*$/, "")}`,
          title: `distortion, ${sayRun(run)}`,
          parts: [
            { figure, x: 0, y: 0 },
            { figure: map.staff, x: 0, y: figure.height + MAP_GAP },
            { figure: map.plot, x: map.staff.width, y: figure.height + MAP_GAP },
          ],
          levelDb: findHighest(run.spl_dB) ?? run.level_dB,
        }}
        columns={[
          { key: "band", head: "band" },
          { key: "0", head: "THD_F" },
          ...rows.map((row) => ({ key: `${row.order}`, head: sayComponent(row.order) })),
        ]}
        rows={bands.map((one) => {
          const { items } = toDistortionReadout(
            one,
            run,
            rows.map((row) => row.order),
          );
          const of = (name: string): string =>
            items.find((item) => item.name === name)?.value ?? "not assessed";
          return {
            id: one.nominal_Hz,
            cells: {
              band: formatFrequency(one.nominal_Hz),
              0: of("THD_F"),
              ...Object.fromEntries(rows.map((row) => [row.order, of(sayComponent(row.order))])),
            },
          };
        })}
      />
    </div>
  );
}
