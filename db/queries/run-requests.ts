/** Runs that an analyst asked for; each opens a place in the plan of its series. */
import { AppError } from "../../lib/errors/app-error";
import type { RunRequest } from "../../lib/review/review-schema";
import type { RequestedRun } from "../../lib/series/planned-runs";
import { USABLE_RUN_STATES } from "../../lib/runs/arrival-schema";
import type { Trx } from "../client";

export type RunRequestRow = RunRequest & { seriesId: string };

/** Oldest first; withdrawn ones too. */
export async function listRunRequests(
  trx: Trx,
  labId: string,
  seriesId: string,
): Promise<RunRequest[]> {
  const rows = await requestsOf(trx, labId)
    .where("q.series_id", "=", seriesId)
    .orderBy("q.requested_at")
    .orderBy("q.id")
    .execute();
  return rows.map(toRunRequest);
}

/** @throws AppError "not-found" */
export async function getRunRequest(
  trx: Trx,
  labId: string,
  requestId: string,
): Promise<RunRequestRow> {
  const row = await requestsOf(trx, labId).where("q.id", "=", requestId).executeTakeFirst();
  if (row === undefined) throw new AppError("not-found", "There is no such run asked for.");
  return { ...toRunRequest(row), seriesId: row.series_id };
}

/** Places that requests hold open in the plan, in the order in which they were asked for. */
export async function listRequestedRuns(
  trx: Trx,
  labId: string,
  seriesId: string,
): Promise<RequestedRun[]> {
  const requests = await listRunRequests(trx, labId, seriesId);
  return requests
    .filter((request) => request.withdrawn_at === null)
    .map((request) => ({
      slot: request.slot,
      levelDb: request.level_dB,
      kind: request.kind,
      variant: request.variant,
      by: request.by.name,
      reason: request.reason,
    }));
}

/** Hold the series (lockSeries) while asking. @returns its id. */
export async function addRunRequest(
  trx: Trx,
  labId: string,
  accountId: string,
  request: {
    seriesId: string;
    levelDb: number;
    kind: RunRequest["kind"];
    variant: string | null;
    reason: string;
    slot: string;
  },
): Promise<string> {
  const row = await trx
    .insertInto("run_requests")
    .values({
      lab_id: labId,
      series_id: request.seriesId,
      level_db: request.levelDb,
      kind: request.kind,
      variant: request.variant,
      reason: request.reason,
      slot: request.slot,
      requested_by: accountId,
    })
    .returning("id")
    .executeTakeFirstOrThrow();
  return row.id;
}

export async function withdrawRequest(
  trx: Trx,
  labId: string,
  accountId: string,
  requestId: string,
): Promise<void> {
  await trx
    .updateTable("run_requests")
    .set({ withdrawn_by: accountId, withdrawn_at: new Date() })
    .where("lab_id", "=", labId)
    .where("id", "=", requestId)
    .where("withdrawn_at", "is", null)
    .execute();
}

function requestsOf(trx: Trx, labId: string) {
  return trx
    .selectFrom("run_requests as q")
    .leftJoin("accounts as a", "a.id", "q.requested_by")
    .selectAll("q")
    .select((eb) => [
      "a.name as byName",
      eb
        .exists(
          eb
            .selectFrom("runs as r")
            .select("r.id")
            .whereRef("r.lab_id", "=", "q.lab_id")
            .whereRef("r.series_id", "=", "q.series_id")
            .whereRef("r.slot", "=", "q.slot")
            .where("r.state", "in", USABLE_RUN_STATES),
        )
        .as("fulfilled"),
    ])
    .where("q.lab_id", "=", labId);
}

function toRunRequest(
  row: Awaited<ReturnType<ReturnType<typeof requestsOf>["executeTakeFirstOrThrow"]>>,
): RunRequest {
  return {
    id: row.id,
    slot: row.slot,
    level_dB: row.level_db,
    kind: row.kind,
    variant: row.variant,
    reason: row.reason,
    by: { id: row.requested_by, name: row.byName ?? "somebody" },
    at: row.requested_at.toISOString(),
    fulfilled: row.withdrawn_at === null && Boolean(row.fulfilled),
    withdrawn_at: row.withdrawn_at?.toISOString() ?? null,
  };
}
