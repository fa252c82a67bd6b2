/**
 * The colours of every figure and page, once. Roles and ramps come in two themes; the style sheet
 * repeats the roles as variables and a test holds the two together. Water is level, silt is
 * compression, slate is distortion, overprint is what a person put there.
 */
import { mixOklab } from "./oklab";

/** One colour in both themes, each "#RRGGBB". */
export interface Paint {
  readonly light: string;
  readonly dark: string;
}

/** @returns a CSS colour that follows the page's colour scheme. */
export const toCss = (paint: Paint): string => `light-dark(${paint.light}, ${paint.dark})`;

const paint = (light: string, dark: string): Paint => ({ light, dark });

export const COLOURS = {
  page: paint("#ECF1F0", "#0A171C"),
  sheet: paint("#FBFDFC", "#0F2229"),
  wash: paint("#E0E8E7", "#1A343C"),
  ink: paint("#0E272E", "#E6F0EF"),
  ink2: paint("#3E555B", "#B4C6C8"),
  ink3: paint("#566B71", "#93A9AD"),
  rule: paint("#C9D4D3", "#27424A"),
  edge: paint("#73878C", "#718A90"),
  onInk: paint("#FBFDFC", "#0A171C"),
  overprint: paint("#9C1A5E", "#F59AC6"),
  overprintWash: paint("#F7E6EF", "#3D1B2D"),
  onOverprint: paint("#FFFFFF", "#2A0617"),
  fault: paint("#A1261C", "#FF8C73"),
  faultWash: paint("#F9E9E6", "#3C1B17"),
  siltLine: paint("#8F5E34", "#C19563"),
  siltGround: paint("#F4EADA", "#2C2A24"),
  noiseLine: paint("#7C8E93", "#5F7A81"),
} as const satisfies Record<string, Paint>;
export type ColourRole = keyof typeof COLOURS;

/** Hearing notices only: the same in both themes. */
export const SAFETY_COLOURS = {
  caution: "#FFD100",
  warning: "#FF8200",
  text: "#000000",
  ground: "#FFFFFF",
} as const;

/** A level's fill and the darker high-water line on top of it. */
export interface LevelPaint {
  readonly fill: Paint;
  readonly line: Paint;
}

type Row = readonly (readonly [
  fillLight: string,
  lineLight: string,
  fillDark: string,
  lineDark: string,
])[];

/** [count of levels - 1][rank from the quietest]. */
const LEVEL_ROWS: readonly Row[] = [
  [["#4695AE", "#005B7A", "#429BA7", "#73C3CD"]],
  [
    ["#D1EBE6", "#569A94", "#1F414E", "#488098"],
    ["#144A7A", "#09294D", "#B6E8E4", "#D5F7F4"],
  ],
  [
    ["#D1EBE6", "#569A94", "#1F414E", "#488098"],
    ["#5CA7B9", "#006780", "#378999", "#66B8C6"],
    ["#144A7A", "#09294D", "#B6E8E4", "#D5F7F4"],
  ],
  [
    ["#D1EBE6", "#569A94", "#1F414E", "#488098"],
    ["#84C3C8", "#197987", "#2A6E80", "#55A4B9"],
    ["#3B88A6", "#005374", "#52A8B1", "#7ECBD2"],
    ["#144A7A", "#09294D", "#B6E8E4", "#D5F7F4"],
  ],
  [
    ["#D1EBE6", "#569A94", "#1F414E", "#488098"],
    ["#99CFCF", "#2A828A", "#276273", "#4F9AB1"],
    ["#5CA7B9", "#006780", "#378999", "#66B8C6"],
    ["#2F789C", "#00486D", "#67B8BE", "#8BD4D7"],
    ["#144A7A", "#09294D", "#B6E8E4", "#D5F7F4"],
  ],
  [
    ["#D1EBE6", "#569A94", "#1F414E", "#488098"],
    ["#A5D5D3", "#33878B", "#255A6B", "#4C94AC"],
    ["#73BAC3", "#077385", "#2C788A", "#59ACBF"],
    ["#4695AE", "#005B7A", "#429BA7", "#73C3CD"],
    ["#296F96", "#004269", "#73C2C5", "#93D9DB"],
    ["#144A7A", "#09294D", "#B6E8E4", "#D5F7F4"],
  ],
];

