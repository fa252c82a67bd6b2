/** Four small pictures of how a loudspeaker is measured, drawn with the wall's own columns. */
import type { BandColumn } from "./band-columns";
import type { Figure, Shape } from "./figure";
import { round2 } from "./figure";
import { staffShapes } from "./frame-shapes";
import { toPatterns } from "./patterns";
import { toDbScale } from "./scales";
import { toSeriesLevels } from "./series-levels";
import { COLOURS } from "./tokens";
import { columnShapes } from "./wall-column";

const LEVELS = toSeriesLevels([76, 86, 96, 102]);
const WIDTH = 250;
const HEIGHT = 96;
const TOP = 4;
const PLOT = 86;
const SCALE = toDbScale(66, 108, PLOT);
const STAFF_RIGHT = 19;
const STAFF_WIDTH = 9;
const FIRST_X = 24;
const COLUMN = 50;
const PITCH = 56;

interface PictureBand {
  /** Output of each level that was played, dB; none: all in the noise. */
  readonly measuredDb: readonly (number | null)[];
  /** Where the loudest run should have come to. */
  readonly expectedDb?: number;
  /** Output at the limit; left out where it was not reached. */
  readonly limitDb?: number;
}

function toColumn({ measuredDb, expectedDb, limitDb }: PictureBand): BandColumn {
  const heard = measuredDb.filter((db): db is number => db !== null);
  const topDb = heard.length === 0 ? null : Math.max(...heard);
  return {
    nominalHz: 0,
    exactHz: 0,
    measuredDb,
    topDb,
    expectedDb: expectedDb ?? null,
    lostDb: expectedDb === undefined || topDb === null ? null : expectedDb - topDb,
    limit: {
      criterion: { compression_dB: 3 },
      kind: "short-term",
      status: limitDb === undefined ? "not reached" : "found",
      nominal_dB: limitDb ?? topDb,
      low_dB: null,
      high_dB: null,
      spl_dB: limitDb ?? topDb,
      bound_by: null,
      reached: limitDb !== undefined,
    },
    limitDb: limitDb ?? topDb,
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
  };
}

function toPicture(bands: readonly PictureBand[], levels: number, more: readonly Shape[] = []) {
  const played = LEVELS.slice(0, levels);
  const columns = bands.flatMap((band, at) =>
    columnShapes(toColumn(band), played, {
      x: FIRST_X + at * PITCH,
      width: COLUMN,
      top: TOP,
      scale: SCALE,
    }),
  );
  const staff = staffShapes(SCALE, STAFF_RIGHT, TOP, STAFF_WIDTH).filter(
    (shape) => shape.kind !== "text",
  );
  return {
    width: WIDTH,
    height: HEIGHT,
    patterns: toPatterns(LEVELS.map(({ paint }) => paint)),
    shapes: [...staff, ...columns, ...more],
  } satisfies Figure;
}

/** A sine whose frequency doubles every fifth of its way. */
function chirp(): Shape {
  const points = Array.from({ length: 241 }, (_, i) => {
    const along = i / 240;
    const turns = (2 ** (3 * along) - 1) / (3 * Math.LN2);
    const y = TOP + PLOT / 2 - 33 * Math.sin(2 * Math.PI * 1.6 * turns);
    return `${round2(86 + 150 * along)} ${round2(y)}`;
  });
  return { kind: "path", d: `M${points.join("L")}`, stroke: COLOURS.ink, strokeWidth: 1.6 };
}

const FULL = LEVELS.map(({ levelDb }) => levelDb);

/** One tone at a time; louder by exact steps; what falls short; what is not known. */
export const MEASURING_PICTURES: {
  readonly tone: Figure;
  readonly steps: Figure;
  readonly short: Figure;
  readonly unknown: Figure;
} = {
  tone: toPicture([{ measuredDb: [76] }], 1, [chirp()]),
  steps: toPicture([{ measuredDb: FULL }, { measuredDb: FULL }, { measuredDb: FULL }], 4),
  short: toPicture(
    [
      { measuredDb: [76, 86, 91.5, 93], expectedDb: 102, limitDb: 92 },
      { measuredDb: FULL },
      { measuredDb: [76, 86, 96, 100.4], expectedDb: 102 },
    ],
    4,
  ),
  unknown: toPicture([{ measuredDb: FULL }, { measuredDb: [null, null, null, null] }], 4),
};
