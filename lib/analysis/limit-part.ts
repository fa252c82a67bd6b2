/** One half of a criterion, THD or compression, in one band. */
import type { LimitStatus } from "../series/vocabulary";

export interface PartLimit {
  status: LimitStatus;
  /** Drives, dB; present where the status is found. */
  nominalDb?: number;
  lowDb?: number;
  highDb?: number;
  reason?: string;
}
