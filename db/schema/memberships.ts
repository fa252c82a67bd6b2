import type { Role } from "../../lib/roles/roles";
import type { MaybeMoment, Moment } from "./columns";

export interface MembershipsTable {
  lab_id: string;
  account_id: string;
  roles: Role[];
  created_at: Moment;
  removed_at: MaybeMoment;
}
