import type { Generated } from "kysely";
import type { PublicationState } from "../../lib/publication/snapshot-schema";
import type { Id, MaybeMoment, MaybeText, Moment } from "./columns";

export interface PublicationsTable {
  id: Id;
  lab_id: string;
  series_id: string;
  sign_off_id: string;
  /** Second part of the address; the same for all revisions of a series. */
  slug: string;
  revision: number;
  /** Canonical JSON of a Snapshot. */
  snapshot: string;
  digest: string;
  state: Generated<PublicationState>;
  embargo_until: MaybeMoment;
  change_note: MaybeText;
  evidence_public: Generated<boolean>;
  published_by: string;
  published_at: Moment;
  replaced_at: MaybeMoment;
  withdrawn_by: MaybeText;
  withdrawn_at: MaybeMoment;
  withdraw_reason: MaybeText;
}

export interface PreviewsTable {
  id: Id;
  lab_id: string;
  series_id: string;
  sign_off_id: string;
  token_hash: string;
  for_whom: string;
  snapshot: string;
  created_by: string;
  created_at: Moment;
  expires_at: Moment;
  revoked_at: MaybeMoment;
}

export interface MakerCommentsTable {
  id: Id;
  lab_id: string;
  series_id: string;
  preview_id: string;
  name: string;
  email: string;
  words: string;
  written_at: Moment;
  answer: MaybeText;
  answered_by: MaybeText;
  answered_at: MaybeMoment;
}
