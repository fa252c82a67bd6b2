/** What a person may do with a recording, one act at a time, each with its line in the trail. */
import type { RunAct } from "../../lib/api/runs";
import { AppError } from "../../lib/errors/app-error";
import type { FollowUp } from "../../lib/jobs/follow-up";
import { toVerdict } from "../../lib/runs/arrival/verdict";
import { isLive } from "../../lib/runs/ladder";
import type { Trx } from "../client";
import type { LabScope } from "../in-lab";
import { recordEvent } from "../queries/audit";
import { assignRun, getRun, updateRun, type RunChange, type RunRow } from "../queries/runs";
import { lockSeries } from "../queries/series";
import { loadCapture, type Capture } from "./capture";
import { recheckLevels, recheckNeighbours } from "./recheck-levels";
import { settleSeries } from "./settle-series";

type By = LabScope & { accountId: string };
type Act<Name extends RunAct["act"]> = Extract<RunAct, { act: Name }>;

const NO_REASON = { reason: null, reason_by: null, reason_at: null } as const;

/**
 * @throws AppError "not-found", "conflict.state", "run.locked", "request.invalid",
 *   "audio.channel-missing"
 */
export async function actOnRun(trx: Trx, by: By, runId: string, act: RunAct): Promise<FollowUp> {
  const { series_id: seriesId } = await getRun(trx, by.labId, runId);
  await lockSeries(trx, by.labId, seriesId);
  const capture = await loadCapture(trx, by.labId, seriesId);
  requireOpen(capture);
  const run = await getRun(trx, by.labId, runId);
  const { event, details, change } = await carryOut(trx, by, capture, run, act);
  await updateRun(trx, by.labId, runId, change);
  await recordEvent(trx, by, {
    act: event,
    subjectType: "run",
    subjectId: runId,
    seriesId,
    details: { file: run.file_name, label: labelOf(capture, run.slot), ...details },
  });
  const stale = PUTS_ASIDE.has(act.act) ? await recheckOthers(trx, by.labId, run) : [];
  const followUp = await settleSeries(trx, by, seriesId);
  const checks = change.state === "checking" ? [runId] : [];
  return { ...followUp, runIds: [...checks, ...stale, ...followUp.runIds] };
}

const PUTS_ASIDE: ReadonlySet<RunAct["act"]> = new Set(["exclude", "bring-back"]);

/** What was held against a recording is held anew when it no longer counts, or does so again. */
async function recheckOthers(trx: Trx, labId: string, run: RunRow): Promise<string[]> {
  if (run.slot === null) return [];
  const capture = await loadCapture(trx, labId, run.series_id);
  const calibrator = run.role === "calibrator-before" || run.role === "calibrator-after";
  return calibrator
    ? recheckLevels(trx, labId, capture)
    : recheckNeighbours(trx, labId, capture, run.id);
}

export function requireUnarchived({ series }: Pick<Capture, "series">): void {
  if (series.archived_at !== null) {
    throw new AppError("conflict.state", "This series is archived. Restore it first.");
  }
}

/** Recordings of an archived or signed-off series stay as they are. */
export function requireOpen({ series }: Pick<Capture, "series">): void {
  requireUnarchived({ series });
  if (series.state === "signed off") {
    throw new AppError("conflict.state", "This series is signed off. An analyst can reopen it.");
  }
}

interface Outcome {
  event: string;
  details: Record<string, unknown>;
  change: RunChange;
}

async function carryOut(
  trx: Trx,
  by: By,
  capture: Capture,
  run: RunRow,
  act: RunAct,
): Promise<Outcome> {
  const said = (reason: string): RunChange => ({
    reason,
    reason_by: by.accountId,
    reason_at: new Date(),
  });
  switch (act.act) {
    case "assign":
      return assign(trx, by, capture, run, act);
    case "choose-channel":
      return chooseChannel(run, act);
    case "keep":
      requireState(run, ["failed"], "Only a take that failed its checks needs keeping.");
      if (run.slot === null) throw notAssigned();
      return {
        event: "run.kept",
        details: { reason: act.reason },
        change: { state: "kept", ...said(act.reason) },
      };
    case "withdraw-keep":
      requireState(run, ["kept"], "This take is not kept with a reason.");
      return {
        event: "run.keep-withdrawn",
        details: {},
        change: { state: "failed", ...NO_REASON },
      };
    case "exclude":
      requireLive(run);
      return {
        event: "run.excluded",
        details: { reason: act.reason },
        change: { state: "excluded", ...said(act.reason) },
      };
    case "bring-back":
      return bringBack(capture, run);
    case "check-again":
      requireLive(run);
      return { event: "run.check-repeated", details: {}, change: { state: "checking" } };
  }
}

async function assign(
  trx: Trx,
  by: By,
  capture: Capture,
  run: RunRow,
  act: Act<"assign">,
): Promise<Outcome> {
  requireLive(run);
  const place = capture.planned.find((p) => p.slot === act.slot);
  if (place === undefined) {
    throw new AppError("request.invalid", `The plan has no run ${act.slot}.`, {
      details: { fields: [{ path: "slot", message: "is no run of the plan" }] },
    });
  }
  const slot = capture.ladder.find((l) => l.slot === act.slot);
  if (slot?.waits === true) {
    throw new AppError("run.locked", `${place.label}: ${slot.lockReason ?? "not open yet"}.`, {
      details: { slot: act.slot },
    });
  }
  await assignRun(trx, by.labId, { id: run.id, seriesId: run.series_id }, place);
  return {
    event: "run.assigned",
    details: { slot: act.slot, label: place.label },
    change: { state: "checking", wanted_slot: act.slot, ...NO_REASON },
  };
}

function chooseChannel(run: RunRow, act: Act<"choose-channel">): Outcome {
  requireLive(run);
  const channels = run.report?.channels ?? 0;
  if (channels > 0 && act.channel > channels) {
    throw new AppError(
      "audio.channel-missing",
      `${run.file_name} has ${channels === 1 ? "one channel" : `${channels} channels`}; there is no channel ${act.channel}.`,
      { details: { channels, channel: act.channel } },
    );
  }
  const reason = run.slot === null ? {} : NO_REASON;
  return {
    event: "run.channel-chosen",
    details: { channel: act.channel },
    change: { state: "checking", channel: act.channel, ...reason },
  };
}

function bringBack(capture: Capture, run: RunRow): Outcome {
  requireState(run, ["excluded"], "This recording is not excluded.");
  const holder = capture.runs.find(
    (other) => run.slot !== null && other.slot === run.slot && isLive(other.state),
  );
  if (holder !== undefined) {
    throw new AppError(
      "conflict.state",
      `${holder.file_name} holds this place now. Exclude it first.`,
    );
  }
  const state = run.report === null ? "checking" : toVerdict(run.report);
  return { event: "run.brought-back", details: {}, change: { state, ...NO_REASON } };
}

function requireState(run: RunRow, states: readonly RunRow["state"][], why: string): void {
  if (states.includes(run.state)) return;
  throw new AppError("conflict.state", `${why} It is ${run.state}.`, {
    details: { state: run.state },
  });
}

function requireLive(run: RunRow): void {
  requireState(
    run,
    ["checking", "passed", "warned", "failed", "kept"],
    "A replaced or excluded recording stays as it is.",
  );
}

const notAssigned = (): AppError =>
  new AppError("conflict.state", "Assign the recording to a run of the plan first.");

function labelOf(capture: Capture, slot: string | null): string | null {
  return capture.planned.find((p) => p.slot === slot)?.label ?? null;
}
