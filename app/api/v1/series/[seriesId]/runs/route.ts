import { loadCapture } from "@/db/acts/capture";
import { listUploads } from "@/db/queries/uploads";
import { listRuns } from "@/lib/api/runs";
import { handle } from "../../../../../_server/handle";
import { toRunsView } from "../../../../../_server/views/run-view";

export const GET = handle(listRuns, ({ params, inLab, caller }) =>
  inLab(async (trx) => {
    const capture = await loadCapture(trx, caller.labId, params.seriesId);
    return toRunsView(capture, await listUploads(trx, caller.labId, params.seriesId));
  }),
);
