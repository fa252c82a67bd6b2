import { isDeepStrictEqual } from "node:util";
import { handle } from "@/app/_server/handle";
import { toLab } from "@/app/_server/views/people";
import { recordEvent } from "@/db/queries/audit";
import { getLab as getRow, lockLab, updateLab as updateRow } from "@/db/queries/labs";
import { getLab, updateLab } from "@/lib/api/labs";
import { AppError } from "@/lib/errors/app-error";

export const GET = handle(getLab, ({ inLab, scope }) =>
  inLab(async (trx) => toLab(await getRow(trx, scope.labId))),
);

export const PATCH = handle(updateLab, ({ inLab, scope, body }) =>
  inLab(async (trx) => {
    const { was, ...change } = body;
    const { name, time_zone: timeZone, settings } = change;
    if (was !== undefined) {
      const now = toLab(await lockLab(trx, scope.labId));
      const seen = { name: now.name, time_zone: now.time_zone, settings: now.settings };
      if (!isDeepStrictEqual(seen, was)) {
        throw new AppError(
          "conflict.changed",
          "Somebody changed the settings of the lab meanwhile. Look at theirs, then decide.",
        );
      }
    }
    await updateRow(trx, scope.labId, { name, timeZone, settings });
    await recordEvent(trx, scope, {
      act: "lab.changed",
      subjectType: "lab",
      subjectId: scope.labId,
      details: change,
    });
    return toLab(await getRow(trx, scope.labId));
  }),
);
