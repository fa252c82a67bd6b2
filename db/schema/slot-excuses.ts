import type { Moment } from "./columns";

/** A planned run that goes without a recording. */
export interface SlotExcusesTable {
  lab_id: string;
  series_id: string;
  slot: string;
  reason: string;
  excused_by: string;
  excused_at: Moment;
}
