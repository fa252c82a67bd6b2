import type { Generated } from "kysely";
import type { Id, MaybeMoment, MaybeNumber, MaybeText, Moment } from "./columns";

export interface LoudspeakersTable {
  id: Id;
  lab_id: string;
  maker: string;
  model: string;
  serial: Generated<string>;
  kind: Generated<string>;
  largest_dimension_m: MaybeNumber;
  tuning_hz: MaybeNumber;
  photo_digest: MaybeText;
  created_by: string;
  created_at: Moment;
  changed_at: Moment;
  archived_at: MaybeMoment;
}
