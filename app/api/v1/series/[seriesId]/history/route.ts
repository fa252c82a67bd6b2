import { listSeriesEvents } from "@/db/queries/audit";
import { getSeries } from "@/db/queries/series";
import { getSeriesHistory } from "@/lib/api/series";
import { toHistoryWords } from "@/lib/series/history-words";
import { handle } from "../../../../../_server/handle";
import { toPerson } from "../../../../../_server/views/person-view";

export const GET = handle(getSeriesHistory, ({ params, inLab, caller }) =>
  inLab(async (trx) => {
    await getSeries(trx, caller.labId, params.seriesId);
    const rows = await listSeriesEvents(trx, caller.labId, params.seriesId);
    return {
      events: rows.map((row) => ({
        id: String(row.id),
        at: row.at.toISOString(),
        who: toPerson(row.accountId, row.name),
        by_token: row.tokenName,
        act: row.act,
        ...toHistoryWords(row.act, row.details),
      })),
    };
  }),
);
