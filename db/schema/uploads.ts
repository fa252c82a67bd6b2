import type { Generated } from "kysely";
import type { ColumnChoice } from "../../lib/series/table-columns";
import type { MaybeJson, MaybeMoment, MaybeText, Moment } from "./columns";

/** An upload under way; not yet a run. */
export interface UploadsTable {
  id: string;
  lab_id: string;
  series_id: string;
  slot: MaybeText;
  /** Microphone channel, from 1. */
  channel: Generated<number>;
  /** Of a table: which column holds what, where a person said so. */
  columns: MaybeJson<ColumnChoice>;
  file_name: string;
  bytes: number;
  received: Generated<number>;
  account_id: string;
  token_id: MaybeText;
  created_at: Moment;
  expires_at: Moment;
  /** When it became a run; the row stays a while for a client that lost the answer. */
  finished_at: MaybeMoment;
  run_id: MaybeText;
}
