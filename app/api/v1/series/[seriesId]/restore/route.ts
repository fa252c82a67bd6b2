import { restoreSeries as restore } from "@/db/acts/archive-series";
import { restoreSeries } from "@/lib/api/series";
import { handle } from "../../../../../_server/handle";
import { loadSeriesView } from "../../../../../_server/views/series-view";

export const POST = handle(restoreSeries, ({ params, inLab, caller, scope }) =>
  inLab(async (trx) => {
    await restore(trx, scope, params.seriesId);
    return loadSeriesView(trx, caller.labId, params.seriesId);
  }),
);
