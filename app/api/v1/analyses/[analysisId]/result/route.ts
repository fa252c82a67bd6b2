import { getResult as getStored } from "@/db/queries/results";
import { getResult } from "@/lib/api/analyses";
import { toResultText } from "@/lib/result/result-text";
import { handle } from "../../../../../_server/handle";

/** The same bytes as the analysis command prints. */
export const GET = handle(getResult, async ({ params, inLab, caller }) => {
  const result = await inLab((trx) => getStored(trx, caller.labId, params.analysisId));
  return new Response(toResultText(result), { headers: { "content-type": "application/json" } });
});
