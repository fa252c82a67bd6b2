import type { Generated } from "kysely";
import type { AnalysisState } from "../../lib/api/analyses";
import type { Failure, Progress } from "../../lib/api/series";
import type { ResultHead } from "../../lib/result/result-text";
import type { Band, ResultRun } from "../../lib/result/result-schema";
import type { Settings } from "../../lib/series/series-schema";
import type { Id, Json, MaybeJson, MaybeMoment, MaybeNumber, MaybeText, Moment } from "./columns";

/** What an analysis was given. */
export interface AnalysisInputs {
  /** series.json as the engine takes it. */
  series: unknown;
  /** Recordings behind the names in `series`; run_id null for microphone files. */
  files: { file: string; digest: string; run_id: string | null }[];
}

export interface AnalysesTable {
  id: Id;
  lab_id: string;
  series_id: string;
  /** Counted per series, from 1. */
  version: number;
  state: Generated<AnalysisState>;
  inputs: Json<AnalysisInputs>;
  /** SHA-256 over inputs and settings, hex. */
  inputs_digest: string;
  settings: Json<Settings>;
  engine_version: string;
  /** Commit of the source that computed it; null where that was not known. */
  source_commit: MaybeText;
  progress: MaybeJson<Progress>;
  head: MaybeJson<ResultHead>;
  error: MaybeJson<Failure>;
  requested_by: MaybeText;
  requested_at: Moment;
  started_at: MaybeMoment;
  finished_at: MaybeMoment;
  attempts: Generated<number>;
  heartbeat_at: MaybeMoment;
}

export interface AnalysisRunsTable {
  analysis_id: string;
  lab_id: string;
  position: number;
  run_id: MaybeText;
  payload: Json<ResultRun>;
}

export interface AnalysisBandsTable {
  analysis_id: string;
  lab_id: string;
  position: number;
  nominal_hz: number;
  exact_hz: number;
  cause: string;
  onset_status: string;
  /** On the scale of the run levels. */
  onset_db: MaybeNumber;
  payload: Json<Band>;
}
