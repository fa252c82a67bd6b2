/**
 * Removing the recordings of an archived series: by an admin with a reason, or by the lab's
 * retention. What a publication cites is never removed; rows, results and trail stay.
 */
import { AppError } from "../../lib/errors/app-error";
import { labSettingsSchema } from "../../lib/labs/settings-schema";
import type { Trx } from "../client";
import type { LabScope } from "../in-lab";
import { recordEvent } from "../queries/audit";
import { notifyChange } from "../queries/changes";
import { getLab } from "../queries/labs";
import {
  findRemovable,
  listArchivedSeries,
  lockRecordingsOf,
  markRemoved,
} from "../queries/retention";
import { lockSeries } from "../queries/series";

export interface Removal {
  recordings: number;
  bytes: number;
  /** Recordings that a publication cites, or that something else of the lab shows. */
  kept: number;
}

const DAY_MS = 86_400_000;
const SERIES_AT_ONCE = 200;

/** Archived before this moment: due. Null where the lab keeps everything. */
export const toDueBefore = (retentionDays: number | null, now: Date): Date | null =>
  retentionDays === null ? null : new Date(now.getTime() - retentionDays * DAY_MS);

/**
 * An act of a person, whatever the retention.
 *
 * @throws AppError "not-found"; "conflict.state" where the series is not archived or nothing may go
 */
export async function removeRecordings(
  trx: Trx,
  by: LabScope,
  seriesId: string,
  reason: string,
): Promise<Removal> {
  const { archived_at } = await lockSeries(trx, by.labId, seriesId);
  if (archived_at === null) {
    throw new AppError(
      "conflict.state",
      "Recordings are removed from archived series only. Archive it first.",
    );
  }
  const removal = await remove(trx, by, { seriesId, dueBefore: null, reason });
  if (removal.recordings > 0) return removal;
  throw new AppError(
    "conflict.state",
    removal.kept === 0
      ? "This series has no recordings left to remove."
      : "Every recording of this series is cited by a publication or shown elsewhere, and stays.",
  );
}

/** What is due by the retention of the lab. @returns one line per series that lost recordings. */
export async function removeDueRecordings(
  trx: Trx,
  by: LabScope,
  now: Date,
): Promise<(Removal & { seriesId: string })[]> {
  const { settings } = await getLab(trx, by.labId);
  const days = labSettingsSchema.parse(settings).retention_days;
  const dueBefore = toDueBefore(days, now);
  if (dueBefore === null) return [];
  const archived = await listArchivedSeries(trx, by.labId, { dueBefore, limit: SERIES_AT_ONCE });
  const removals = [];
  for (const { seriesId, archivedAt, removable } of archived) {
    if (removable === 0 || archivedAt > dueBefore) continue;
    const locked = await lockSeries(trx, by.labId, seriesId);
    // Somebody took it back from the archive just now.
    if (locked.archived_at === null || locked.archived_at > dueBefore) continue;
    const reason = `${days} days in the archive`;
    removals.push({ seriesId, ...(await remove(trx, by, { seriesId, dueBefore, reason })) });
  }
  return removals;
}

async function remove(
  trx: Trx,
  by: LabScope,
  { seriesId, dueBefore, reason }: { seriesId: string; dueBefore: Date | null; reason: string },
): Promise<Removal> {
  // Whoever names the same bytes at this moment comes before us or after, never between.
  await lockRecordingsOf(trx, by.labId, seriesId);
  const { removable, kept } = await findRemovable(trx, by.labId, seriesId, dueBefore);
  const digests = removable.map(({ digest }) => digest);
  const bytes = removable.reduce((sum, one) => sum + one.bytes, 0);
  if (digests.length === 0) return { recordings: 0, bytes, kept };
  await markRemoved(trx, by.labId, digests, new Date());
  await recordEvent(trx, by, {
    act: "recordings.removed",
    subjectType: "series",
    subjectId: seriesId,
    seriesId,
    details: { recordings: digests.length, bytes, kept, digests, reason },
  });
  await notifyChange(trx, { labId: by.labId, seriesId });
  return { recordings: digests.length, bytes, kept };
}
