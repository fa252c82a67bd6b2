import type { Generated } from "kysely";
import type { Id, MaybeMoment, MaybeText, Moment } from "./columns";

export interface SessionsTable {
  id: Id;
  account_id: string;
  /** The lab that the session works in now. */
  lab_id: MaybeText;
  created_at: Moment;
  last_seen_at: Moment;
  expires_at: Moment;
  user_agent: Generated<string>;
  ip: Generated<string>;
  ended_at: MaybeMoment;
}
