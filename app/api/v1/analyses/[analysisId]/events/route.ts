import { getAnalysis } from "@/db/queries/analyses";
import { followAnalysis } from "@/lib/api/analyses";
import { listenToChanges } from "../../../../../_server/changes";
import { answerEvents } from "../../../../../_server/event-stream";
import { handle } from "../../../../../_server/handle";
import { latestOnly } from "../../../../../_server/latest-only";
import { log } from "../../../../../_server/log";
import { mayStill } from "../../../../../_server/may-still";
import { toAnalysisView } from "../../../../../_server/views/analysis-view";

const ENDED: readonly string[] = ["done", "failed", "cancelled"];

export const GET = handle(followAnalysis, async ({ params, request, inLab, caller }) => {
  const { analysisId } = params;
  const read = () => inLab((trx) => getAnalysis(trx, caller.labId, analysisId));
  await read();
  return answerEvents({
    request,
    mayStill: () => mayStill(request, caller, "see"),
    start: (sink) => {
      const tell = latestOnly(
        async () => {
          const view = toAnalysisView(await read());
          sink.send("analysis", view);
          if (ENDED.includes(view.state)) sink.end();
        },
        (error) => log().warn({ err: error }, "an analysis could not be told"),
      );
      tell();
      return listenToChanges((change) => {
        if (change === null || change.analysisId === analysisId) tell();
      });
    },
  });
});
