/** The key beside the wall: one band with everything on it, each thing named by a leader; then the causes. */
import type { Figure, Shape } from "./figure";
import { round2 } from "./figure";
import { formatLevel } from "./format";
import { spreadLabels } from "./labels";
import { causeShapes, CAUSE_WORDS, type CauseName } from "./marks";
import { toPatterns } from "./patterns";
import type { DbScale } from "./scales";
import type { SeriesLevel } from "./series-levels";
import { COLOURS } from "./tokens";
import { columnShapes } from "./wall-column";

export const WALL_KEY_WIDTH = 132;
const X = 16;
const WIDTH = 24;
const LABEL_X = X + WIDTH + 13;
const LABEL_GAP = 14;
const CAUSE_KEY_ROW = 18.6;

interface Named {
  readonly text: string;
  readonly y: number;
  readonly bold?: boolean;
  /** A run: a ring on its tideline. */
  readonly ring?: boolean;
}

/** @param top y of the plot's top; the key shares the plot's scale and height. */
export function toWallKey(levels: readonly SeriesLevel[], scale: DbScale, top: number): Figure {
  const patterns = toPatterns(levels.map((level) => level.paint));
  const height = top + scale.height + 16 + 9 * CAUSE_KEY_ROW;
  const toY = (db: number): number => round2(top + scale.toY(db));
  const loudest = levels.at(-1);
  const below = levels.at(-2);
  if (loudest === undefined || below === undefined)
    return { width: WALL_KEY_WIDTH, height, patterns, shapes: [] };

  // An example on this very ladder: the loudest step gives under half of what it should.
  const stepDb = loudest.levelDb - below.levelDb;
  const limitDb = below.levelDb + 0.14 * stepDb;
  const reachedDb = below.levelDb + 0.46 * stepDb;
  const onsetDb = below.levelDb - Math.min(3, 0.4 * stepDb);
  const shapes = columnShapes(
    {
      nominalHz: 0,
      exactHz: 0,
      measuredDb: levels.map((level) => (level === loudest ? reachedDb : level.levelDb)),
      topDb: reachedDb,
      expectedDb: loudest.levelDb,
      lostDb: loudest.levelDb - reachedDb,
      limit: {
        criterion: { compression_dB: 1 },
        kind: "short-term",
        status: "found",
        nominal_dB: limitDb,
        low_dB: null,
        high_dB: null,
        spl_dB: limitDb,
        bound_by: "compression",
        reached: true,
      },
      limitDb,
      onsetDb,
      onset: {
        status: "found",
        nominal_dB: onsetDb,
        low_dB: null,
        high_dB: null,
        spl_dB: onsetDb,
        ceiling_dB: null,
      },
      cause: "open",
      longTermCause: null,
      causeChanged: false,
      decision: "open",
    },
    levels,
    { x: X, width: WIDTH, top, scale },
  );
  const named: Named[] = [
    { text: "compression", y: (toY(loudest.levelDb) + toY(reachedDb)) / 2 },
    { text: "past it", y: (toY(reachedDb) + toY(limitDb)) / 2 },
    { text: "limit", y: toY(limitDb), bold: true },
    { text: "onset", y: toY(onsetDb) },
    ...levels.map((level) => ({
      text: `${formatLevel(level.levelDb)} run`,
      y: toY(level === loudest ? reachedDb : level.levelDb),
      ring: true,
    })),
  ];
  const at = spreadLabels(
    named.map((name) => name.y),
    LABEL_GAP,
    top,
    top + scale.height - 4,
  );
  return {
    width: WALL_KEY_WIDTH,
    height,
    patterns,
    shapes: [
      { kind: "text", x: X, y: 22, text: "one band", size: 11, weight: 600, fill: COLOURS.ink2 },
      ...shapes,
      ...named.flatMap((name, index) => leaderShapes(name, round2(at[index] ?? name.y))),
      ...causeKeyShapes(top + scale.height + 16),
    ],
  };
}

function leaderShapes(name: Named, y: number): Shape[] {
  const from = X + WIDTH;
  const start = name.ring === true ? from + 2.5 : from + 2;
  return [
    {
      kind: "path",
      role: "leader",
      d: `M${start} ${round2(name.y)}L${LABEL_X - 6} ${y}H${LABEL_X - 3}`,
      stroke: COLOURS.ink,
    },
    ...(name.ring === true
      ? [
          {
            kind: "circle",
            role: "ring",
            cx: from,
            cy: round2(name.y),
            r: 2.5,
            fill: COLOURS.sheet,
            stroke: COLOURS.ink,
            strokeWidth: 1.2,
          } as const,
        ]
      : []),
    {
      kind: "text",
      role: "key-label",
      x: LABEL_X,
      y: y + 4,
      text: name.text,
      size: 11,
      fill: COLOURS.ink2,
      ...(name.bold === true ? { weight: 600 as const } : {}),
    },
  ];
}

const KEYED: readonly CauseName[] = [
  "limiter",
  "compressor",
  "equaliser",
  "overload",
  "port",
  "thermal",
  "none",
  "unresolved",
];

/** The causes by mark and word; runs down beside the map. */
function causeKeyShapes(from: number): Shape[] {
  return [
    ...KEYED.flatMap((cause, at): Shape[] => {
      const y = round2(from + at * CAUSE_KEY_ROW);
      return [
        {
          kind: "group",
          role: "key-cause",
          x: X + 8,
          y,
          scale: 0.86,
          shapes: causeShapes(cause, COLOURS.ink),
        },
        {
          kind: "text",
          x: X + 22,
          y: y + 4,
          text: CAUSE_WORDS[cause],
          size: 11,
          fill: COLOURS.ink2,
        },
      ];
    }),
    {
      kind: "path",
      d: `M${X + 1} ${round2(from + 8 * CAUSE_KEY_ROW - 3)}v7h14v-7`,
      stroke: COLOURS.ink,
      strokeWidth: 1.8,
    },
    {
      kind: "text",
      x: X + 22,
      y: round2(from + 8 * CAUSE_KEY_ROW + 4),
      text: "not reached",
      size: 11,
      fill: COLOURS.ink2,
    },
  ];
}
