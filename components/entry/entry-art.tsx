import { staffShapes } from "@/lib/charts/frame-shapes";
import { toPatterns } from "@/lib/charts/patterns";
import { toDbScale } from "@/lib/charts/scales";
import { toSeriesLevels } from "@/lib/charts/series-levels";
import { columnShapes } from "@/lib/charts/wall-column";
import { FigureSvg } from "../parts/figure-svg";

const LEVELS = toSeriesLevels([76, 86, 96, 102]);
const PITCH = 48;
const HEIGHT = 840;
const STAFF = 60;
const COUNT = 32;
const SCALE = toDbScale(60, 112, HEIGHT);

/** A wall that nobody measured: the bass gives out, the rest does not. */
const COLUMNS = Array.from({ length: COUNT }, (_, at) => {
  const ripple = 0.7 * Math.sin(at * 0.9) + 0.4 * Math.sin(at * 2.3);
  const lack = 9 / (1 + at) ** 1.4;
  const limitDb = at < 4 ? 92 + 3 * at - lack * 0.3 : null;
  return {
    measured: LEVELS.map(({ levelDb }) => levelDb + ripple - lack * (levelDb > 90 ? 0.7 : 0.8)),
    limitDb,
  };
});

/** Decoration only: hidden from readers, cut at the right. */
export function EntryArt() {
  const shapes = COLUMNS.flatMap(({ measured, limitDb }, at) =>
    columnShapes(
      {
        nominalHz: at,
        exactHz: at,
        measuredDb: measured,
        topDb: Math.max(...measured),
        expectedDb: null,
        lostDb: null,
        limit: {
          criterion: { compression_dB: 3 },
          kind: "short-term",
          status: limitDb === null ? "not reached" : "found",
          nominal_dB: limitDb,
          low_dB: null,
          high_dB: null,
          spl_dB: limitDb,
          bound_by: null,
          reached: limitDb !== null,
        },
        limitDb,
        onset: {
          status: "not reached",
          nominal_dB: null,
          low_dB: null,
          high_dB: null,
          spl_dB: null,
          ceiling_dB: null,
        },
        onsetDb: null,
        cause: "open",
        longTermCause: null,
        causeChanged: false,
        decision: "open",
      },
      LEVELS,
      { x: STAFF + at * PITCH + 1.5, width: PITCH - 3, top: 0, scale: SCALE },
    ),
  );
  return (
    <div
      aria-hidden="true"
      className="relative overflow-hidden bg-page max-lg:h-44 max-lg:bg-sheet"
    >
      <div className="absolute bottom-0 left-0 max-lg:origin-bottom-left max-lg:scale-[0.24] lg:pl-0">
        <FigureSvg
          figure={{
            width: STAFF + COUNT * PITCH,
            height: HEIGHT,
            patterns: toPatterns(LEVELS.map((level) => level.paint)),
            shapes: [
              ...shapes,
              ...staffShapes(SCALE, STAFF, 0, 22).filter((shape) => shape.kind === "rect"),
            ],
          }}
        />
      </div>
    </div>
  );
}
