/** The wall for readers: one figure with its staff, what was reached over it, and the runs by name. */
import type { Snapshot } from "../publication/snapshot-schema";
import type { Figure, Shape } from "./figure";
import { formatFrequency, formatLevel, formatLimitDown } from "./format";
import { spreadLabels } from "./labels";
import { toPublishedColumns } from "./published-columns";
import { COLOURS } from "./tokens";
import { toWall, type WallFigure } from "./wall";

interface ReaderWallSize {
  width: number;
  plotHeight: number;
  /** Narrow: no names beside the plot, fewer labels. */
  narrow: boolean;
}

const HEAD = 44;
const NAMES = 96;
const STAFF = 56;
const NARROW_STAFF = 40;

/** @param size width of the whole figure, px */
export function toReaderWall(
  snapshot: Pick<Snapshot, "bands" | "spl_valid" | "headline">,
  { width, plotHeight, narrow }: ReaderWallSize,
): Figure {
  const staffWidth = narrow ? NARROW_STAFF : STAFF;
  const names = narrow ? 0 : NAMES;
  const published = toPublishedColumns(snapshot);
  // Readers are told of limits; the onset belongs to the lab's own wall.
  const columns = {
    ...published,
    columns: published.columns.map((column) => ({ ...column, onsetDb: null })),
  };
  const count = Math.max(1, columns.columns.length);
  const wall = toWall(columns, {
    pitch: Math.floor(((width - staffWidth - names - 2) / count) * 100) / 100,
    plotHeight,
    head: HEAD,
    staffWidth,
    causes: false,
    decisions: false,
    sparseLabels: narrow,
  });
  const shapes: Shape[] = [
    { kind: "group", shapes: wall.staff.shapes },
    { kind: "group", x: staffWidth, y: 0, shapes: wall.plot.shapes },
    {
      kind: "group",
      x: staffWidth,
      y: 0,
      shapes: [
        ...reachedShapes(snapshot, wall, narrow),
        ...(narrow ? [] : runNameShapes(columns, wall)),
      ],
    },
  ];
  return { width, height: wall.plot.height, patterns: wall.plot.patterns, shapes };
}

/** A measure over the range that was reached, with its words. */
export function reachedShapes(
  { headline, bands }: Pick<Snapshot, "headline" | "bands">,
  wall: WallFigure,
  narrow: boolean,
): Shape[] {
  if (headline === null) return [];
  const from = bands.findIndex((band) => band.nominal_Hz === headline.from_Hz);
  const to = bands.findIndex((band) => band.nominal_Hz === headline.to_Hz);
  if (from < 0 || to < from) return [];
  const x1 = wall.bands.left(from) + 1;
  const x2 = wall.bands.left(to) + wall.bands.pitch - 1;
  const level = `${headline.at_least ? "at least " : ""}${formatLimitDown(headline.spl_dB)}`;
  const range = `${formatFrequency(headline.from_Hz)} to ${formatFrequency(headline.to_Hz)}`;
  const y = 24;
  return [
    {
      kind: "path",
      role: "reached",
      d: `M${x1} ${wall.top - 4}V${y}H${x2}V${wall.top - 4}`,
      stroke: COLOURS.ink,
      strokeWidth: 1.5,
    },
    {
      kind: "text",
      role: "reached-words",
      x: (x1 + x2) / 2,
      y: y - 8,
      text: narrow ? level : `${level} reached from ${range}`,
      size: narrow ? 13 : 15,
      weight: 600,
      anchor: "middle",
      fill: COLOURS.ink,
    },
  ];
}

function runNameShapes(columns: ReturnType<typeof toPublishedColumns>, wall: WallFigure): Shape[] {
  const last = columns.columns.at(-1);
  if (last === undefined) return [];
  const named = columns.levels.flatMap((level) => {
    const at = last.measuredDb[level.rank];
    return at === null || at === undefined
      ? []
      : [{ text: `${formatLevel(level.levelDb)} run`, y: wall.top + wall.scale.toY(at) }];
  });
  const spread = spreadLabels(
    named.map((one) => one.y),
    16,
    wall.top,
    wall.foot,
  );
  const x = wall.bands.width;
  return named.flatMap((one, at): Shape[] => {
    const y = spread[at] ?? one.y;
    return [
      {
        kind: "path",
        d: `M${x + 1} ${one.y}L${x + 16} ${y}`,
        stroke: COLOURS.ink,
      },
      { kind: "text", x: x + 20, y: y + 4, text: one.text, size: 12, fill: COLOURS.ink2 },
    ];
  });
}
