import { replacePlan } from "@/db/acts/plan-series";
import { updatePlan } from "@/lib/api/series";
import { handle } from "../../../../../_server/handle";
import { loadSeriesView } from "../../../../../_server/views/series-view";

export const PUT = handle(updatePlan, ({ params, body, inLab, caller, scope }) =>
  inLab(async (trx) => {
    const by = { ...scope, accountId: caller.accountId };
    const { seriesId } = params;
    await replacePlan(trx, by, { seriesId, plan: body.plan, planVersion: body.plan_version });
    return loadSeriesView(trx, caller.labId, seriesId);
  }),
);
