import { withdrawRunRequest as withdraw } from "@/db/acts/request-run";
import { withdrawRunRequest } from "@/lib/api/review";
import { handle } from "../../../../../_server/handle";
import { follow } from "../../../../../_server/queues";

export const POST = handle(withdrawRunRequest, async ({ params, inLab, caller, scope }) => {
  const by = { ...scope, accountId: caller.accountId };
  const { request, followUp } = await inLab((trx) => withdraw(trx, by, params.requestId));
  await follow(followUp);
  return request;
});
