/** The states of one analysis version, from SQL column to screen. */
export const ANALYSIS_STATES = ["queued", "running", "done", "failed", "cancelled"] as const;
export type AnalysisState = (typeof ANALYSIS_STATES)[number];
