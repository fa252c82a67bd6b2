import { handle } from "@/app/_server/handle";
import { toDueBefore } from "@/db/acts/remove-recordings";
import { getLab } from "@/db/queries/labs";
import { listArchivedSeries } from "@/db/queries/retention";
import { toSeriesNumber } from "@/db/queries/series";
import { getKeeping } from "@/lib/api/keeping";
import { labSettingsSchema } from "@/lib/labs/settings-schema";

const MOST_SERIES = 500;
const DAY_MS = 86_400_000;

export const GET = handle(getKeeping, ({ caller, inLab }) =>
  inLab(async (trx) => {
    const { settings } = await getLab(trx, caller.labId);
    const days = labSettingsSchema.parse(settings).retention_days;
    const dueBefore = toDueBefore(days, new Date());
    const rows = await listArchivedSeries(trx, caller.labId, { dueBefore, limit: MOST_SERIES });
    return {
      retention_days: days,
      series: rows.map((row) => ({
        id: row.seriesId,
        number: toSeriesNumber(row.number),
        loudspeaker: row.loudspeaker,
        archived_at: row.archivedAt.toISOString(),
        removable: row.removable,
        removable_bytes: row.removableBytes,
        cited: row.cited,
        shared: row.shared,
        due_at:
          days === null || row.removable === 0
            ? null
            : new Date(row.archivedAt.getTime() + days * DAY_MS).toISOString(),
      })),
    };
  }),
);
