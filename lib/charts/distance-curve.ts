/** Level over distance in the reader's room, with the reader's seat and the allowance beside it. */
import { computeSeatLevelDbA, type Seat } from "../exposure/seat-level";
import { toTimeText } from "../exposure/words";
import { FEET_PER_M, type Units } from "../reader/units";
import { round2, type Figure, type Shape } from "./figure";
import { formatPlain, roundLevelUp } from "./format";
import { staffShapes } from "./frame-shapes";
import { toDbScale } from "./scales";
import { COLOURS, levelRamp, SAFETY_COLOURS } from "./tokens";

const FROM_M = 0.5;
const TO_M = 20;
const TICKS_M = [0.5, 1, 2, 4, 8, 16];
const TICKS_FT = [2, 4, 8, 16, 32, 64];
const LEFT = 44;
const RIGHT = 118;
const TOP = 22;
const FOOT = 44;

interface DistanceCurve {
  seat: Seat;
  width: number;
  height: number;
  /** Of the distances below. */
  units?: Units;
  /** How long a level may last, s, on the right. */
  toAllowedS: (levelDbA: number) => number;
  allowance: string;
}

const safety = (colour: string) => ({ light: colour, dark: colour });

/** @returns the curve from 0.5 to 20 m; the reader's seat is marked. */
export function toDistanceCurve(curve: DistanceCurve): Figure {
  const { seat, width, height, units = "m" } = curve;
  const levelAt = (distanceM: number): number => computeSeatLevelDbA({ ...seat, distanceM });
  const top = Math.ceil((levelAt(FROM_M) + 1) / 10) * 10;
  const foot = Math.min(70, Math.floor((levelAt(TO_M) - 5) / 10) * 10);
  const scale = toDbScale(foot, top, height - TOP - FOOT);
  const right = width - RIGHT;
  const toX = (distanceM: number): number =>
    round2(LEFT + ((right - LEFT) * Math.log(distanceM / FROM_M)) / Math.log(TO_M / FROM_M));
  const toY = (levelDbA: number): number => round2(TOP + scale.toY(levelDbA));
  const ground = TOP + scale.height;
  const points = Array.from({ length: 49 }, (_, at) => FROM_M * (TO_M / FROM_M) ** (at / 48));
  const line = points.map((m) => `${toX(m)} ${toY(levelAt(m))}`).join("L");
  const you = { x: toX(seat.distanceM), y: toY(levelAt(seat.distanceM)) };
  const seatDb = roundLevelUp(levelAt(seat.distanceM));
  const water = levelRamp(4)[0]?.fill ?? COLOURS.wash;
  const mark = COLOURS.overprint;
  const shapes: Shape[] = [
    ...scale.ticksDb.map((tick): Shape => ({
      kind: "line",
      x1: LEFT,
      x2: right,
      y1: toY(tick),
      y2: toY(tick),
      stroke: COLOURS.rule,
      crisp: true,
    })),
    { kind: "path", d: `M${LEFT} ${ground}L${line}L${right} ${ground}z`, fill: water },
    { kind: "path", d: `M${line}`, stroke: COLOURS.ink, strokeWidth: 2.2 },
    { kind: "line", x1: LEFT, x2: right, y1: ground, y2: ground, stroke: COLOURS.ink, crisp: true },
    ...staffShapes(scale, LEFT, TOP, 10),
    { kind: "text", x: 0, y: 12, text: "dB(A)", size: 12, fill: COLOURS.ink2 },
    ...(units === "ft" ? TICKS_FT : TICKS_M).map((tick): Shape => ({
      kind: "text",
      x: toX(units === "ft" ? tick / FEET_PER_M : tick),
      y: ground + 18,
      text: formatPlain(tick),
      size: 12,
      fill: COLOURS.ink,
      anchor: "middle",
    })),
    {
      kind: "text",
      x: right,
      y: ground + 36,
      text: `distance, ${units}`,
      size: 12,
      fill: COLOURS.ink2,
      anchor: "end",
    },
    ...allowanceShapes(curve, scale.ticksDb, right, toY, { top: TOP, ground, foot, topDb: top }),
    { kind: "line", x1: you.x, x2: you.x, y1: you.y, y2: ground, stroke: mark, strokeWidth: 2 },
    {
      kind: "line",
      x1: you.x,
      x2: right,
      y1: you.y,
      y2: you.y,
      stroke: mark,
      strokeWidth: 1.5,
      dash: [4, 3],
    },
    {
      kind: "circle",
      cx: you.x,
      cy: you.y,
      r: 6,
      fill: mark,
      stroke: COLOURS.sheet,
      strokeWidth: 2,
    },
    {
      kind: "text",
      x: Math.min(you.x + 10, right - 120),
      y: you.y - 12,
      text: `about ${seatDb}\u00a0dB(A)`,
      size: 15,
      weight: 600,
      fill: mark,
      halo: COLOURS.sheet,
    },
  ];
  return { width, height, patterns: [], shapes };
}

/** The right-hand scale: how long each level may last, yellow from 80 dB(A), orange from 100. */
function allowanceShapes(
  { toAllowedS, allowance }: DistanceCurve,
  ticksDb: readonly number[],
  right: number,
  toY: (levelDbA: number) => number,
  range: { top: number; ground: number; foot: number; topDb: number },
): Shape[] {
  const block = (fromDb: number, toDb: number, colour: string): Shape[] => {
    const [low, high] = [Math.max(fromDb, range.foot), Math.min(toDb, range.topDb)];
    if (high <= low) return [];
    return [
      {
        kind: "rect",
        x: right + 2,
        y: toY(high),
        width: 8,
        height: round2(toY(low) - toY(high)),
        fill: safety(colour),
        stroke: COLOURS.ink,
      },
    ];
  };
  return [
    { kind: "text", x: right + 2, y: 12, text: allowance, size: 11, fill: COLOURS.ink2 },
    ...block(80, 100, SAFETY_COLOURS.caution),
    ...block(100, 200, SAFETY_COLOURS.warning),
    ...ticksDb
      .filter((tick) => tick >= 75)
      .map((tick): Shape => {
        const allowedS = toAllowedS(tick);
        return {
          kind: "text",
          x: right + 16,
          y: toY(tick) + 4,
          text: allowedS < 15 * 60 ? "protect ears" : toTimeText(allowedS),
          size: 11,
          fill: COLOURS.ink2,
        };
      }),
  ];
}
