import { toEmptyWall } from "@/lib/charts/empty-wall";
import { FigureSvg } from "../parts/figure-svg";

interface EmptyWallProps {
  /** Planned levels, dB; the frame alone where they are not known yet. */
  levelsDb?: readonly number[];
  startHz?: number;
  stopHz?: number;
}

const NONE: readonly number[] = [];

/** The true frame of the wall, while there is no water: never a spinner. */
export function EmptyWall({ levelsDb = NONE, startHz = 20, stopHz = 20_000 }: EmptyWallProps) {
  const figure = toEmptyWall({
    lowestDb: levelsDb.length === 0 ? null : Math.min(...levelsDb),
    highestDb: levelsDb.length === 0 ? 102 : Math.max(...levelsDb),
    pitch: 22,
    plotHeight: 160,
    startHz,
    stopHz,
  });
  return (
    <div className="overflow-x-auto">
      <FigureSvg figure={figure} />
    </div>
  );
}
