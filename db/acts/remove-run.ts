/** Takes away a file that never had a place in the plan. */
import { AppError } from "../../lib/errors/app-error";
import type { Trx } from "../client";
import type { LabScope } from "../in-lab";
import { recordEvent } from "../queries/audit";
import { notifyChange } from "../queries/changes";
import { forgetRecording } from "../queries/recordings";
import { deleteRun, getRun } from "../queries/runs";
import { lockSeries } from "../queries/series";
import { deriveState } from "./settle-series";
import { loadCapture } from "./capture";

/** @throws AppError "not-found", "conflict.state": what was in the plan is excluded, never removed. */
export async function removeUnassignedRun(trx: Trx, by: LabScope, runId: string): Promise<void> {
  const { series_id: seriesId } = await getRun(trx, by.labId, runId);
  await lockSeries(trx, by.labId, seriesId);
  const run = await getRun(trx, by.labId, runId);
  if (run.slot !== null) {
    throw new AppError(
      "conflict.state",
      "This recording has its place in the plan. Exclude it with a reason; it stays in the history.",
    );
  }
  await deleteRun(trx, by.labId, runId);
  await forgetRecording(trx, by.labId, run.digest);
  await recordEvent(trx, by, {
    act: "run.removed",
    subjectType: "run",
    subjectId: runId,
    seriesId,
    details: { file: run.file_name, digest: run.digest },
  });
  await deriveState(trx, by, await loadCapture(trx, by.labId, seriesId));
  await notifyChange(trx, { labId: by.labId, seriesId });
}
