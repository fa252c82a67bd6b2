import { reopenSeries as reopen } from "@/db/acts/sign-off";
import { reopenSeries } from "@/lib/api/review";
import { handle } from "../../../../../_server/handle";
import { loadSeriesView } from "../../../../../_server/views/series-view";

export const POST = handle(reopenSeries, ({ params, body, inLab, caller, scope }) =>
  inLab(async (trx) => {
    const by = { ...scope, accountId: caller.accountId };
    await reopen(trx, by, params.seriesId, body.reason);
    return loadSeriesView(trx, caller.labId, params.seriesId);
  }),
);
