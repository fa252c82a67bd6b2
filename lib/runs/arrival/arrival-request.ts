/** What the arrival checks are given: the recording, its place, the plan, and its siblings. */
import type { ByteSource } from "../../audio/byte-source";
import type { LabSettings } from "../../labs/settings-schema";
import type { Plan } from "../../series/plan-schema";
import type { ColumnChoice } from "../../series/table-columns";
import type { PlannedRun } from "../../series/planned-runs";
import type { ArrivalReport, RunState } from "../arrival-schema";

export interface ArrivalRequest {
  /** The recording under check. */
  run: {
    file: string;
    digest: string;
    /** From 1. */
    channel: number;
    /** Of a table: which column holds what, where a person said so. */
    columns?: ColumnChoice | undefined;
    /** Its place in the plan; null while the file fits none: then only the file itself is checked. */
    place: PlannedRun | null;
  };
  plan: Plan;
  /** Limits of the lab. */
  limits: LabSettings["arrival"];
  engineVersion: string;
  /** Other live recordings of the series, in the order of the plan. */
  siblings: readonly ArrivalSibling[];
  /** The bytes of the recording, or of a sibling, by digest. Random access; nothing to close. */
  open: (digest: string) => ByteSource;
}

export interface ArrivalSibling {
  file: string;
  digest: string;
  channel: number;
  /** null where it waits without a place. */
  place: PlannedRun | null;
  state: RunState;
  /** null while it is being checked. */
  report: ArrivalReport | null;
}