/** @returns [count] paints from the quietest level up; over six levels the six-row is mixed in OKLab by rank. */
export function levelRamp(count: number): LevelPaint[] {
  const row = LEVEL_ROWS[Math.min(count, LEVEL_ROWS.length) - 1] ?? [];
  return Array.from({ length: count }, (_, rank) => {
    const at = count > 1 ? (rank * (row.length - 1)) / (count - 1) : 0;
    return {
      fill: paint(rowAt(row, at, 0), rowAt(row, at, 2)),
      line: paint(rowAt(row, at, 1), rowAt(row, at, 3)),
    };
  });
}

function rowAt(row: Row, at: number, part: 0 | 1 | 2 | 3): string {
  const below = Math.floor(at);
  const from = row[below]?.[part] ?? COLOURS.ink.light;
  const to = row[below + 1]?.[part];
  return at === below || to === undefined ? from : mixOklab(from, to, at - below);
}

/** One step of a map: the cell's ground and the text on it. */
export interface StepPaint {
  readonly fill: Paint;
  readonly text: Paint;
}

/** Compression in dB: six steps, parted at these. */
export const SILT_BREAKS_DB = [0.5, 1, 2, 3, 6] as const;
/** Distortion in percent: six steps, parted at these. */
export const SLATE_BREAKS_PERCENT = [0.1, 0.3, 1, 3, 10] as const;

const step = (fl: string, tl: string, fd: string, td: string): StepPaint => ({
  fill: paint(fl, fd),
  text: paint(tl, td),
});

export const SILT: readonly StepPaint[] = [
  step("#F6F4F0", "#3E555B", "#1B2A2E", "#B4C6C8"),
  step("#EFE5D4", "#0E272E", "#3B3328", "#E6F0EF"),
  step("#DFCBAB", "#0E272E", "#5C4930", "#E6F0EF"),
  step("#CAA77D", "#0E272E", "#8A6742", "#FFFFFF"),
  step("#8F5E34", "#FFFFFF", "#C19563", "#0A171C"),
  step("#5C341A", "#FFFFFF", "#EED3A6", "#0A171C"),
];

export const SLATE: readonly StepPaint[] = [
  step("#F3F6F6", "#3E555B", "#14292F", "#B4C6C8"),
  step("#E0E6E7", "#0E272E", "#22393F", "#E6F0EF"),
  step("#C5CED0", "#0E272E", "#34494F", "#E6F0EF"),
  step("#A0ADB0", "#0E272E", "#53686D", "#FFFFFF"),
  step("#566A70", "#FFFFFF", "#9AACAF", "#0A171C"),
  step("#24393F", "#FFFFFF", "#D5DFE0", "#0A171C"),
];

function stepOf(value: number, breaks: readonly number[], steps: readonly StepPaint[]): StepPaint {
  const at = breaks.filter((b) => value >= b).length;
  return steps[at] ?? { fill: COLOURS.sheet, text: COLOURS.ink };
}

/** @param compressionDb as printed: rounded to 0.1 dB first, so that colour and number agree. */
export const siltStep = (compressionDb: number): StepPaint =>
  stepOf(Math.round(compressionDb * 10) / 10, SILT_BREAKS_DB, SILT);

export const slateStep = (percent: number): StepPaint =>
  stepOf(percent, SLATE_BREAKS_PERCENT, SLATE);

export const FONT_PROSE = '"Atkinson Hyperlegible Next Variable", system-ui, sans-serif';
export const FONT_FIGURES = '"Roboto Mono", ui-monospace, monospace';
