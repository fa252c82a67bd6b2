/** The hatches: compression, in the noise, and water past the limit. */
import type { Pattern } from "./figure";
import { COLOURS, type LevelPaint } from "./tokens";

export const COMPRESSION = "compression";
export const NOISE = "noise";
/** Played, but past the limit: upright lines in the level's line colour. */
export const pastName = (rank: number): string => `past-${rank}`;

const NOISE_PATTERN: Pattern = {
  name: NOISE,
  pitch: 6,
  width: 1.1,
  offset: 0,
  turn: 45,
  line: COLOURS.noiseLine,
  ground: COLOURS.sheet,
};

const COMPRESSION_PATTERN: Pattern = {
  name: COMPRESSION,
  pitch: 4,
  width: 1.6,
  offset: 0,
  turn: -45,
  line: COLOURS.siltLine,
  ground: COLOURS.siltGround,
};

/** @returns the patterns of a figure that draws these levels. */
export const toPatterns = (ramp: readonly LevelPaint[]): Pattern[] => [
  NOISE_PATTERN,
  COMPRESSION_PATTERN,
  ...ramp.map((level, rank) => ({
    name: pastName(rank),
    pitch: 4,
    width: 1.6,
    offset: 1.8,
    turn: 0,
    line: level.line,
    ground: COLOURS.sheet,
  })),
];
