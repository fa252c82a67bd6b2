import type { Generated } from "kysely";
import type { Theme } from "../../lib/labs/settings-schema";
import type { Id, MaybeMoment, Moment } from "./columns";

export interface AccountsTable {
  id: Id;
  /** Lower case. */
  email: string;
  name: string;
  theme: Generated<Theme>;
  created_at: Moment;
  disabled_at: MaybeMoment;
}
