import { handle } from "@/app/_server/handle";
import { toMember } from "@/app/_server/views/people";
import { listMembers as listRows } from "@/db/queries/members";
import { listMembers } from "@/lib/api/members";

export const GET = handle(listMembers, ({ inLab, scope }) =>
  inLab(async (trx) => ({ members: (await listRows(trx, scope.labId)).map(toMember) })),
);
