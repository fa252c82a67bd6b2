/** The levels of a plan while it is being written. */
import type { Plan } from "@/lib/series/plan-schema";

export type PlannedLevel = Plan["levels"][number];

export const USUAL_LEVELS_DB = [76, 86, 96, 102] as const;
const LOUDEST_DB = 130;
const WIDE_GAP_DB = 7;
const STEP_DB = 3;

export const usualLevels = (): PlannedLevel[] =>
  USUAL_LEVELS_DB.map((level_dB) => ({ level_dB, long_term: false, repeats: 0 }));

/** Where one more run tells most: in the middle of the widest gap, else a step above the top. */
export function suggestLevel(levels: readonly PlannedLevel[]): PlannedLevel | null {
  const given = levels
    .map((l) => l.level_dB)
    .filter((db) => Number.isFinite(db))
    .sort((a, b) => a - b);
  const top = given.at(-1);
  if (top === undefined) return toLevel(USUAL_LEVELS_DB[0]);
  const gaps = given.slice(1).map((db, index) => ({ from: given[index] ?? db, to: db }));
  let widest = { from: top, to: top };
  for (const gap of gaps) if (gap.to - gap.from > widest.to - widest.from) widest = gap;
  if (widest.to - widest.from >= WIDE_GAP_DB) {
    return toLevel(Math.round((widest.from + widest.to) / 2));
  }
  const next = top + STEP_DB;
  return next > LOUDEST_DB ? null : toLevel(next);
}

const toLevel = (level_dB: number): PlannedLevel => ({ level_dB, long_term: false, repeats: 0 });

/** The loudest level without a long-term run gets one; null where all have theirs. */
export function withLongTermRun(levels: readonly PlannedLevel[]): PlannedLevel[] | null {
  const free = levels.filter((l) => !l.long_term && Number.isFinite(l.level_dB));
  if (free.length === 0) return null;
  const loudest = Math.max(...free.map((l) => l.level_dB));
  return levels.map((l) => (l.level_dB === loudest ? { ...l, long_term: true } : l));
}
