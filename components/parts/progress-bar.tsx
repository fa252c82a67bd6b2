import { COLOURS, levelRamp, toCss, type LevelPaint } from "@/lib/charts/tokens";

interface ProgressBarProps {
  /** What goes on: "76.wav". */
  label: string;
  /** 0 to 1. */
  done: number;
  /** Water of this level; edge grey for recordings without one. */
  paint?: LevelPaint | null;
  /** Said instead of the percentage: "1.2 of 1.9 MB". */
  say?: string;
  className?: string;
}

const STILL: LevelPaint = { fill: COLOURS.edge, line: COLOURS.edge };

/** A gauge that fills; nothing moves but its line. */
export function ProgressBar({
  label,
  done,
  paint = levelRamp(4)[2] ?? null,
  say,
  className,
}: ProgressBarProps) {
  const share = Math.min(1, Math.max(0, done));
  const water = paint ?? STILL;
  return (
    <span
      // The browser's own bar cannot take a level's colours.
      // oxlint-disable-next-line jsx-a11y/prefer-tag-over-role
      role="progressbar"
      aria-label={label}
      aria-valuemin={0}
      aria-valuemax={100}
      aria-valuenow={Math.round(share * 100)}
      aria-valuetext={say}
      className={className ?? "block w-[104px]"}
    >
      <svg
        className="block h-3 w-full border border-edge bg-sheet"
        viewBox="0 0 100 10"
        preserveAspectRatio="none"
        aria-hidden="true"
      >
        <rect width={share * 100} height="10" fill={toCss(water.fill)} />
        {share > 0 && (
          <path
            d={`M${share * 100} 0v10`}
            stroke={toCss(water.line)}
            strokeWidth="4"
            vectorEffect="non-scaling-stroke"
          />
        )}
      </svg>
    </span>
  );
}
