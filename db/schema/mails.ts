import type { Generated } from "kysely";
import type { Id, Json, MaybeMoment, MaybeText, Moment } from "./columns";

export interface MailsTable {
  id: Id;
  lab_id: MaybeText;
  account_id: MaybeText;
  kind: string;
  to_address: string;
  payload: Json<Record<string, unknown>>;
  created_at: Moment;
  attempts: Generated<number>;
  next_attempt_at: Moment;
  sent_at: MaybeMoment;
  given_up_at: MaybeMoment;
  last_error: MaybeText;
}

export interface NoticeChoicesTable {
  lab_id: string;
  account_id: string;
  kind: string;
  wanted: boolean;
}

export interface AccountLinksTable {
  id: Id;
  account_id: string;
  purpose: "reset-password" | "change-address";
  token_hash: string;
  new_address: MaybeText;
  created_at: Moment;
  expires_at: Moment;
  used_at: MaybeMoment;
}
