import type { ColumnType, Generated } from "kysely";
import type { ArrivalReport, RunState } from "../../lib/runs/arrival-schema";
import type { RecordingRole } from "../../lib/series/planned-runs";
import type { ColumnChoice } from "../../lib/series/table-columns";
import type { Id, MaybeJson, MaybeMoment, MaybeNumber, MaybeText, Moment } from "./columns";

export interface RunsTable {
  id: Id;
  lab_id: string;
  series_id: string;
  /** Place in the plan (PlannedRun.slot); null while unassigned. */
  slot: MaybeText;
  /** The place it is meant for while that is locked. */
  wanted_slot: MaybeText;
  /** Counts the recordings made for the slot, from 1. */
  take: Generated<number>;
  role: ColumnType<RecordingRole | null, RecordingRole | null | undefined, RecordingRole | null>;
  level_db: MaybeNumber;
  variant: MaybeText;
  file_name: string;
  digest: string;
  /** Microphone channel, from 1. */
  channel: Generated<number>;
  /** Of a table: which column holds what, where a person said so. */
  columns: MaybeJson<ColumnChoice>;
  state: Generated<RunState>;
  report: MaybeJson<ArrivalReport>;
  reason: MaybeText;
  reason_by: MaybeText;
  reason_at: MaybeMoment;
  uploaded_by: string;
  uploaded_by_token: MaybeText;
  uploaded_at: Moment;
  changed_at: Moment;
}
