import { requireUnarchived } from "@/db/acts/act-on-run";
import { loadCapture } from "@/db/acts/capture";
import { requestAnalysis } from "@/db/acts/request-analysis";
import { deriveState } from "@/db/acts/settle-series";
import { getAnalysis, listAnalyses as findAnalyses } from "@/db/queries/analyses";
import { notifyChange } from "@/db/queries/changes";
import { getSeries, lockSeries } from "@/db/queries/series";
import { listAnalyses, startAnalysis } from "@/lib/api/analyses";
import { handle } from "../../../../../_server/handle";
import { follow } from "../../../../../_server/queues";
import { toAnalysisView } from "../../../../../_server/views/analysis-view";

export const GET = handle(listAnalyses, ({ params, inLab, caller }) =>
  inLab(async (trx) => {
    await getSeries(trx, caller.labId, params.seriesId);
    const rows = await findAnalyses(trx, caller.labId, params.seriesId);
    return { analyses: rows.map(toAnalysisView) };
  }),
);

export const POST = handle(startAnalysis, async ({ params, inLab, caller, scope }) => {
  const { labId } = caller;
  const { seriesId } = params;
  const { view, followUp } = await inLab(async (trx) => {
    await lockSeries(trx, labId, seriesId);
    const capture = await loadCapture(trx, labId, seriesId);
    // A signed-off series may be analysed anew, by a newer engine: the sign-off stays with its version.
    requireUnarchived(capture);
    const asked = await requestAnalysis(trx, scope, capture);
    await deriveState(trx, scope, capture);
    await notifyChange(trx, { labId, seriesId, analysisId: asked.analysisId });
    const row = await getAnalysis(trx, labId, asked.analysisId);
    return { view: toAnalysisView(row), followUp: asked.followUp };
  });
  await follow(followUp);
  return view;
});
