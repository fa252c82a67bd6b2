import { compareSeries } from "@/lib/api/compare";
import { handle } from "../../../_server/handle";
import { loadComparison } from "../../../_server/views/comparison-view";

export const GET = handle(compareSeries, ({ query, inLab, caller }) =>
  inLab((trx) =>
    loadComparison(trx, caller.labId, {
      seriesIds: query.series.split(","),
      thd: query.thd ?? null,
      compression: query.compression ?? null,
      kind: query.runs,
    }),
  ),
);
