import type { AnalysisRow } from "../../../db/queries/analyses";
import type { AnalysisView } from "../../../lib/api/analyses";
import { toPerson } from "./person-view";

export function toAnalysisView(row: AnalysisRow): AnalysisView {
  return {
    id: row.id,
    series_id: row.series_id,
    version: row.version,
    state: row.state,
    progress: row.progress,
    failure: row.error,
    engine_version: row.engine_version,
    requested_by: toPerson(row.requested_by, row.requestedByName),
    requested_at: row.requested_at.toISOString(),
    started_at: row.started_at?.toISOString() ?? null,
    finished_at: row.finished_at?.toISOString() ?? null,
    run_ids: row.inputs.files.flatMap((file) => (file.run_id === null ? [] : [file.run_id])),
  };
}
