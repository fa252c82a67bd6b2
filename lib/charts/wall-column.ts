/** One column of the wall: waters, tidelines, what was lost, the limit and the onset. */
import type { BandColumn } from "./band-columns";
import { round2, type Fill, type Shape } from "./figure";
import { COMPRESSION, NOISE, pastName } from "./patterns";
import type { DbScale } from "./scales";
import type { SeriesLevel } from "./series-levels";
import { COLOURS } from "./tokens";

export interface ColumnPlace {
  /** Left edge and width of the column itself, without the gap to its neighbour. */
  readonly x: number;
  readonly width: number;
  /** y of the plot's top. */
  readonly top: number;
  readonly scale: DbScale;
}

/** @returns shapes in drawing order: fills, lined part, tidelines, hatch, limit, notch. */
export function columnShapes(
  column: BandColumn,
  levels: readonly SeriesLevel[],
  place: ColumnPlace,
): Shape[] {
  if (column.topDb === null) return noiseShapes(levels, place);
  return [
    ...waterShapes(column, levels, place),
    ...lineShapes(column, levels, place),
    ...lossShapes(column, place),
    ...limitShapes(column, place),
    ...(column.onsetDb === null ? [] : notchShapes(column.onsetDb, place)),
  ];
}

const toY = (place: ColumnPlace, levelDb: number): number =>
  round2(place.top + place.scale.toY(levelDb));

function block(place: ColumnPlace, fromDb: number, toDb: number, fill: Fill, role: string): Shape {
  const y = toY(place, toDb);
  return {
    kind: "rect",
    role,
    x: place.x,
    y,
    width: place.width,
    height: round2(toY(place, fromDb) - y),
    fill,
  };
}

/** No run stood out of the noise: hatched up to where the quietest was due. */
function noiseShapes(levels: readonly SeriesLevel[], place: ColumnPlace): Shape[] {
  const due = levels[0]?.levelDb ?? place.scale.minDb;
  return [block(place, place.scale.minDb, due, { pattern: NOISE }, "in-noise")];
}

/** Above this the water was played but is past the limit. */
function solidUpTo(column: BandColumn): number {
  if (column.limit.status === "below lowest") return -Infinity;
  return column.limit.status === "found" && column.limitDb !== null ? column.limitDb : Infinity;
}

function waterShapes(
  column: BandColumn,
  levels: readonly SeriesLevel[],
  place: ColumnPlace,
): Shape[] {
  const solid = solidUpTo(column);
  const shapes: Shape[] = [];
  let bottom = place.scale.minDb;
  for (const { rank, paint } of levels) {
    const top = column.measuredDb[rank];
    if (top === null || top === undefined || top <= bottom) continue;
    const part = Math.min(Math.max(solid, bottom), top);
    if (part > bottom) shapes.push(block(place, bottom, part, paint.fill, "water"));
    if (part < top) shapes.push(block(place, part, top, { pattern: pastName(rank) }, "past-limit"));
    bottom = top;
  }
  return shapes;
}

/** The high-water line of each run lies inside the top of its water. */
function lineShapes(
  column: BandColumn,
  levels: readonly SeriesLevel[],
  place: ColumnPlace,
): Shape[] {
  return levels.flatMap(({ rank, paint }): Shape[] => {
    const at = column.measuredDb[rank];
    if (at === null || at === undefined || at <= place.scale.minDb) return [];
    const y = round2(toY(place, at) + 0.75);
    return [
      {
        kind: "line",
        role: "tideline",
        x1: place.x,
        y1: y,
        x2: place.x + place.width,
        y2: y,
        stroke: paint.line,
        strokeWidth: 1.5,
      },
    ];
  });
}

