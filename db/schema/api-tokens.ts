import type { Role } from "../../lib/roles/roles";
import type { Id, MaybeMoment, Moment } from "./columns";

export interface ApiTokensTable {
  id: Id;
  lab_id: string;
  account_id: string;
  name: string;
  /** SHA-256 of the token, hex. */
  token_hash: string;
  /** The first characters, to tell tokens apart. */
  prefix: string;
  roles: Role[];
  created_at: Moment;
  last_used_at: MaybeMoment;
  expires_at: MaybeMoment;
  revoked_at: MaybeMoment;
}
