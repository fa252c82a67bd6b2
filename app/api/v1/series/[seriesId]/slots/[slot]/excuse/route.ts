import { excuseSlot as excuse } from "@/db/acts/excuse-slot";
import { excuseSlot } from "@/lib/api/runs";
import { handle } from "../../../../../../../_server/handle";
import { follow } from "../../../../../../../_server/queues";
import { toSlotView } from "../../../../../../../_server/views/run-view";

export const PUT = handle(excuseSlot, async ({ params, body, inLab, caller, scope }) => {
  const by = { ...scope, accountId: caller.accountId };
  const { slot, followUp } = await inLab((trx) =>
    excuse(trx, by, { seriesId: params.seriesId, slot: params.slot, reason: body.reason }),
  );
  await follow(followUp);
  return toSlotView(slot);
});
