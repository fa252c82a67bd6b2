/**
 * The output limit of a series as a strip for a list: one column per band on a fixed scale, so that
 * rows can be compared by eye. Rules at 80 and 100 dB; a cap where the limit was reached.
 */
import type { LimitStatus } from "../series/vocabulary";
import { round2, type Figure, type Shape } from "./figure";
import { COLOURS, levelRamp } from "./tokens";

export interface SmallWallBand {
  nominal_Hz: number;
  status: LimitStatus;
  spl_dB: number | null;
  /** Loudest level that was reached: top of the water. */
  reached_dB: number | null;
}

const MIN_DB = 60;
const MAX_DB = 106;
const RULES_DB = [80, 100] as const;
const GAP = 0.8;
const CAP = 2;

/** @returns a strip of the given size; water is never taller than the scale, caps stay inside. */
export function toSmallWall(
  bands: readonly SmallWallBand[],
  { width = 201, height = 38 }: { width?: number; height?: number } = {},
): Figure {
  const ground = height - 0.5;
  const toY = (db: number): number =>
    ground * (1 - (Math.min(MAX_DB, Math.max(MIN_DB, db)) - MIN_DB) / (MAX_DB - MIN_DB));
  const pitch = bands.length === 0 ? width : (width + GAP) / bands.length;
  const shapes = bands.flatMap((band, at) => toColumn(band, at * pitch, pitch - GAP, toY, ground));
  for (const rule of RULES_DB) {
    const y = round2(toY(rule));
    shapes.push({
      kind: "path",
      role: "rule",
      d: `M0 ${y}H${width}`,
      stroke: COLOURS.sheet,
      opacity: 0.75,
    });
  }
  shapes.push({
    kind: "line",
    role: "ground",
    x1: 0,
    y1: ground,
    x2: width,
    y2: ground,
    stroke: COLOURS.ink,
    crisp: true,
  });
  return { width, height, patterns: [], shapes };
}

function toColumn(
  band: SmallWallBand,
  x: number,
  width: number,
  toY: (db: number) => number,
  ground: number,
): Shape[] {
  const shapes: Shape[] = [];
  const box = { x: round2(x), width: round2(width) };
  const top = band.reached_dB ?? band.spl_dB;
  if (top !== null && band.status !== "below lowest") {
    const y = round2(toY(top));
    const fill = levelRamp(4)[2]?.line ?? COLOURS.ink2;
    shapes.push({
      kind: "rect",
      role: "water",
      ...box,
      y,
      height: round2(ground - y),
      fill,
      opacity: 0.55,
    });
  }
  if (band.status === "found" && band.spl_dB !== null) {
    shapes.push({
      kind: "rect",
      role: "cap",
      x: round2(x - 0.4),
      y: round2(Math.max(0, toY(band.spl_dB) - CAP)),
      width: round2(width + GAP),
      height: CAP,
      fill: COLOURS.ink,
    });
  }
  if (band.status === "below lowest" && band.spl_dB !== null) {
    // Past it from the start: the level of the lowest run, open, with no water under it.
    const y = round2(toY(band.spl_dB));
    shapes.push({
      kind: "path",
      role: "below",
      d: `M${box.x} ${y + 4}V${y}H${round2(x + width)}V${y + 4}`,
      stroke: COLOURS.ink,
      strokeWidth: 1.2,
    });
  }
  if (band.status === "not assessed") {
    const y = top === null ? ground - 3 : toY(top) - 1.5;
    shapes.push({
      kind: "path",
      role: "not-assessed",
      d: `M${box.x} ${round2(y)}H${round2(x + width)}`,
      stroke: COLOURS.ink2,
      strokeWidth: 1.5,
      dash: [1.5, 1.5],
    });
  }
  return shapes;
}
