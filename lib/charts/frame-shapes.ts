/** Staff, neatline and grid: the frame that is known before any water is. */
import type { Shape } from "./figure";
import { round2 } from "./figure";
import { formatFrequencyShort, formatPlain } from "./format";
import { isLabelledBand, type BandScale, type DbScale } from "./scales";
import { COLOURS } from "./tokens";

const STAFF_BLOCK_DB = 2;

/**
 * The left edge: 2 dB blocks in two staggered files, numerals each 10 dB outside it.
 * @param right x of the staff's right edge; @param top y of the plot's top.
 */
export function staffShapes(scale: DbScale, right: number, top: number, width = 12): Shape[] {
  const half = width / 2;
  const left = right - width;
  const shapes: Shape[] = [
    { kind: "rect", x: left, y: top, width, height: scale.height, fill: COLOURS.sheet },
  ];
  for (let at = 0, low = scale.minDb; low < scale.maxDb; at += 1, low += STAFF_BLOCK_DB) {
    const high = Math.min(low + STAFF_BLOCK_DB, scale.maxDb);
    shapes.push({
      kind: "rect",
      role: "staff-block",
      x: at % 2 === 0 ? left : left + half,
      y: round2(top + scale.toY(high)),
      width: half,
      height: round2(scale.toY(low) - scale.toY(high)),
      fill: COLOURS.ink,
      crisp: true,
    });
  }
  shapes.push({ kind: "rect", x: left, y: top, width, height: scale.height, stroke: COLOURS.ink });
  for (const tick of scale.ticksDb) {
    const y = round2(top + scale.toY(tick));
    shapes.push(
      { kind: "line", x1: left - 5, y1: y, x2: left, y2: y, stroke: COLOURS.ink, crisp: true },
      {
        kind: "text",
        role: "staff-numeral",
        x: left - 9,
        y: y + 4,
        text: formatPlain(tick),
        size: 12,
        fill: COLOURS.ink,
        anchor: "end",
      },
    );
  }
  return shapes;
}

/** The bottom edge: one block per band in two staggered rows. */
export function neatlineShapes(bands: BandScale, top: number, height = 6): Shape[] {
  const half = height / 2;
  return [
    { kind: "rect", x: 0, y: top, width: bands.width, height, fill: COLOURS.sheet },
    ...Array.from({ length: bands.count }, (_, at): Shape => ({
      kind: "rect",
      role: "neatline-block",
      x: bands.left(at),
      y: at % 2 === 0 ? top : top + half,
      width: bands.pitch,
      height: half,
      fill: COLOURS.ink,
      crisp: true,
    })),
    { kind: "rect", x: 0, y: top, width: bands.width, height, stroke: COLOURS.ink },
  ];
}

/** Hairlines at the tens and at the plot's top. */
export function gridShapes(bands: BandScale, scale: DbScale, top: number): Shape[] {
  return [scale.maxDb, ...scale.ticksDb].map((tick) => {
    const y = round2(top + scale.toY(tick));
    return {
      kind: "line",
      role: "grid",
      x1: 0,
      y1: y,
      x2: bands.width,
      y2: y,
      stroke: COLOURS.rule,
      crisp: true,
    };
  });
}

/** Names of the octave bands under their columns. */
export function bandLabelShapes(
  bands: BandScale,
  nominalHz: readonly number[],
  y: number,
  sparse = false,
): Shape[] {
  return nominalHz.flatMap((hz, at): Shape[] =>
    isLabelledBand(hz, sparse)
      ? [
          {
            kind: "text",
            role: "band-label",
            x: bands.centre(at),
            y,
            text: formatFrequencyShort(hz),
            size: 12,
            fill: COLOURS.ink,
            anchor: "middle",
          },
        ]
      : [],
  );
}
