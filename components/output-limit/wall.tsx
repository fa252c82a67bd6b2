"use client";

import { useEffect, useRef, type KeyboardEvent } from "react";
import { sayColumn, sayWall } from "@/lib/charts/band-words";
import type { BandColumns } from "@/lib/charts/band-columns";
import { selectionShapes, tabShapes } from "@/lib/charts/selection";
import type { WallFigure } from "@/lib/charts/wall";
import { DECIDABLE_CAUSES, type DecidableCause } from "@/lib/series/vocabulary";
import { useCrosshair } from "../parts/crosshair";
import { FigureSvg } from "../parts/figure-svg";
import { Shapes } from "../parts/shapes";

export interface WallKeys {
  /** Enter: on to the decision. */
  onEnter?: () => void;
  /** 1 to 8: a cause is picked for the selected band. */
  onCause?: (cause: DecidableCause) => void;
  /** N: the next band that is open. */
  onNextOpen?: () => void;
}

interface WallProps extends WallKeys {
  figure: WallFigure;
  columns: BandColumns;
  /** Nominal frequency of the selected band. */
  selectedHz: number | null;
  onSelect: (nominalHz: number) => void;
  /** Bands that are selected together with it. */
  range?: ReadonlySet<number> | undefined;
  /** With Shift: everything from the selected band to this one. */
  onExtend?: ((nominalHz: number) => void) | undefined;
  /** The decision is said with each column. */
  withDecisions?: boolean;
  /** The map goes on under the wall: the selection stays open below. */
  mapBelow?: boolean;
  /** Columns rise once, when the analysis has just been completed. */
  rise?: boolean;
}

/**
 * The plot of the wall, one tab stop: arrows, Home and End move between bands; each column is a
 * button named in full. Draw it beside `figure.staff` and `figure.key` (OutputLimitFigure does).
 */
export function Wall({
  figure,
  columns: { columns, levels },
  selectedHz,
  onSelect,
  range,
  onExtend,
  withDecisions = true,
  mapBelow = false,
  rise = false,
  ...keys
}: WallProps) {
  const { hoveredHz, hover } = useCrosshair();
  const buttons = useRef(new Map<number, SVGGElement>());
  const moved = useRef(false);
  const { bands, top, plot } = figure;
  const selected = columns.findIndex((column) => column.nominalHz === selectedHz);
  const together = columns.flatMap((column, at) =>
    range?.has(column.nominalHz) === true ? [at] : [],
  );
  const firstSelected = together[0] ?? selected;
  const countSelected = Math.max(1, together.length);
  const hovered = columns.findIndex((column) => column.nominalHz === hoveredHz);
  const stop = columns[Math.max(selected, 0)]?.nominalHz;

  useEffect(() => {
    if (!moved.current || selectedHz === null) return;
    moved.current = false;
    buttons.current.get(selectedHz)?.focus();
  }, [selectedHz]);

  const onKeyDown = (event: KeyboardEvent, at: number): void => {
    if (event.ctrlKey || event.metaKey || event.altKey) return;
    const to = moveOf(event.key, at, columns.length);
    const column = to === null ? undefined : columns[to];
    if (column !== undefined) {
      // At the end nothing moves, and a later move is not the wall's to follow.
      moved.current = column.nominalHz !== selectedHz;
      if (!moved.current) buttons.current.get(column.nominalHz)?.focus();
      (event.shiftKey && onExtend !== undefined ? onExtend : onSelect)(column.nominalHz);
    } else if (!pressed(event.key, keys)) return;
    event.preventDefault();
  };

  return (
    <FigureSvg figure={plot} className={rise ? "wall-rise" : undefined}>
      {/* A group inside SVG has no element of its own. */}
      {/* oxlint-disable-next-line jsx-a11y/prefer-tag-over-role */}
      <g role="group" aria-label={sayWall(columns, levels)}>
        {columns.map((column, at) => (
          // A button inside SVG has no element of its own.
          <g
            key={column.nominalHz}
            ref={(element) => {
              if (element === null) buttons.current.delete(column.nominalHz);
              else buttons.current.set(column.nominalHz, element);
            }}
            // oxlint-disable-next-line jsx-a11y/prefer-tag-over-role
            role="button"
            tabIndex={column.nominalHz === stop ? 0 : -1}
            data-band={column.nominalHz}
            aria-pressed={column.nominalHz === selectedHz || range?.has(column.nominalHz) === true}
            aria-label={sayColumn(column, levels, withDecisions)}
            className="cursor-pointer outline-offset-0"
            onClick={(event) =>
              (event.shiftKey && onExtend !== undefined ? onExtend : onSelect)(column.nominalHz)
            }
            onKeyDown={(event) => onKeyDown(event, at)}
            onPointerEnter={() => hover(column.nominalHz)}
            onPointerLeave={() => hover(null)}
          >
            <rect
              x={bands.left(at)}
              y={top}
              width={bands.pitch}
              height={plot.height - top}
              fill="transparent"
            />
          </g>
        ))}
      </g>
      <g aria-hidden="true" pointerEvents="none">
        {hovered >= 0 && hovered !== selected && (
          <rect
            className="fill-none stroke-overprint"
            strokeWidth="1.2"
            x={bands.left(hovered)}
            y={top}
            width={bands.pitch}
            height={figure.foot - top}
          />
        )}
        {selected >= 0 && selectedHz !== null && (
          <Shapes
            shapes={[
              ...selectionShapes(firstSelected, {
                bands,
                count: countSelected,
                top: top - 1,
                foot: plot.height,
                ...(mapBelow ? { open: "foot" as const } : {}),
              }),
              ...tabShapes(selected, selectedHz, bands, top),
            ]}
          />
        )}
      </g>
    </FigureSvg>
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

/** Runs the command of a key. @returns whether there was one. */
function pressed(key: string, { onEnter, onCause, onNextOpen }: WallKeys): boolean {
  const cause = DECIDABLE_CAUSES[Number(key) - 1];
  if (cause !== undefined && onCause !== undefined) {
    onCause(cause);
    return true;
  }
  if (key === "Enter" && onEnter !== undefined) {
    onEnter();
    return true;
  }
  if (key.toLowerCase() === "n" && onNextOpen !== undefined) {
    onNextOpen();
    return true;
  }
  return false;
}
