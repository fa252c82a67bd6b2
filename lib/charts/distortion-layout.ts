/** Sizes of the large distortion figure and of the small ones of all runs. */
export interface DistortionLayout {
  readonly pitch: number;
  readonly plotHeight: number;
  readonly left: number;
  readonly right: number;
  readonly top: number;
  readonly minPercent: number;
  readonly ticksPercent: readonly number[];
  /** dB on a second axis at the right, marks and labels at line ends. */
  readonly full: boolean;
  readonly xLabels: boolean;
  /** Which unit stands at the left. */
  readonly unit: "percent" | "dB";
}

export const DISTORTION_LAYOUT: DistortionLayout = {
  pitch: 30,
  plotHeight: 380,
  left: 76,
  right: 52,
  top: 26,
  minPercent: 0.01,
  ticksPercent: [0.01, 0.03, 0.1, 0.3, 1, 3, 10, 30, 100],
  full: true,
  xLabels: true,
  unit: "percent",
};

/** One of the small figures of all runs. */
export const MULTIPLE_LAYOUT = {
  pitch: 12.2,
  plotHeight: 132,
  left: 52,
  right: 8,
  top: 6,
  ticksPercent: [0.1, 1, 10],
  full: false,
  xLabels: false,
} satisfies Partial<DistortionLayout>;

/** @param width px for a small figure. @returns px from band to band, at most as wide as laid out. */
export function toMultiplePitch(width: number, bands: number): number {
  const room = width - MULTIPLE_LAYOUT.left - MULTIPLE_LAYOUT.right;
  const pitch = Math.floor((room / Math.max(bands, 1)) * 10) / 10;
  return Math.min(MULTIPLE_LAYOUT.pitch, Math.max(1, pitch));
}
