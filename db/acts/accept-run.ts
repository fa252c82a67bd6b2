/** A finished upload becomes a run: row, place, trail and wake-up call in one transaction. */
import type { FollowUp } from "../../lib/jobs/follow-up";
import { isLive } from "../../lib/runs/ladder";
import type { ColumnChoice } from "../../lib/series/table-columns";
import { placeRun } from "../../lib/runs/place-run";
import type { Trx } from "../client";
import type { LabScope } from "../in-lab";
import { recordEvent } from "../queries/audit";
import { keepRecording } from "../queries/recordings";
import { createRun, updateRun } from "../queries/runs";
import { lockSeries } from "../queries/series";
import { loadCapture } from "./capture";
import { settleSeries } from "./settle-series";

export interface ArrivedFile {
  seriesId: string;
  /** What the tester chose; null: the name decides. */
  slot: string | null;
  channel: number;
  /** Of a table: which column holds what, where a person said so. */
  columns: ColumnChoice | null;
  fileName: string;
  /** SHA-256 of bytes that lie in the store already. */
  digest: string;
  bytes: number;
  media: string;
}

/**
 * The bytes are in the store before this runs and the staged file is removed after the commit, so
 * a crash anywhere leaves a resumable upload or a run, never a row without its bytes.
 *
 * @returns the run; the one that is there already where the same bytes hold the same place.
 * @throws AppError "not-found"
 */
export async function acceptRun(
  trx: Trx,
  by: LabScope & { accountId: string },
  file: ArrivedFile,
): Promise<{ runId: string; followUp: FollowUp }> {
  await lockSeries(trx, by.labId, file.seriesId);
  const { planned, ladder, runs } = await loadCapture(trx, by.labId, file.seriesId);
  const placement = placeRun(file, planned, ladder);
  const twin = runs.find(
    (run) =>
      isLive(run.state) &&
      run.digest === file.digest &&
      run.channel === file.channel &&
      JSON.stringify(run.columns) === JSON.stringify(file.columns) &&
      run.slot === placement.slot &&
      run.wanted_slot === placement.wantedSlot,
  );
  if (twin !== undefined) {
    return { runId: twin.id, followUp: { labId: by.labId, runIds: [], analysisIds: [] } };
  }
  await keepRecording(trx, by.labId, file);
  const place = planned.find((p) => p.slot === placement.slot) ?? null;
  const runId = await createRun(trx, by.labId, {
    seriesId: file.seriesId,
    slot: place?.slot ?? null,
    role: place?.role ?? null,
    levelDb: place?.levelDb ?? null,
    variant: place?.variant ?? null,
    fileName: file.fileName,
    digest: file.digest,
    channel: file.channel,
    columns: file.columns,
    uploadedBy: by.accountId,
    uploadedByToken: by.tokenId ?? null,
  });
  await updateRun(trx, by.labId, runId, {
    wanted_slot: placement.wantedSlot,
    reason: placement.note,
  });
  await recordEvent(trx, by, {
    act: "run.uploaded",
    subjectType: "run",
    subjectId: runId,
    seriesId: file.seriesId,
    details: {
      file: file.fileName,
      bytes: file.bytes,
      digest: file.digest,
      slot: place?.slot ?? null,
      label: place?.label ?? null,
    },
  });
  const followUp = await settleSeries(trx, by, file.seriesId);
  return { runId, followUp: { ...followUp, runIds: [runId, ...followUp.runIds] } };
}
