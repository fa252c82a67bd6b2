import type { Generated } from "kysely";
import type { Role } from "../../lib/roles/roles";
import type { Id, MaybeMoment, MaybeText, Moment } from "./columns";

export interface InvitationsTable {
  id: Id;
  lab_id: string;
  email: string;
  name: Generated<string>;
  roles: Role[];
  /** SHA-256 of the secret in the link, hex. */
  token_hash: string;
  /** null where the command line made it. */
  created_by: MaybeText;
  created_at: Moment;
  expires_at: Moment;
  used_at: MaybeMoment;
  withdrawn_at: MaybeMoment;
}
