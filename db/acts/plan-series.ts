/** Starting a series, and changing its plan while that is still open. */
import { AppError } from "../../lib/errors/app-error";
import type { Plan } from "../../lib/series/plan-schema";
import type { Criterion } from "../../lib/series/series-schema";
import type { Trx } from "../client";
import type { LabScope } from "../in-lab";
import { recordEvent } from "../queries/audit";
import { getLoudspeaker } from "../queries/loudspeakers";
import { findRecording } from "../queries/recordings";
import { listRuns } from "../queries/runs";
import { createSeries, getSeries, lockSeries, updatePlan } from "../queries/series";
import { requireOpen } from "./act-on-run";

type By = LabScope & { accountId: string };

/** @returns its id. @throws AppError "not-found" where the loudspeaker is not of this lab. */
export async function startSeries(
  trx: Trx,
  by: By,
  loudspeakerId: string,
  plan: Plan,
): Promise<string> {
  const { maker, model } = await getLoudspeaker(trx, by.labId, loudspeakerId);
  await requireMicrophone(trx, by.labId, plan);
  const { id } = await createSeries(trx, by.labId, by.accountId, { loudspeakerId, plan });
  await recordEvent(trx, by, {
    act: "series.created",
    subjectType: "series",
    subjectId: id,
    seriesId: id,
    details: { loudspeaker: `${maker} ${model}` },
  });
  return id;
}

/** @throws AppError "plan.locked", "conflict.changed", "conflict.state", "not-found" */
export async function replacePlan(
  trx: Trx,
  by: By,
  change: { seriesId: string; plan: Plan; planVersion: number },
): Promise<void> {
  await lockSeries(trx, by.labId, change.seriesId);
  const series = await getSeries(trx, by.labId, change.seriesId);
  requireOpen({ series });
  const runs = await listRuns(trx, by.labId, change.seriesId);
  if (runs.length > 0) {
    throw new AppError(
      "plan.locked",
      "A recording is in, so the plan is fixed: it says what was played. Start another series for another plan; criteria may still be changed.",
    );
  }
  await requireMicrophone(trx, by.labId, change.plan);
  await updatePlan(trx, by.labId, by.accountId, change);
  await recordEvent(trx, by, {
    act: "plan.changed",
    subjectType: "series",
    subjectId: change.seriesId,
    seriesId: change.seriesId,
    details: { version: change.planVersion + 1 },
  });
}

/** Criteria are a setting of the next analysis, not of what was played. */
export async function replaceCriteria(
  trx: Trx,
  by: By,
  change: { seriesId: string; criteria: Criterion[]; planVersion: number },
): Promise<void> {
  await lockSeries(trx, by.labId, change.seriesId);
  const series = await getSeries(trx, by.labId, change.seriesId);
  requireOpen({ series });
  await updatePlan(trx, by.labId, by.accountId, {
    seriesId: change.seriesId,
    plan: { ...series.plan, criteria: change.criteria },
    planVersion: change.planVersion,
  });
  await recordEvent(trx, by, {
    act: "criteria.changed",
    subjectType: "series",
    subjectId: change.seriesId,
    seriesId: change.seriesId,
    details: { criteria: change.criteria },
  });
}

/** The plan names its microphone file by digest: the lab must hold those bytes. */
async function requireMicrophone(trx: Trx, labId: string, plan: Plan): Promise<void> {
  if (plan.microphone === null) return;
  if ((await findRecording(trx, labId, plan.microphone.digest)) !== null) return;
  throw new AppError(
    "plan.invalid",
    "The microphone file of this plan was not sent to this lab. Send it first, then save the plan.",
    {
      details: {
        fields: [{ path: "plan.microphone.digest", message: "is no file of this lab" }],
      },
    },
  );
}
