import { handle } from "@/app/_server/handle";
import { toLab } from "@/app/_server/views/people";
import { recordEvent } from "@/db/queries/audit";
import { getLab as getRow, updateLab as updateRow } from "@/db/queries/labs";
import { getLab, updateLab } from "@/lib/api/labs";

export const GET = handle(getLab, ({ inLab, scope }) =>
  inLab(async (trx) => toLab(await getRow(trx, scope.labId))),
);

export const PATCH = handle(updateLab, ({ inLab, scope, body }) =>
  inLab(async (trx) => {
    const { name, time_zone: timeZone, settings } = body;
    await updateRow(trx, scope.labId, { name, timeZone, settings });
    await recordEvent(trx, scope, {
      act: "lab.changed",
      subjectType: "lab",
      subjectId: scope.labId,
      details: body,
    });
    return toLab(await getRow(trx, scope.labId));
  }),
);
