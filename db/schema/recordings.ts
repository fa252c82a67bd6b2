import type { MaybeMoment, Moment } from "./columns";

/** What lies in storage for a lab. */
export interface RecordingsTable {
  lab_id: string;
  /** SHA-256 of the bytes, hex. */
  digest: string;
  bytes: number;
  media: string;
  created_at: Moment;
  /** When its bytes were removed for good; the row stays, since runs and trail name the digest. */
  removed_at: MaybeMoment;
}
