import type { ColumnType, Generated } from "kysely";
import type { Failure, ListLimits } from "../../lib/api/series";
import type { Plan } from "../../lib/series/plan-schema";
import type { SeriesState } from "../../lib/series/vocabulary";
import type { Id, Json, MaybeJson, MaybeMoment, MaybeNumber, MaybeText, Moment } from "./columns";

/** What the list shows of the newest analysis, so that it need not open one. */
export interface ListSummary {
  analysis_id: string;
  version: number;
  /** One entry per criterion, in the order of the settings. */
  limits: ListLimits[];
}

export interface SeriesTable {
  id: Id;
  lab_id: string;
  /** Counted per lab; shown as S-0231. */
  number: number;
  loudspeaker_id: string;
  /** Written by a trigger from the loudspeaker. */
  loudspeaker_name: ColumnType<string, string | undefined, never>;
  state: Generated<SeriesState>;
  /** Made from state, for sorting: 0 planned to 5 signed off. */
  state_order: ColumnType<number, never, never>;
  plan: Json<Plan>;
  /** Goes up by one with every change of the plan; a writer names the one it read. */
  plan_version: Generated<number>;
  list_summary: MaybeJson<ListSummary>;
  /** Highest level reached under the first criterion, dB; for sorting. */
  reached_db: MaybeNumber;
  failure: MaybeJson<Failure>;
  created_by: string;
  created_at: Moment;
  changed_by: MaybeText;
  changed_at: Moment;
  archived_at: MaybeMoment;
}

export interface SeriesCountersTable {
  lab_id: string;
  last_number: number;
}
