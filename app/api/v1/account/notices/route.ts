import { handle } from "@/app/_server/handle";
import type { Trx } from "@/db/client";
import { chooseNotice as saveChoice, listUnwanted } from "@/db/queries/notice-choices";
import { chooseNotice, getNoticeChoices, type NoticeChoices } from "@/lib/api/notices";
import { toNoticesOf } from "@/lib/mail/notices";
import type { LabCaller } from "@/app/_server/caller";

async function toView(trx: Trx, { labId, accountId, roles }: LabCaller): Promise<NoticeChoices> {
  const unwanted = await listUnwanted(trx, labId, accountId);
  return {
    notices: toNoticesOf(roles).map((kind) => ({ kind, wanted: !unwanted.has(kind) })),
  };
}

export const GET = handle(getNoticeChoices, ({ inLab, caller }) =>
  inLab((trx) => toView(trx, caller)),
);

export const PATCH = handle(chooseNotice, ({ inLab, caller, body }) =>
  inLab(async (trx) => {
    const { labId, accountId } = caller;
    await saveChoice(trx, { labId, accountId, ...body });
    return toView(trx, caller);
  }),
);
