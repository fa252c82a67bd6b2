import { formatPlain, NBSP } from "@/lib/charts/format";
import { levelRamp, toCss } from "@/lib/charts/tokens";

const WIDTH = 9;
const GAP = 1.5;
const LOW = 10;
const HIGH = 24;

/** The planned levels as small steps, quietest at the left. */
export function LevelSteps({ levelsDb }: { levelsDb: readonly number[] }) {
  const levels = [...new Set(levelsDb)].sort((a, b) => a - b);
  const ramp = levelRamp(levels.length);
  if (levels.length === 0) return null;
  const width = levels.length * (WIDTH + GAP) - GAP;
  const says = `${levels.map((level) => formatPlain(level)).join(", ")}${NBSP}dB`;
  return (
    <svg width={width} height={HIGH} viewBox={`0 0 ${width} ${HIGH}`} role="img" aria-label={says}>
      {ramp.map((paint, at) => {
        const height = levels.length === 1 ? HIGH : LOW + (at / (levels.length - 1)) * (HIGH - LOW);
        const x = at * (WIDTH + GAP);
        return (
          <g key={levels[at]}>
            <rect x={x} y={HIGH - height} width={WIDTH} height={height} fill={toCss(paint.fill)} />
            <rect x={x} y={HIGH - height} width={WIDTH} height={2} fill={toCss(paint.line)} />
          </g>
        );
      })}
    </svg>
  );
}
