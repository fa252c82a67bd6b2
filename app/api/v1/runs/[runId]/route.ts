import { removeUnassignedRun } from "@/db/acts/remove-run";
import { getRun as getRow } from "@/db/queries/runs";
import { getRun, removeRun } from "@/lib/api/runs";
import { handle } from "../../../../_server/handle";
import { toRunView } from "../../../../_server/views/run-view";

export const GET = handle(getRun, ({ params, inLab, caller }) =>
  inLab(async (trx) => toRunView(await getRow(trx, caller.labId, params.runId))),
);

export const DELETE = handle(removeRun, async ({ params, inLab, scope }) => {
  await inLab((trx) => removeUnassignedRun(trx, scope, params.runId));
  return new Response(null, { status: 204 });
});
