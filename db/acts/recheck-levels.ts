/**
 * What was held against another recording is held against the new one: a calibrator recording gives
 * the runs a new scale, a new take of a run is a new neighbour.
 */
import { findFullScaleDb } from "../../lib/runs/arrival/siblings";
import { isLive } from "../../lib/runs/ladder";
import type { Trx } from "../client";
import { updateRun } from "../queries/runs";
import type { Capture } from "./capture";

/** What the checks themselves decided may be decided anew; what a person decided stands. */
const DECIDED_BY_CHECKS = new Set(["passed", "warned", "failed"]);
/** Reports round to less. */
const SAME_DB = 1e-3;

/** The caller holds the series (lockSeries). @returns the runs that are to be checked. */
export async function recheckLevels(
  trx: Trx,
  labId: string,
  { series, planned, runs }: Capture,
): Promise<string[]> {
  const fullScaleDb = findFullScaleDb(
    series.plan,
    runs
      .filter((run) => isLive(run.state))
      .map((run) => ({ ...run, place: planned.find((p) => p.slot === run.slot) ?? null })),
  );
  if (fullScaleDb === null || series.state === "signed off") return [];
  const stale = runs.filter(({ slot, state, report }) => {
    const used = report?.full_scale_dB;
    if (slot === null || used === undefined || !DECIDED_BY_CHECKS.has(state)) return false;
    return used === null || Math.abs(used - fullScaleDb) > SAME_DB;
  });
  for (const run of stale) await updateRun(trx, labId, run.id, { state: "checking" });
  return stale.map((run) => run.id);
}

/** Checks that hold a recording against its neighbours. */
const BETWEEN_RUNS: ReadonlySet<string> = new Set([
  "level-step",
  "closing-repeat",
  "polarity",
  "dropped-samples",
  "stop-rule",
]);

/**
 * Runs that spoke up beside the takes that were there before `runId` came: a clipped neighbour that
 * was replaced is no longer held against them.
 *
 * @returns the runs that are to be checked. The caller holds the series (lockSeries).
 */
export async function recheckNeighbours(
  trx: Trx,
  labId: string,
  { series, runs }: Pick<Capture, "series" | "runs">,
  runId: string,
): Promise<string[]> {
  if (series.state === "signed off") return [];
  const stale = runs.filter(
    ({ id, slot, state, report }) =>
      id !== runId &&
      slot !== null &&
      DECIDED_BY_CHECKS.has(state) &&
      report?.checks.some(({ code, verdict }) => BETWEEN_RUNS.has(code) && verdict !== "pass"),
  );
  for (const run of stale) await updateRun(trx, labId, run.id, { state: "checking" });
  return stale.map((run) => run.id);
}