function lossShapes(column: BandColumn, place: ColumnPlace): Shape[] {
  if (column.expectedDb === null || column.topDb === null || column.expectedDb <= column.topDb)
    return [];
  const y = toY(place, column.expectedDb);
  return [
    {
      kind: "rect",
      role: "compression",
      x: place.x + 0.5,
      y,
      width: place.width - 1,
      height: round2(toY(place, column.topDb) - y),
      fill: { pattern: COMPRESSION },
      stroke: COLOURS.siltLine,
    },
  ];
}

const LIMIT_THICK = 3;
const GAP = 1.5;
const NARROW_COLUMN = 14;

/** Limit line, open posts, posts turned over, or dots: one of the four, always. */
function limitShapes(column: BandColumn, place: ColumnPlace): Shape[] {
  const { limit, limitDb, topDb } = column;
  const { x, width } = place;
  if (limit.status === "found") {
    const at = limitDb ?? topDb;
    if (at === null) return [];
    const y = toY(place, at);
    const thick = width < NARROW_COLUMN ? 2.6 : LIMIT_THICK;
    return [
      { kind: "rect", x, y: round2(y + thick / 2), width, height: GAP, fill: COLOURS.sheet },
      {
        kind: "rect",
        role: "limit",
        x: x - 0.5,
        y: round2(y - thick / 2),
        width: width + 1,
        height: thick,
        fill: COLOURS.ink,
      },
    ];
  }
  if (limit.status === "not reached")
    return postShapes(toY(place, limitDb ?? topDb ?? 0), place, "not-reached");
  if (limit.status === "below lowest") {
    const lowest = column.measuredDb.find((value) => value !== null) ?? topDb ?? 0;
    return postShapes(toY(place, lowest), place, "below-lowest");
  }
  const y = toY(place, topDb ?? place.scale.minDb);
  return [
    {
      kind: "rect",
      role: "not-assessed-outline",
      x: x + 0.5,
      y,
      width: width - 1,
      height: round2(place.top + place.scale.height - y),
      stroke: COLOURS.edge,
      dash: [2, 3],
    },
    {
      kind: "line",
      role: "not-assessed",
      x1: x,
      y1: y - 4,
      x2: x + width,
      y2: y - 4,
      stroke: COLOURS.ink,
      strokeWidth: 1.8,
      dash: [2, 3],
    },
  ];
}

/** A line with two posts and no lid; turned over where the limit lies below it. */
function postShapes(
  y: number,
  { x, width }: ColumnPlace,
  role: "not-reached" | "below-lowest",
): Shape[] {
  const post = Math.max(3, Math.min(7, 0.3 * width));
  const strokeWidth = width < NARROW_COLUMN ? 1.1 : 1.8;
  const inset = strokeWidth / 2;
  const up = role === "not-reached";
  const end = round2(up ? y - post : y + post);
  return [
    {
      kind: "rect",
      x,
      y: round2(up ? y + inset : y - inset - GAP),
      width,
      height: GAP,
      fill: COLOURS.sheet,
    },
    {
      kind: "path",
      role,
      d: `M${round2(x + inset)} ${end}V${y}H${round2(x + width - inset)}V${end}`,
      stroke: COLOURS.ink,
      strokeWidth,
    },
  ];
}

/** A V cut into the left edge. */
export function notchShapes(onsetDb: number, place: ColumnPlace): Shape[] {
  const y = toY(place, onsetDb);
  const depth = Math.min(9, 0.4 * place.width);
  const half = Math.min(5.5, 0.25 * place.width);
  const left = round2(place.x - 0.4);
  const tip = round2(place.x + depth);
  const [up, down] = [round2(y - half), round2(y + half)];
  return [
    {
      kind: "path",
      d: `M${place.x - 2} ${up}H${left}L${tip} ${y}L${left} ${down}H${place.x - 2}z`,
      fill: COLOURS.sheet,
    },
    {
      kind: "path",
      role: "onset",
      d: `M${left} ${up}L${tip} ${y}L${left} ${down}`,
      stroke: COLOURS.ink,
      strokeWidth: 1.6,
    },
  ];
}
