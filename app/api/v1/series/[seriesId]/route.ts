import { removeSeries as remove } from "@/db/acts/archive-series";
import { getSeries, removeSeries } from "@/lib/api/series";
import { handle } from "../../../../_server/handle";
import { loadSeriesView } from "../../../../_server/views/series-view";

export const GET = handle(getSeries, ({ params, inLab, caller }) =>
  inLab((trx) => loadSeriesView(trx, caller.labId, params.seriesId)),
);

export const DELETE = handle(removeSeries, ({ params, inLab, scope }) =>
  inLab(async (trx) => ({ outcome: await remove(trx, scope, params.seriesId) })),
);
