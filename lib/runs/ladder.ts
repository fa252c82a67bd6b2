/**
 * Which places of the plan are open. The next level is offered when the level below has passed its
 * checks; after the stop rule nothing louder is offered.
 */
import { toLevelText, type PlannedRun } from "../series/planned-runs";
import type { ArrivalReport, RunState } from "./arrival-schema";
import { USABLE_RUN_STATES } from "./arrival-schema";

/** What the ladder needs to know of a recording. */
export interface LadderRun {
  slot: string | null;
  state: RunState;
  report: Pick<ArrivalReport, "checks"> | null;
}

export interface LadderSlot {
  slot: string;
  open: boolean;
  /** Why it is not open, in the tester's words. */
  lockReason: string | null;
  /** Why it needs no recording. */
  excused: string | null;
  /** A usable recording is in, or it is excused. */
  settled: boolean;
  /** Locked by the order of the ladder; a file for it waits. The stop rule holds no file back. */
  waits: boolean;
}

/** The state of a run whose recording counts for its place. */
export const isLive = (state: RunState): boolean => state !== "excluded" && state !== "replaced";

/**
 * @param planned in capture order.
 * @param excuses reason by slot.
 */
export function toLadder(
  planned: readonly PlannedRun[],
  runs: readonly LadderRun[],
  excuses: ReadonlyMap<string, string>,
): LadderSlot[] {
  const settled = (run: PlannedRun): boolean =>
    excuses.has(run.slot) ||
    runs.some((r) => r.slot === run.slot && USABLE_RUN_STATES.includes(r.state));
  const stop = findStop(planned, runs);
  return planned.map((run) => {
    const before = whatComesFirst(run, planned).find((other) => !settled(other));
    const stopped =
      stop !== null && run.levelDb !== null && run.levelDb > stop.levelDb && !settled(run);
    const excused = excuses.get(run.slot) ?? null;
    return {
      slot: run.slot,
      open: before === undefined && !stopped,
      lockReason:
        before === undefined
          ? stopped
            ? `do not go louder: ${stop.finding}`
            : null
          : toLockReason(run, before),
      excused,
      settled: settled(run),
      waits: before !== undefined,
    };
  });
}

/** The sentence of the stop rule, null while no run broke it. */
export function toStopRule(
  planned: readonly PlannedRun[],
  runs: readonly LadderRun[],
): string | null {
  const stop = findStop(planned, runs);
  return stop === null
    ? null
    : `Do not go louder than ${toLevelText(stop.levelDb)} dB: ${stop.finding}`;
}

/**
 * The runs that must have passed before this one: short-term runs of the next lower level, and for
 * a run with conditioning or another setting also the plain short one of its own level.
 */
function whatComesFirst(run: PlannedRun, planned: readonly PlannedRun[]): PlannedRun[] {
  const { levelDb } = run;
  if (levelDb === null) return [];
  // A run that was asked for later holds up none of the plan's own.
  const short = planned.filter(
    (other) =>
      other.role === "short-term" &&
      other.repeat === 1 &&
      (other.asked === undefined || other.levelDb === levelDb),
  );
  if (run.role === "closing" || run.role === "long-term" || run.role === "variant") {
    return short.filter((other) => other.levelDb === levelDb);
  }
  if (run.repeat > 1) return short.filter((other) => other.levelDb === levelDb);
  const lower = short.flatMap((other) =>
    other.levelDb !== null && other.levelDb < levelDb ? [other.levelDb] : [],
  );
  if (lower.length === 0) return [];
  const below = Math.max(...lower);
  return short.filter((other) => other.levelDb === below);
}

function toLockReason(run: PlannedRun, before: PlannedRun): string {
  return run.levelDb === before.levelDb
    ? `opens after ${before.label}`
    : `locked until ${toLevelText(before.levelDb ?? 0)} dB has passed`;
}

function findStop(
  planned: readonly PlannedRun[],
  runs: readonly LadderRun[],
): { levelDb: number; finding: string } | null {
  const stops = runs.flatMap((run) => {
    const levelDb = planned.find((p) => p.slot === run.slot)?.levelDb ?? null;
    const check = run.report?.checks.find((c) => c.code === "stop-rule" && c.verdict !== "pass");
    return levelDb === null || check === undefined || !isLive(run.state)
      ? []
      : [{ levelDb, finding: check.finding }];
  });
  return stops.sort((a, b) => a.levelDb - b.levelDb)[0] ?? null;
}
