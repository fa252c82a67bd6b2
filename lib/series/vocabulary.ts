/** The closed word lists of the trade as this project uses them. One home for each. */

export const ENVIRONMENTS = [
  "anechoic",
  "ground-plane",
  "flush-half-space",
  "outdoors",
  "gated",
  "in-room",
  "near-field",
] as const;
export type Environment = (typeof ENVIRONMENTS)[number];

export const RUN_KINDS = ["short-term", "long-term", "closing"] as const;
export type RunKind = (typeof RUN_KINDS)[number];

/** Causes of the short-term loss, as computed (domain.md section 6 in docs). */
export const SHORT_TERM_CAUSES = [
  "none",
  "limiter",
  "compressor",
  "equaliser",
  "overload",
  "port",
  "unresolved",
] as const;
export type ShortTermCause = (typeof SHORT_TERM_CAUSES)[number];

export const LONG_TERM_CAUSES = ["thermal", "none", "unresolved"] as const;
export type LongTermCause = (typeof LONG_TERM_CAUSES)[number];

/** Every decision a person may take, in the order of the keys 1 to 8. */
export const DECIDABLE_CAUSES = [
  "limiter",
  "compressor",
  "equaliser",
  "overload",
  "port",
  "thermal",
  "none",
  "unresolved",
] as const;
export type DecidableCause = (typeof DECIDABLE_CAUSES)[number];

export const ONSET_STATUSES = ["found", "not reached", "below lowest", "unresolved"] as const;
export type OnsetStatus = (typeof ONSET_STATUSES)[number];

export const LIMIT_STATUSES = ["found", "not reached", "below lowest", "not assessed"] as const;
export type LimitStatus = (typeof LIMIT_STATUSES)[number];

export const SERIES_STATES = [
  "planned",
  "capturing",
  "analysing",
  "analysis failed",
  "in review",
  "signed off",
] as const;
export type SeriesState = (typeof SERIES_STATES)[number];
