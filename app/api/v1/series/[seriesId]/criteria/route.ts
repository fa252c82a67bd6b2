import { replaceCriteria } from "@/db/acts/plan-series";
import { updateCriteria } from "@/lib/api/series";
import { handle } from "../../../../../_server/handle";
import { loadSeriesView } from "../../../../../_server/views/series-view";

export const PUT = handle(updateCriteria, ({ params, body, inLab, caller, scope }) =>
  inLab(async (trx) => {
    const by = { ...scope, accountId: caller.accountId };
    const { seriesId } = params;
    const { criteria, plan_version: planVersion } = body;
    await replaceCriteria(trx, by, { seriesId, criteria, planVersion });
    return loadSeriesView(trx, caller.labId, seriesId);
  }),
);
