import { loadChanges } from "@/db/acts/decide-bands";
import { getAnalysis } from "@/db/queries/analyses";
import { compareAnalyses } from "@/lib/api/review";
import { handle } from "../../../../../_server/handle";

export const GET = handle(compareAnalyses, ({ params, query, inLab, caller }) =>
  inLab(async (trx) => {
    const analysis = await getAnalysis(trx, caller.labId, params.analysisId);
    const { changes } = await loadChanges(trx, caller.labId, analysis, query.against);
    return { bands: changes };
  }),
);
