import { requestRun as ask } from "@/db/acts/request-run";
import { requestRun } from "@/lib/api/review";
import { handle } from "../../../../../_server/handle";
import { follow } from "../../../../../_server/queues";

export const POST = handle(requestRun, async ({ params, body, inLab, caller, scope }) => {
  const { level_dB: levelDb, kind, variant, reason } = body;
  const by = { ...scope, accountId: caller.accountId };
  const { request, followUp } = await inLab((trx) =>
    ask(trx, by, { seriesId: params.seriesId, levelDb, kind, variant, reason }),
  );
  await follow(followUp);
  return request;
});
