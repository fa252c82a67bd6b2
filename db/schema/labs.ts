import type { Generated } from "kysely";
import type { LabSettingsInput } from "../../lib/labs/settings-schema";
import type { Id, JsonWithDefault, Moment } from "./columns";

export interface LabsTable {
  id: Id;
  slug: string;
  name: string;
  /** IANA name. */
  time_zone: Generated<string>;
  /** As stored; parse with labSettingsSchema to fill in defaults. */
  settings: JsonWithDefault<LabSettingsInput>;
  created_at: Moment;
}
