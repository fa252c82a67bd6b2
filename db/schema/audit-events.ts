import type { GeneratedAlways } from "kysely";
import type { JsonWithDefault, MaybeText, Moment } from "./columns";

/** Append only. */
export interface AuditEventsTable {
  id: GeneratedAlways<number>;
  lab_id: string;
  at: Moment;
  /** null where a worker or the command line acted. */
  account_id: MaybeText;
  token_id: MaybeText;
  /** Dotted kebab-case, for example "run.kept". */
  act: string;
  subject_type: string;
  subject_id: string;
  series_id: MaybeText;
  details: JsonWithDefault<Record<string, unknown>>;
}
