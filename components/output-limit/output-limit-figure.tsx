"use client";

import { useMemo } from "react";
import { toBandColumns, type BandDecision } from "@/lib/charts/band-columns";
import { sayFinding } from "@/lib/charts/band-words";
import { toCompressionMap, toMapRows } from "@/lib/charts/compression-map";
import { formatFrequency } from "@/lib/charts/format";
import { findHighest } from "@/lib/charts/series-levels";
import { toWall } from "@/lib/charts/wall";
import { toWallPitch } from "@/lib/charts/wall-pitch";
import { sayCriterion } from "@/lib/result/criteria";
import type { Result } from "@/lib/result/result-schema";
import type { Criterion } from "@/lib/series/series-schema";
import { CauseKey } from "./cause-key";
import { CompressionMap } from "./compression-map";
import { LimitTable } from "./limit-table";
import { Wall, type WallKeys } from "./wall";
import { CrosshairProvider, useCrosshair } from "../parts/crosshair";
import { FigureSvg } from "../parts/figure-svg";
import { useWidth } from "../parts/use-width";

interface OutputLimitFigureProps extends WallKeys {
  result: Result;
  criterion: Criterion;
  /** By nominal frequency of the band; left out where nothing can be decided yet. */
  decisions?: ReadonlyMap<number, BandDecision>;
  selectedHz: number | null;
  onSelect: (nominalHz: number) => void;
  /** Bands that are selected together, and how they come to be. */
  range?: ReadonlySet<number> | undefined;
  onExtend?: ((nominalHz: number) => void) | undefined;
  /** Columns rise once, when the analysis has just been completed. */
  rise?: boolean;
}

/** The readout, the wall, the compression map on the wall's pitch, the key and the table of values. */
export function OutputLimitFigure(props: OutputLimitFigureProps) {
  return (
    <CrosshairProvider>
      <Figure {...props} />
    </CrosshairProvider>
  );
}

function Figure({
  result,
  criterion,
  decisions,
  selectedHz,
  onSelect,
  range,
  onExtend,
  rise,
  ...keys
}: OutputLimitFigureProps) {
  const [ref, width] = useWidth<HTMLDivElement>(1013);
  const { hoveredHz } = useCrosshair();
  const { pitch, keyed } = toWallPitch(width, result.bands.length);
  const withDecisions = decisions !== undefined;
  const columns = useMemo(
    () => toBandColumns({ result, criterion, ...(decisions === undefined ? {} : { decisions }) }),
    [result, criterion, decisions],
  );
  const rows = useMemo(() => toMapRows(result), [result]);
  const wall = useMemo(
    () => toWall(columns, { pitch, decisions: withDecisions }),
    [columns, pitch, withDecisions],
  );
  const map = useMemo(() => toCompressionMap(rows, wall.bands), [rows, wall]);
  const shown = columns.columns.find((column) => column.nominalHz === (hoveredHz ?? selectedHz));

  return (
    <div>
      <div ref={ref} className="border border-rule bg-sheet pt-2 pb-2.5">
        <p
          className="figures min-h-5 px-2.5 text-[12px]/5 text-ink-2 max-md:min-h-10 sm:text-right"
          aria-live="off"
        >
          {shown === undefined ? (
            "Pick a band: its limit, onset and loss stand here."
          ) : (
            <>
              <b className="font-semibold text-ink">{formatFrequency(shown.nominalHz)}</b>{" "}
              {sayFinding(shown, columns.levels)}
            </>
          )}
        </p>
        <div className="flex">
          {/* The frame scrolls by keyboard through the wall's own tab stop. */}
          <div className="min-w-0 overflow-x-auto overflow-y-hidden">
            <div className="flex w-max">
              <div className="sticky left-0 z-10 flex-none bg-sheet">
                <FigureSvg figure={wall.staff} />
                <FigureSvg figure={map.staff} />
              </div>
              <div className="flex-none">
                <Wall
                  figure={wall}
                  columns={columns}
                  selectedHz={selectedHz}
                  onSelect={onSelect}
                  range={range}
                  onExtend={onExtend}
                  withDecisions={withDecisions}
                  mapBelow={rows.length > 0}
                  rise={rise ?? false}
                  {...keys}
                />
                <CompressionMap
                  figure={map}
                  rows={rows}
                  bands={wall.bands}
                  bandsHz={columns.columns.map((column) => column.nominalHz)}
                  selectedHz={selectedHz}
                  onSelect={onSelect}
                />
              </div>
            </div>
          </div>
          {keyed && (
            <FigureSvg
              figure={wall.key}
              label="Key: what is drawn on a band, and the marks of the causes"
            />
          )}
        </div>
        {!keyed && <CauseKey />}
      </div>
      <LimitTable
        columns={columns}
        rows={rows}
        withDecisions={withDecisions}
        file={{
          stem: "output-limit",
          title: "output limit and compression by band",
          parts: [
            { figure: wall.staff, x: 0, y: 0 },
            { figure: wall.plot, x: wall.staff.width, y: 0 },
            { figure: map.staff, x: 0, y: wall.plot.height },
            { figure: map.plot, x: wall.staff.width, y: wall.plot.height },
            { figure: wall.key, x: wall.staff.width + wall.plot.width, y: 0 },
          ],
          levelDb: findHighest(columns.columns.map((column) => column.topDb)),
          criterion: `limit: ${sayCriterion(criterion)}`,
        }}
      />
    </div>
  );
}
