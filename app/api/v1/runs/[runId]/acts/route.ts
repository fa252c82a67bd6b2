import { actOnRun as carryOut } from "@/db/acts/act-on-run";
import { getRun } from "@/db/queries/runs";
import { actOnRun } from "@/lib/api/runs";
import { handle } from "../../../../../_server/handle";
import { follow } from "../../../../../_server/queues";
import { toRunView } from "../../../../../_server/views/run-view";

export const POST = handle(actOnRun, async ({ params, body, inLab, caller, scope }) => {
  const by = { ...scope, accountId: caller.accountId };
  const { view, followUp } = await inLab(async (trx) => {
    const work = await carryOut(trx, by, params.runId, body);
    return { view: toRunView(await getRun(trx, caller.labId, params.runId)), followUp: work };
  });
  await follow(followUp);
  return view;
});
