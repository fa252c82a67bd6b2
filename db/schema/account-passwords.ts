import type { Moment } from "./columns";

/** Apart from accounts: readable by the account alone. */
export interface AccountPasswordsTable {
  account_id: string;
  password_hash: string;
  password_changed_at: Moment;
}
