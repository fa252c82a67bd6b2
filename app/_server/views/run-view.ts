import { countCaptured, type Capture } from "../../../db/acts/capture";
import type { RunRow } from "../../../db/queries/runs";
import type { UploadRow } from "../../../db/queries/uploads";
import type { RunView, SlotView, UploadView } from "../../../lib/api/runs";
import { toStopRule, type LadderSlot } from "../../../lib/runs/ladder";
import { toPerson } from "./person-view";

export function toRunView(row: RunRow): RunView {
  return {
    id: row.id,
    slot: row.slot,
    take: row.take,
    role: row.role,
    level_dB: row.level_db,
    file_name: row.file_name,
    digest: row.digest,
    bytes: row.bytes,
    removed_at: row.removed_at?.toISOString() ?? null,
    channel: row.channel,
    state: row.state,
    report: row.report,
    reason: row.reason,
    reason_by: toPerson(row.reason_by, row.reasonByName),
    uploaded_by: toPerson(row.uploaded_by, row.uploadedByName),
    uploaded_at: row.uploaded_at.toISOString(),
  };
}

export function toUploadView(row: UploadRow): UploadView {
  return {
    id: row.id,
    slot: row.slot,
    file_name: row.file_name,
    bytes: row.bytes,
    received: row.received,
    expires_at: row.expires_at.toISOString(),
  };
}

export function toSlotView(slot: LadderSlot): SlotView {
  return {
    slot: slot.slot,
    open: slot.open,
    lock_reason: slot.lockReason,
    excused: slot.excused,
  };
}

export function toRunsView(capture: Capture, uploads: readonly UploadRow[]) {
  return {
    runs: capture.runs.map(toRunView),
    uploads: uploads.map(toUploadView),
    slots: capture.ladder.map(toSlotView),
    captured: countCaptured(capture),
    planned: capture.planned.length,
    stop_rule: toStopRule(capture.planned, capture.runs),
  };
}
