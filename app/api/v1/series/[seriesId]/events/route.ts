import { getSeries } from "@/db/queries/series";
import { followSeries } from "@/lib/api/analyses";
import { listenToChanges } from "../../../../../_server/changes";
import { answerEvents } from "../../../../../_server/event-stream";
import { handle } from "../../../../../_server/handle";
import { mayStill } from "../../../../../_server/may-still";

/** Says that something changed, not what: the page asks for what it shows. */
export const GET = handle(followSeries, async ({ params, request, inLab, caller }) => {
  const { seriesId } = params;
  await inLab((trx) => getSeries(trx, caller.labId, seriesId));
  return answerEvents({
    request,
    mayStill: () => mayStill(request, caller, "see"),
    start: (sink) => {
      const told = (analysisId: string | null): void =>
        sink.send("change", { series_id: seriesId, analysis_id: analysisId });
      told(null);
      return listenToChanges((change) => {
        if (change === null) told(null);
        else if (change.labId === caller.labId && change.seriesId === seriesId) {
          told(change.analysisId ?? null);
        }
      });
    },
  });
});
