/** A planned run goes without a recording, with a reason; or that is withdrawn. */
import { AppError } from "../../lib/errors/app-error";
import type { FollowUp } from "../../lib/jobs/follow-up";
import type { LadderSlot } from "../../lib/runs/ladder";
import type { Trx } from "../client";
import type { LabScope } from "../in-lab";
import { recordEvent } from "../queries/audit";
import { setExcuse } from "../queries/runs";
import { lockSeries } from "../queries/series";
import { requireOpen } from "./act-on-run";
import { loadCapture } from "./capture";
import { settleSeries } from "./settle-series";

/** @throws AppError "not-found", "conflict.state" where a usable recording holds the place. */
export async function excuseSlot(
  trx: Trx,
  by: LabScope & { accountId: string },
  excuse: { seriesId: string; slot: string; reason: string | null },
): Promise<{ slot: LadderSlot; followUp: FollowUp }> {
  await lockSeries(trx, by.labId, excuse.seriesId);
  const capture = await loadCapture(trx, by.labId, excuse.seriesId);
  requireOpen(capture);
  const place = capture.planned.find((p) => p.slot === excuse.slot);
  const before = capture.ladder.find((l) => l.slot === excuse.slot);
  if (place === undefined || before === undefined) {
    throw new AppError("not-found", `The plan has no run ${excuse.slot}.`);
  }
  if (excuse.reason !== null && before.settled && before.excused === null) {
    throw new AppError(
      "conflict.state",
      `${place.label} has a usable recording and needs no excuse.`,
    );
  }
  await setExcuse(trx, by.labId, by.accountId, excuse);
  await recordEvent(trx, by, {
    act: excuse.reason === null ? "slot.excuse-withdrawn" : "slot.excused",
    subjectType: "slot",
    subjectId: excuse.slot,
    seriesId: excuse.seriesId,
    details: {
      label: place.label,
      ...(excuse.reason === null ? {} : { reason: excuse.reason }),
    },
  });
  const followUp = await settleSeries(trx, by, excuse.seriesId);
  const after = await loadCapture(trx, by.labId, excuse.seriesId);
  return { slot: after.ladder.find((l) => l.slot === excuse.slot) ?? before, followUp };
}
