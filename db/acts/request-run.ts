/** Asking the tester for a run, and taking that back. */
import { AppError } from "../../lib/errors/app-error";
import type { FollowUp } from "../../lib/jobs/follow-up";
import { toRequestSlot } from "../../lib/review/run-request";
import type { RunRequest } from "../../lib/review/review-schema";
import type { Trx } from "../client";
import type { LabScope } from "../in-lab";
import { recordEvent } from "../queries/audit";
import { addRunRequest, getRunRequest, withdrawRequest } from "../queries/run-requests";
import { setExcuse } from "../queries/runs";
import { lockSeries } from "../queries/series";
import { isLive } from "../../lib/runs/ladder";
import { requireOpen } from "./act-on-run";
import { loadCapture } from "./capture";
import { noticeRunAsked } from "./notices";
import { settleSeries } from "./settle-series";

type By = LabScope & { accountId: string };

export interface WantedRunRequest {
  seriesId: string;
  levelDb: number;
  kind: RunRequest["kind"];
  variant: string | null;
  reason: string;
}

/** @throws AppError "not-found", "request.invalid", "conflict.exists", "conflict.state" */
export async function requestRun(
  trx: Trx,
  by: By,
  wanted: WantedRunRequest,
): Promise<{ request: RunRequest; followUp: FollowUp }> {
  await lockSeries(trx, by.labId, wanted.seriesId);
  const capture = await loadCapture(trx, by.labId, wanted.seriesId);
  requireOpen(capture);
  const recorded = new Set(
    capture.runs.flatMap((run) => (run.slot !== null && isLive(run.state) ? [run.slot] : [])),
  );
  const slot = toRequestSlot(
    { level_dB: wanted.levelDb, kind: wanted.kind, variant: wanted.variant },
    capture.planned,
    recorded,
  );
  const id = await addRunRequest(trx, by.labId, by.accountId, { ...wanted, slot });
  const { planned } = await loadCapture(trx, by.labId, wanted.seriesId);
  const label = planned.find((run) => run.slot === slot)?.label ?? slot;
  await recordEvent(trx, by, {
    act: "run-request.made",
    subjectType: "run-request",
    subjectId: id,
    seriesId: wanted.seriesId,
    details: { slot, label, level_dB: wanted.levelDb, reason: wanted.reason },
  });
  const { levelDb, reason } = wanted;
  await noticeRunAsked(trx, by, wanted.seriesId, { label, levelDb, reason });
  const followUp = await settleSeries(trx, by, wanted.seriesId);
  return { request: await toAnswer(trx, by, id), followUp };
}

/** @throws AppError "not-found"; "conflict.state" once a recording stands in its place */
export async function withdrawRunRequest(
  trx: Trx,
  by: By,
  requestId: string,
): Promise<{ request: RunRequest; followUp: FollowUp }> {
  const { seriesId, slot } = await getRunRequest(trx, by.labId, requestId);
  await lockSeries(trx, by.labId, seriesId);
  const capture = await loadCapture(trx, by.labId, seriesId);
  requireOpen(capture);
  const request = await getRunRequest(trx, by.labId, requestId);
  if (request.withdrawn_at !== null) {
    throw new AppError("conflict.state", "This run was withdrawn already.");
  }
  const label = capture.planned.find((run) => run.slot === slot)?.label ?? slot;
  if (capture.runs.some((run) => run.slot === slot || run.wanted_slot === slot)) {
    throw new AppError("conflict.state", `${label} is recorded already, so it stays in the plan.`);
  }
  await setExcuse(trx, by.labId, by.accountId, { seriesId, slot, reason: null });
  await withdrawRequest(trx, by.labId, by.accountId, requestId);
  await recordEvent(trx, by, {
    act: "run-request.withdrawn",
    subjectType: "run-request",
    subjectId: requestId,
    seriesId,
    details: { slot, label },
  });
  const followUp = await settleSeries(trx, by, seriesId);
  return { request: await toAnswer(trx, by, requestId), followUp };
}

async function toAnswer(trx: Trx, by: By, requestId: string): Promise<RunRequest> {
  const { seriesId: _series, ...request } = await getRunRequest(trx, by.labId, requestId);
  return request;
}
