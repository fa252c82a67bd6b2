/**
 * A calibrator recording that came after runs, or replaced another one, gives them a new scale: they
 * are checked once more.
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
