import type { ListLimits } from "@/lib/api/series";
import { formatFrequency } from "@/lib/charts/format";
import { toSmallWall } from "@/lib/charts/small-wall";
import { FigureSvg } from "../parts/figure-svg";

interface SmallWallProps {
  limits: ListLimits | null;
  /** The series has limits, perhaps of other criteria. */
  judged: boolean;
}

/** The limits of a row as a strip, 60 to 106 dB, with rules at 80 and 100 dB. */
export function SmallWall({ limits, judged }: SmallWallProps) {
  if (limits === null || limits.wall.length === 0) {
    return (
      <span className="text-small text-ink-2">
        {judged ? "not judged by this criterion" : "no limits yet"}
      </span>
    );
  }
  const first = limits.wall[0]?.nominal_Hz ?? 0;
  const last = limits.wall.at(-1)?.nominal_Hz ?? 0;
  const reached = limits.wall.filter((band) => band.status === "found").length;
  return (
    <FigureSvg
      figure={toSmallWall(limits.wall)}
      label={`Output limit by band, ${formatFrequency(first)} to ${formatFrequency(last)}: reached in ${reached} of ${limits.wall.length} bands`}
    />
  );
}
