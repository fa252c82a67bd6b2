"use client";

import { useMemo, type KeyboardEvent } from "react";
import { COMPARE_KEY_WIDTH, toCompareFigure, type CompareFigure } from "@/lib/charts/compare";
import { toMapKey } from "@/lib/charts/compare-map";
import { formatFrequency } from "@/lib/charts/format";
import { findHighest } from "@/lib/charts/series-levels";
import { toWallPitch } from "@/lib/charts/wall-pitch";
import {
  letterOf,
  sayComparison,
  toDifferenceWords,
  toLimitText,
} from "@/lib/compare/compare-words";
import { sayCriterion } from "@/lib/result/criteria";
import type { Comparison } from "@/lib/compare/comparison-schema";
import { CrosshairProvider, useCrosshair } from "../parts/crosshair";
import { FigureSvg } from "../parts/figure-svg";
import { useWidth } from "../parts/use-width";
import { ValuesTable } from "../parts/values-table";

/** The lines, the map of differences on their pitch, its key and the table of values. */
export function ComparisonFigure({ comparison }: { comparison: Comparison }) {
  return (
    <CrosshairProvider>
      <Figure comparison={comparison} />
    </CrosshairProvider>
  );
}

function Figure({ comparison }: { comparison: Comparison }) {
  const [ref, width] = useWidth<HTMLDivElement>(1390);
  const bandCount = comparison.bands_Hz.length;
  const { pitch, keyed } = toWallPitch(width, bandCount, COMPARE_KEY_WIDTH);
  const figure = useMemo(() => toCompareFigure(comparison, { pitch }), [comparison, pitch]);
  const key = useMemo(() => toMapKey(comparison), [comparison]);
  return (
    <div className="px-gutter max-md:px-phone">
      <div ref={ref} className="border border-rule bg-sheet pt-2 pb-2.5">
        <BandReadout comparison={comparison} />
        <div className="flex">
          <div className="min-w-0 overflow-x-auto overflow-y-hidden">
            <div className="flex w-max">
              <div className="sticky left-0 z-10 flex-none bg-sheet">
                <FigureSvg figure={figure.staff} />
              </div>
              <Plot figure={figure} label={sayComparison(comparison)} />
            </div>
          </div>
          {keyed && <FigureSvg figure={figure.key} />}
        </div>
        {!keyed && (
          <p className="px-2.5 pt-1 text-label text-ink-2">
            A thick line: limit reached. A thin, hollow line: not reached up to the loudest run. The
            pale wall is A, the reference.
          </p>
        )}
        {comparison.tests.length > 1 && (
          <ul
            aria-label="Key of the map"
            className="figures flex flex-wrap gap-x-7 gap-y-1 px-2.5 pt-2 text-[11px]/4 text-ink-2 sm:pl-[76px]"
          >
            {key.map((item) => (
              <li key={item.words} className="flex items-start gap-2">
                {item.before !== undefined && <span className="pt-1">{item.before}</span>}
                <FigureSvg figure={item.figure} />
                <span className="pt-1">{item.words}</span>
              </li>
            ))}
          </ul>
        )}
      </div>
      <LimitValues comparison={comparison} figure={figure} />
    </div>
  );
}

/** One fixed line: the band under the pointer or the keyboard. */
function BandReadout({ comparison }: { comparison: Comparison }) {
  const { hoveredHz } = useCrosshair();
  const at = hoveredHz === null ? -1 : comparison.bands_Hz.indexOf(hoveredHz);
  const shown = hoveredHz !== null && at >= 0;
  return (
    <p className="figures min-h-5 px-2.5 text-[12px]/5 text-ink-2 max-md:min-h-15 sm:text-right">
      {shown ? (
        <>
          <b className="font-semibold text-ink">{formatFrequency(hoveredHz)}</b>
          {comparison.tests.map((test, nth) => (
            <span key={test.id}>
              {" · "}
              {letterOf(nth)} {toBandText(comparison, nth, at)}
            </span>
          ))}
        </>
      ) : (
        "Point at a band, or move with the arrow keys: its limits stand here."
      )}
    </p>
  );
}

