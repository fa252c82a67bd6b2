import { startSeries } from "@/db/acts/plan-series";
import { listProgress } from "@/db/queries/current-analysis";
import { listSeries as findSeries } from "@/db/queries/series-list";
import { createSeries, listSeries } from "@/lib/api/series";
import { handle } from "../../../_server/handle";
import { loadSeriesView, toSeriesRow } from "../../../_server/views/series-view";

export const GET = handle(listSeries, ({ query, inLab, caller }) =>
  inLab(async (trx) => {
    const { search, state, loudspeaker, archived, sort, direction, page, page_size } = query;
    const list = await findSeries(
      trx,
      caller.labId,
      { search, state, loudspeakerId: loudspeaker, archived: archived === "yes" },
      { sort, direction },
      { page, pageSize: page_size },
    );
    const busy = list.rows.filter((row) => row.state === "analysing").map((row) => row.id);
    const progress = await listProgress(trx, caller.labId, busy);
    return {
      series: list.rows.map((row) => toSeriesRow(row, progress.get(row.id) ?? null)),
      found: list.found,
      total: list.total,
      by_state: list.byState,
    };
  }),
);

export const POST = handle(createSeries, ({ body, inLab, caller, scope }) =>
  inLab(async (trx) => {
    const by = { ...scope, accountId: caller.accountId };
    const id = await startSeries(trx, by, body.loudspeaker_id, body.plan);
    return loadSeriesView(trx, caller.labId, id);
  }),
);
