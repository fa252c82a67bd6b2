import type { ColumnType, Generated } from "kysely";

/** Kept by rate-limiter-flexible. */
export interface RateLimitsTable {
  key: string;
  points: Generated<number>;
  /** Milliseconds since 1970. */
  expire: ColumnType<number | null, number | null, number | null>;
}