/** "88.2 dB, 5.8 dB quieter than A". */
function toBandText({ tests, bands_Hz }: Comparison, nth: number, at: number): string {
  const test = tests[nth];
  const band = test?.bands.find((one) => one.nominal_Hz === bands_Hz[at]);
  if (test === undefined || band === undefined) return "not assessed";
  const difference = test.differences[at];
  const words =
    difference === undefined || difference.shown === "unknown"
      ? ""
      : `, ${toDifferenceWords(difference, { than: "A", whole: false })}`;
  return `${toLimitText(band)}${words}`;
}

function Plot({ figure, label }: { figure: CompareFigure; label: string }) {
  const { hoveredHz, hover } = useCrosshair();
  const { bands, bandsHz, plot, top } = figure;
  const at = hoveredHz === null ? -1 : bandsHz.indexOf(hoveredHz);
  const onKeyDown = (event: KeyboardEvent): void => {
    const to = moveOf(event.key, at, bandsHz.length);
    const hz = to === null ? undefined : bandsHz[to];
    if (hz === undefined) return;
    hover(hz);
    event.preventDefault();
  };
  return (
    <div
      // The picture is one tab stop: arrows move its crosshair.
      // oxlint-disable-next-line jsx-a11y/prefer-tag-over-role
      role="img"
      aria-label={label}
      {...{ tabIndex: 0, onKeyDown, onBlur: () => hover(null) }}
      className="flex-none outline-offset-0"
    >
      <FigureSvg figure={plot}>
        {at >= 0 && (
          <rect
            className="fill-none stroke-overprint"
            pointerEvents="none"
            strokeWidth="1.2"
            x={bands.left(at)}
            y={top}
            width={bands.pitch}
            height={plot.height - top - 2}
          />
        )}
        <rect
          x={0}
          y={top}
          width={bands.width}
          height={plot.height - top}
          fill="transparent"
          onPointerMove={(event) => {
            const left = event.currentTarget.getBoundingClientRect().left;
            hover(bandsHz[bands.indexAt(event.clientX - left)] ?? null);
          }}
          onPointerLeave={() => hover(null)}
        />
      </FigureSvg>
    </div>
  );
}

function moveOf(key: string, at: number, count: number): number | null {
  switch (key) {
    case "ArrowLeft":
      return Math.max(0, at - 1);
    case "ArrowRight":
      return Math.min(count - 1, at + 1);
    case "Home":
      return 0;
    case "End":
      return count - 1;
    default:
      return null;
  }
}

function LimitValues({ comparison, figure }: { comparison: Comparison; figure: CompareFigure }) {
  const { tests, bands_Hz: bandsHz } = comparison;
  const columns = useMemo(
    () => [
      { key: "band", head: "band" },
      ...tests.map((test, at) => ({ key: test.id, head: `${letterOf(at)} limit, dB SPL at 1 m` })),
      ...tests.slice(1).map((test, at) => ({
        key: `${test.id} re A`,
        head: `${letterOf(at + 1)} re A`,
        words: true,
      })),
    ],
    [tests],
  );
  const rows = useMemo(
    () =>
      bandsHz.map((hz, at) => ({
        id: hz,
        cells: toCells(comparison, hz, at),
      })),
    [comparison, bandsHz],
  );
  return (
    <ValuesTable
      caption="Output limits by band"
      columns={columns}
      rows={rows}
      file={{
        stem: "compare",
        title: tests.map((test, at) => `${letterOf(at)} ${test.model}`).join(", "),
        parts: [
          { figure: figure.staff, x: 0, y: 0 },
          { figure: figure.plot, x: figure.staff.width, y: 0 },
          { figure: figure.key, x: figure.staff.width + figure.plot.width, y: 0 },
        ],
        levelDb: findHighest(tests.flatMap((test) => test.bands.map((band) => band.spl_dB))),
        criterion: `limit: ${sayCriterion(comparison.criterion)}`,
      }}
    />
  );
}

function toCells({ tests }: Comparison, hz: number, at: number): Record<string, string> {
  const cells: Record<string, string> = { band: formatFrequency(hz) };
  for (const test of tests) {
    const band = test.bands.find((one) => one.nominal_Hz === hz);
    const difference = test.differences[at];
    cells[test.id] = band === undefined ? "not assessed" : toLimitText(band);
    if (difference !== undefined) {
      cells[`${test.id} re A`] = toDifferenceWords(difference, { whole: false });
    }
  }
  return cells;
}
