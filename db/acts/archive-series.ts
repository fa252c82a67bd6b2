/** Out of the list and back: an empty series is deleted, one with recordings is archived. */
import { AppError } from "../../lib/errors/app-error";
import type { Trx } from "../client";
import type { LabScope } from "../in-lab";
import { recordEvent } from "../queries/audit";
import { notifyChange } from "../queries/changes";
import { listAnalyses } from "../queries/analyses";
import { hasRemovedRecordings } from "../queries/retention";
import { listRunRequests } from "../queries/run-requests";
import { listRuns } from "../queries/runs";
import { deleteSeries, getSeries, lockSeries, updateSeries } from "../queries/series";
import { deleteUploadsOf, listUploads } from "../queries/uploads";

/** @throws AppError "not-found", "conflict.state" while something is under way */
export async function removeSeries(
  trx: Trx,
  by: LabScope,
  seriesId: string,
): Promise<"deleted" | "archived"> {
  await lockSeries(trx, by.labId, seriesId);
  const series = await getSeries(trx, by.labId, seriesId);
  if (series.archived_at !== null) {
    throw new AppError("conflict.state", "This series is archived already.");
  }
  if ((await listUploads(trx, by.labId, seriesId)).length > 0) {
    throw new AppError("conflict.state", "A file is still being uploaded. Stop it first.");
  }
  if (series.state === "analysing") {
    throw new AppError("conflict.state", "An analysis is under way. Wait for its end.");
  }
  const runs = await listRuns(trx, by.labId, seriesId);
  const analyses = await listAnalyses(trx, by.labId, seriesId);
  const asked = await listRunRequests(trx, by.labId, seriesId);
  const empty = [runs, analyses, asked].every((list) => list.length === 0);
  const outcome = empty ? "deleted" : "archived";
  await recordEvent(trx, by, {
    act: `series.${outcome}`,
    subjectType: "series",
    subjectId: seriesId,
    seriesId,
    details: { number: series.number, loudspeaker: series.loudspeaker_name },
  });
  if (outcome === "deleted") {
    await deleteUploadsOf(trx, by.labId, seriesId);
    await deleteSeries(trx, by.labId, seriesId);
  } else await updateSeries(trx, by.labId, seriesId, { archivedAt: new Date() });
  await notifyChange(trx, { labId: by.labId, seriesId });
  return outcome;
}

/** @throws AppError "not-found", "conflict.state" */
export async function restoreSeries(trx: Trx, by: LabScope, seriesId: string): Promise<void> {
  const series = await lockSeries(trx, by.labId, seriesId);
  if (series.archived_at === null) {
    throw new AppError("conflict.state", "This series is not archived.");
  }
  if (await hasRemovedRecordings(trx, by.labId, seriesId)) {
    throw new AppError(
      "conflict.state",
      "Recordings of this series were removed for good, so it cannot go on. It can be read in the archive.",
    );
  }
  await updateSeries(trx, by.labId, seriesId, { archivedAt: null });
  await recordEvent(trx, by, {
    act: "series.restored",
    subjectType: "series",
    subjectId: seriesId,
    seriesId,
  });
  await notifyChange(trx, { labId: by.labId, seriesId });
}
