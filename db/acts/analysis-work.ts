/** What a worker needs of an analysis: its inputs as they were when it was asked for. */
import { seriesSchema, type Series } from "../../lib/series/series-schema";
import { toFileStem, toPlannedRuns } from "../../lib/series/planned-runs";
import type { Trx } from "../client";
import { getAnalysis } from "../queries/analyses";
import { getLoudspeaker } from "../queries/loudspeakers";
import { listRequestedRuns } from "../queries/run-requests";
import { listRuns } from "../queries/runs";
import { getSeries } from "../queries/series";

export interface AnalysisWork {
  analysisId: string;
  seriesId: string;
  version: number;
  attempt: number;
  series: Series;
  files: { file: string; digest: string; run_id: string | null }[];
  /** Runs of the series in its order, with the words of their rows. */
  runs: { file: string; label: string }[];
  slotByFile: Map<string, string>;
  runIdByFile: Map<string, string>;
}

/** @throws AppError "not-found" */
export async function loadAnalysisWork(
  trx: Trx,
  labId: string,
  analysisId: string,
): Promise<AnalysisWork> {
  const analysis = await getAnalysis(trx, labId, analysisId);
  const row = await getSeries(trx, labId, analysis.series_id);
  const { model } = await getLoudspeaker(trx, labId, row.loudspeaker_id);
  const requested = await listRequestedRuns(trx, labId, analysis.series_id);
  const planned = toPlannedRuns(row.plan, toFileStem(model), requested);
  const slotById = new Map(
    (await listRuns(trx, labId, analysis.series_id)).map((run) => [run.id, run.slot]),
  );
  const { files } = analysis.inputs;
  const runIdByFile = new Map(
    files.flatMap(({ file, run_id }) => (run_id === null ? [] : [[file, run_id] as const])),
  );
  const slotByFile = new Map(
    [...runIdByFile].flatMap(([file, id]) => {
      const slot = slotById.get(id) ?? null;
      return slot === null ? [] : [[file, slot] as const];
    }),
  );
  const series = seriesSchema.parse(analysis.inputs.series);
  return {
    analysisId,
    seriesId: analysis.series_id,
    version: analysis.version,
    attempt: analysis.attempts,
    series,
    files,
    runs: series.runs.map(({ file }) => ({
      file,
      label: planned.find((p) => p.slot === slotByFile.get(file))?.label ?? file,
    })),
    slotByFile,
    runIdByFile,
  };
}
