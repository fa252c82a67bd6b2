import { COLOURS, toCss, type LevelPaint } from "@/lib/charts/tokens";

interface LevelSwatchProps {
  /** `levelRamp(count)[rank]`; left out for a recording without a level (calibrator, room noise). */
  paint: LevelPaint;
  /** Long-term runs: the swatch is cut in two. */
  longTerm?: boolean;
  size?: number;
}

/** A 14 px square of the level's fill under its line. Always beside its number, hence hidden from readers. */
export function LevelSwatch({ paint, longTerm = false, size = 14 }: LevelSwatchProps) {
  return (
    <svg
      className="inline-block flex-none"
      width={size}
      height={size}
      viewBox="0 0 14 14"
      aria-hidden="true"
    >
      <rect y="1" width="14" height="13" fill={toCss(paint.fill)} />
      <rect width="14" height="2.5" fill={toCss(paint.line)} />
      {longTerm && <rect y="6.5" width="14" height="2.5" fill={toCss(COLOURS.page)} />}
    </svg>
  );
}
