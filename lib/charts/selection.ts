/** The selected band: an overprint box around its column and a tab that names it. */
import { round2, type Shape } from "./figure";
import { formatFrequency } from "./format";
import type { BandScale } from "./scales";
import { COLOURS } from "./tokens";

const TAB_HEIGHT = 19;
const TAB_TOP = 8;
/** Width of a figure at 12 px, semibold. */
const DIGIT = 7.25;

interface SelectionPlace {
  /** Bands from the index upwards; one unless a range is selected. */
  readonly count?: number;
  readonly bands: BandScale;
  /** y of the box's upper end; the tab's point touches it. */
  readonly top: number;
  readonly foot: number;
  /** Open at that end: the box goes on in the figure below or above. */
  readonly open?: "foot" | "top";
}

/** @returns the box; open where it goes on in the next figure. */
export function selectionShapes(
  index: number,
  { bands, top, foot, open, count = 1 }: SelectionPlace,
): Shape[] {
  const left = bands.left(index) - 0.5;
  const right = left + count * bands.pitch + 1;
  const d =
    open === "foot"
      ? `M${left} ${foot}V${top}H${right}V${foot}`
      : open === "top"
        ? `M${left} ${top}V${foot}H${right}V${top}`
        : `M${left} ${top}H${right}V${foot}H${left}z`;
  return [{ kind: "path", role: "selection", d, stroke: COLOURS.overprint, strokeWidth: 2 }];
}

/** @returns the tab over the plot, kept within it; its point stays on the band. */
export function tabShapes(
  index: number,
  nominalHz: number,
  bands: BandScale,
  pointY: number,
): Shape[] {
  const text = formatFrequency(nominalHz);
  const width = round2(text.length * DIGIT + 18);
  const point = bands.centre(index);
  const left = round2(Math.min(Math.max(point - width / 2, -4), bands.width + 4 - width));
  const foot = Math.min(TAB_TOP + TAB_HEIGHT, pointY - 5);
  const right = round2(left + width);
  const [from, to] = [Math.max(left, point - 6), Math.min(right, point + 6)];
  return [
    {
      kind: "path",
      role: "tab",
      d: `M${left} ${foot - TAB_HEIGHT}H${right}V${foot}H${to}L${point} ${pointY}L${from} ${foot}H${left}z`,
      fill: COLOURS.overprint,
    },
    {
      kind: "text",
      role: "tab-text",
      x: round2((left + right) / 2),
      y: foot - 5.5,
      text,
      size: 12,
      weight: 600,
      anchor: "middle",
      fill: COLOURS.onOverprint,
    },
  ];
}
