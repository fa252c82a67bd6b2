import { getAnalysis as getRow } from "@/db/queries/analyses";
import { getAnalysis } from "@/lib/api/analyses";
import { handle } from "../../../../_server/handle";
import { toAnalysisView } from "../../../../_server/views/analysis-view";

export const GET = handle(getAnalysis, ({ params, inLab, caller }) =>
  inLab(async (trx) => toAnalysisView(await getRow(trx, caller.labId, params.analysisId))),
);
