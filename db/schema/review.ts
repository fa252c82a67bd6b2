import type { Generated } from "kysely";
import type { Criterion } from "../../lib/series/series-schema";
import type { SignedDecision } from "../../lib/review/review-schema";
import type { Id, Json, MaybeMoment, MaybeNumber, MaybeText, Moment } from "./columns";

export interface BandDecisionsTable {
  id: Id;
  lab_id: string;
  analysis_id: string;
  nominal_hz: number;
  /** Counted per band of an analysis; the highest is in force. */
  version: number;
  /** null: the band was opened again. */
  cause: MaybeText;
  computed_cause: string;
  reason: MaybeText;
  decided_by: string;
  decided_at: Moment;
}

export interface BandCommentsTable {
  id: Id;
  lab_id: string;
  analysis_id: string;
  nominal_hz: MaybeNumber;
  words: string;
  written_by: string;
  written_at: Moment;
}

export interface RunRequestsTable {
  id: Id;
  lab_id: string;
  series_id: string;
  level_db: number;
  kind: "short-term" | "long-term";
  variant: MaybeText;
  reason: string;
  slot: string;
  requested_by: string;
  requested_at: Moment;
  withdrawn_by: MaybeText;
  withdrawn_at: MaybeMoment;
}

export interface SignOffsTable {
  id: Id;
  lab_id: string;
  series_id: string;
  analysis_id: string;
  criterion: Json<Criterion>;
  decisions: Json<SignedDecision[]>;
  decisions_digest: string;
  result_digest: string;
  one_person: Generated<boolean>;
  signed_by: string;
  signed_at: Moment;
  reopened_by: MaybeText;
  reopened_at: MaybeMoment;
  reopen_reason: MaybeText;
}
