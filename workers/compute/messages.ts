/** What worker and computing process say to each other, over the channel of the fork. */
import type { Result } from "../../lib/result/result-schema";
import type { ArrivalReport } from "../../lib/runs/arrival-schema";
import type { ArrivalRequest } from "../../lib/runs/arrival/arrival-request";
import type { OnProgress } from "../../lib/analysis/types";
import type { Series } from "../../lib/series/series-schema";

export interface CheckTask {
  kind: "check";
  request: Omit<ArrivalRequest, "open">;
  /** Where the bytes lie, by digest. */
  paths: Record<string, string>;
}

export interface AnalyseTask {
  kind: "analyse";
  series: Series;
  /** Where the bytes lie, by the names in `series`. */
  paths: Record<string, string>;
}

export type Task = CheckTask | AnalyseTask;
export type Answer<T extends Task> = T extends CheckTask ? ArrivalReport : Result;
export type ProgressEvent = Parameters<OnProgress>[0];

export interface Request {
  id: number;
  task: Task;
}

/** An error as it crosses: an AppError keeps its code, anything else its text for the log. */
export interface SentError {
  code: string | null;
  message: string;
  details: Record<string, unknown>;
  file: string | null;
  stack: string | null;
}

export type Reply =
  | { id: number; kind: "progress"; event: ProgressEvent }
  | { id: number; kind: "answer"; answer: ArrivalReport | Result }
  | { id: number; kind: "error"; error: SentError };
