import { requireKept } from "@/db/acts/series-folder";
import { getRun } from "@/db/queries/runs";
import { downloadRun } from "@/lib/api/runs";
import { answerFile } from "../../../../../_server/answer-file";
import { handle } from "../../../../../_server/handle";

export const GET = handle(downloadRun, async ({ params, request, inLab, caller }) => {
  const run = await inLab((trx) => getRun(trx, caller.labId, params.runId));
  requireKept(run);
  return answerFile(request, { digest: run.digest, bytes: run.bytes, fileName: run.file_name });
});
